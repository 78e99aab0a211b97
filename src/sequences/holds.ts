/** Work to be split into breath-holds. */
export interface HeldWork {
  /** Whole repeats or whole slices. */
  readonly units: number;
  readonly unitS: number;
  /** Spent at the start of every hold, s. */
  readonly startUpS: number;
  /** The whole must go into one hold (a three-dimensional slab). */
  readonly wholeOnly: boolean;
  readonly holdSpanS: number;
  readonly recoveryGapS: number;
  readonly mostHolds: number;
  /** Asked number of holds; the fewest possible when absent. */
  readonly holds?: number;
}

export interface HoldSplit {
  readonly holds: number;
  readonly longestS: number;
  /** All holds and the rests between them, s. */
  readonly totalS: number;
}

/**
 * Splits held work into breath-holds no longer than the hold span, whole units each.
 * Undefined when even one unit does not fit, or more holds than allowed would be needed.
 */
export function holdLengths(work: HeldWork): HoldSplit | undefined {
  const perHold = work.wholeOnly
    ? work.units * work.unitS + work.startUpS <= work.holdSpanS + 1e-9
      ? work.units
      : 0
    : Math.floor((work.holdSpanS - work.startUpS) / work.unitS + 1e-9);
  if (perHold < 1) return undefined;
  const fewest = Math.ceil(work.units / perHold);
  const holds = work.holds ?? fewest;
  if (holds < fewest || holds > work.mostHolds || holds > work.units) return undefined;
  if (work.wholeOnly && holds !== 1) return undefined;
  return {
    holds,
    longestS: Math.ceil(work.units / holds) * work.unitS + work.startUpS,
    totalS: work.units * work.unitS + holds * work.startUpS + (holds - 1) * work.recoveryGapS,
  };
}
