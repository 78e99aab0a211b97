import type { MendProblem } from './mend-problem.js';
import type { Booking } from './scanners.js';

/** A minute of a day. */
export interface Moment {
  readonly date: string;
  readonly minute: number;
}

export const before = (a: Moment, b: Moment) =>
  a.date < b.date || (a.date === b.date && a.minute < b.minute);
export const startOf = (b: Booking): Moment => ({ date: b.date, minute: b.startMin });
export const later = (a: Moment, b: Moment): Moment => (before(a, b) ? b : a);

/** Whether somebody is on the way in, or has come already, and must not be moved. */
export function onTheWayIn(
  problem: Pick<MendProblem, 'movableFrom' | 'onTheWay'>,
  visit: Booking,
): boolean {
  return (
    before(startOf(visit), problem.movableFrom) || problem.onTheWay?.has(visit.requestId) === true
  );
}
