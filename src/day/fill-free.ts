import {
  dateRefusal,
  noonStep,
  partWindow,
  stepMin,
  type FillProblem,
  type WaitingRequest,
} from './fill-problem.js';
import { freeGaps } from './gaps.js';
import type { Booking, DayStretch, Scanner } from './scanners.js';

/** Free stretches of a scanner's day beside what is booked and proposed. */
export function freeBeside(
  problem: FillProblem,
  proposed: readonly Booking[],
  scanner: Scanner,
  date: string,
): readonly DayStretch[] {
  const there = [...problem.taken, ...proposed].filter(
    (b) => b.scannerId === scanner.id && b.date === date,
  );
  return [...freeGaps(scanner, there, stepMin)].sort((a, b) => a.fromMin - b.fromMin);
}

/** The first start in a gap at which a visit of this length may begin, by the part of the day; undefined if none. */
export function startIn(
  gap: DayStretch,
  request: Pick<WaitingRequest, 'canCome'>,
  slotMin: number,
): number | undefined {
  const { release, last } = partWindow(request.canCome);
  const startMin = Math.max(Math.ceil(gap.fromMin / stepMin) * stepMin, release * stepMin);
  return startMin <= last * stepMin && startMin + slotMin <= gap.toMin ? startMin : undefined;
}

/** Earliest free place of this length on these scanners, as the patient can come. Teams are not looked at. */
export function earliestFree(
  problem: FillProblem,
  proposed: readonly Booking[],
  request: WaitingRequest,
  slotOn: (scanner: Scanner) => number | undefined,
): Booking | undefined {
  let best: Booking | undefined;
  for (const date of problem.department.days) {
    if (dateRefusal(request, date) !== undefined) continue;
    for (const scanner of problem.department.scanners) {
      const slotMin = slotOn(scanner);
      if (slotMin === undefined) continue;
      for (const gap of freeBeside(problem, proposed, scanner, date)) {
        const startMin = startIn(gap, request, slotMin);
        if (startMin === undefined) continue;
        if (best === undefined || startMin < best.startMin)
          best = { requestId: request.id, scannerId: scanner.id, date, startMin, slotMin };
        break;
      }
    }
    if (best !== undefined) return best;
  }
  return best;
}

/** Whether the part of the day lets a visit start at all within a stretch. */
export const partWords = (request: Pick<WaitingRequest, 'canCome'>): string =>
  request.canCome.partOfDay === 'any'
    ? ''
    : ` in the ${request.canCome.partOfDay}${request.canCome.partOfDay === 'morning' ? ` (before ${noonStep / 12}:00)` : ''}`;
