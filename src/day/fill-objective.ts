import type { SlotOption } from './fill-problem.js';

/**
 * What a filled department is worth, whole numbers, compared lexicographically: the first three more is better, the
 * last three less.
 */
export interface FillObjective {
  /** Weights answered diagnostically, times priority, twice when by the due date. */
  readonly diagnostic: number;
  readonly targeted: number;
  readonly screening: number;
  /** Chances of overrun, whole percent, summed. */
  readonly overrunPercent: number;
  /** Coil changes between neighbours on a scanner's day. */
  readonly coilChanges: number;
  /** Steps of five minutes from the start of the first day to each start, times priority. */
  readonly waiting: number;
}

export const nothingFilled: FillObjective = {
  diagnostic: 0,
  targeted: 0,
  screening: 0,
  overrunPercent: 0,
  coilChanges: 0,
  waiting: 0,
};

/** Above zero when `a` is the better, below when `b` is. */
export function compareFills(a: FillObjective, b: FillObjective): number {
  return (
    a.diagnostic - b.diagnostic ||
    a.targeted - b.targeted ||
    a.screening - b.screening ||
    b.overrunPercent - a.overrunPercent ||
    b.coilChanges - a.coilChanges ||
    b.waiting - a.waiting
  );
}

/** One number that leads a search in about the same order; never the judge. */
export const guideOf = (o: FillObjective): number =>
  o.diagnostic +
  1e-2 * o.targeted +
  1e-4 * o.screening -
  1e-5 * o.overrunPercent -
  1e-6 * o.coilChanges -
  1e-10 * o.waiting;

/** What one visit adds to the guide, its start and neighbours left out. */
export const spotValue = (o: SlotOption, factor: number): number =>
  factor * (o.diagnostic + 1e-2 * o.targeted + 1e-4 * o.screening) - 1e-5 * o.overrun;
