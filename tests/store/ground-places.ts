/** Invented places, without a test runner: the child processes use them too. */
export const day = '2026-12-08';

/** A place on scanner mr1; minutes since midnight. */
export const at = (startMin: number, slotMin: number, teams: readonly string[] = []) => ({
  scannerId: 'mr1',
  date: day,
  startMin,
  slotMin,
  teams,
});
