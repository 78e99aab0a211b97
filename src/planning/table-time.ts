import { ProblemError } from '../shared/index.js';
import {
  atSeconds,
  coarsened,
  convolve,
  lognormal,
  mixture,
  repeats,
  type Distribution,
} from './distribution.js';

/** What the table time of one sequence is made of. All times in seconds. */
export interface TimedStep {
  /** Acquisition without repeats. */
  readonly acquisitionS: number;
  /** Pause before the next sequence (choosing, adjusting). */
  readonly idleS: number;
  /** Chance that the whole sequence has to be run again. It is run again once at most. */
  readonly repeatChance: number;
  /** Pieces that can be taken again one by one (holds, triggered shots); each once at most. */
  readonly retake?: {
    readonly intervals: number;
    readonly intervalS: number;
    readonly spoilChance: number;
  };
  /** Coefficient of variation of the acquisition where breathing or the heart sets the pace. */
  readonly variation?: number;
}

/**
 * Table time of one sequence: acquisition (varying where triggered), pieces taken again, the pause, and
 * with `repeatChance` the whole of it once more. A second failure is not repeated: it is lost, and the
 * grade already accounts for it.
 */
export function sequenceTime(step: TimedStep): Distribution {
  const { acquisitionS, idleS, repeatChance, retake, variation } = step;
  if (!(repeatChance >= 0 && repeatChance <= 1)) {
    throw new ProblemError({
      code: 'unusable-chance',
      thing: 'chance that a sequence is repeated',
      value: `${repeatChance}`,
      limit: 'expected a number between 0 and 1',
      wayOut: 'Correct the movement chances of the policy or the statement.',
    });
  }
  const stepS = pointsApartS(acquisitionS * (variation ?? 0));
  const whole =
    variation === undefined
      ? atSeconds(acquisitionS)
      : coarsened(lognormal(acquisitionS, variation), stepS);
  const run =
    retake === undefined
      ? whole
      : convolve(whole, repeats(retake.intervals, retake.spoilChance, retake.intervalS));
  const once = coarsened(convolve(run, atSeconds(idleS)), stepS);
  if (repeatChance === 0) return once;
  return mixture([
    { weight: 1 - repeatChance, of: once },
    { weight: repeatChance, of: convolve(once, once) },
  ]);
}

/**
 * Seconds between the points that a time of this standard deviation is kept on: a sixth of it, so the
 * variance grows by less than one percent.
 */
export function pointsApartS(deviationS: number): number {
  return Math.max(1, Math.floor(deviationS / 6));
}
