/** Exams further than this from their slot (the demo's, say) run by the clock of their first tap, ms. */
const farMs = 12 * 3_600_000;

/** Whether an instant is near enough to a slot's start for the slot to be its clock. */
export const isBySlot = (atMs: number, slotMs: number): boolean => Math.abs(atMs - slotMs) < farMs;
