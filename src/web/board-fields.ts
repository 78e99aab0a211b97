import { bookingConflicts, type DayStretch, type Scanner } from '../day/index.js';
import { parseClockMin, parseDurationS } from '../interchange/index.js';
import { ProblemError, sayProblem } from '../shared/index.js';
import type { WebDeps } from './deps.js';

/** `mr1_540_570`, checked against the scanners; the gap may have shrunk since, the database has the last word. */
export function readGap(
  value: unknown,
  scanners: readonly Scanner[],
): { readonly scanner: Scanner; readonly gap: DayStretch } | undefined {
  const match =
    typeof value === 'string' ? /^([A-Za-z0-9-]+)_(\d{1,4})_(\d{1,4})$/.exec(value) : null;
  const scanner = scanners.find((s) => s.id === match?.[1]);
  const fromMin = Number(match?.[2]);
  const toMin = Number(match?.[3]);
  if (scanner === undefined || !(toMin > fromMin) || toMin > 1440) return undefined;
  return { scanner, gap: { fromMin, toMin } };
}

/** A 24-hour time as minutes since midnight. */
export function readClock(text: string): number {
  const minute = parseClockMin(text);
  if (minute === undefined) {
    throw new ProblemError({
      code: 'start-time',
      thing: 'field start',
      value: `"${text}"`,
      limit: 'a 24-hour time',
      wayOut: 'Write for example 09:30.',
    });
  }
  return minute;
}

/** A slot length: plain minutes, or a number with its unit. */
export function readSlotMin(text: string): number {
  const seconds = /^\d+$/.test(text.trim()) ? Number(text) * 60 : parseDurationS(text);
  if (seconds === undefined || seconds < 300 || seconds > 8 * 3600) {
    throw new ProblemError({
      code: 'slot-length',
      thing: 'field slot',
      value: `"${text}"`,
      limit: '5 minutes to 8 hours',
      wayOut: 'Write the minutes, for example 30.',
    });
  }
  return Math.ceil(seconds / 60);
}

/** Refuses a place in closed hours or a break, before the database is asked about the rest. */
export function refuseOutsideHours(
  requestId: string,
  scanner: Scanner,
  date: string,
  startMin: number,
  slotMin: number,
  deps: WebDeps,
) {
  const [conflict] = bookingConflicts(
    [{ requestId, scannerId: scanner.id, date, startMin, slotMin }],
    deps.department,
  );
  if (conflict !== undefined)
    throw new ProblemError({
      ...conflict,
      thing: sayProblem(conflict).split(':')[0] ?? conflict.thing,
    });
}

/** The thing named is not there any more. */
export const gone = (thing: string, value: string) =>
  new ProblemError({
    code: 'gone',
    thing,
    value: `"${value}"`,
    limit: 'it is not there any more',
    wayOut: 'Open the day board again.',
  });
