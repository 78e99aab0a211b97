import type { GradeRank } from '../../exams/index.js';
import type { Distribution } from '../distribution.js';

/**
 * One exam as a choice: at most one candidate sequence per view, so that the questions asked get the
 * best grades that fit the slot, the stay limit and the policy's confidence.
 */

/** A sequence that could serve a view. */
export interface ChoiceCandidate {
  readonly id: string;
  /** One per question of the problem; what this candidate lets the question reach at most. */
  readonly ranks: readonly GradeRank[];
  /** Whole percent, 0..100. */
  readonly quality: number;
  /** Nominal scanner time without repeats, whole seconds; counted for "less time" and the stay limit. */
  readonly nominalS: number;
  /** Table time including repeats and the idle gap. */
  readonly time: Distribution;
}

/** A picture that questions need; served by at most one candidate. */
export interface ChoiceView {
  readonly id: string;
  readonly candidates: readonly ChoiceCandidate[];
  /** Index of a view that must be chosen too (before contrast for after contrast). */
  readonly requiresView?: number;
}

export interface ChoiceQuestion {
  readonly id: string;
  /** Whole number 1..9. */
  readonly weight: number;
  /** View indices, all needed; one that the problem does not have can never be met. */
  readonly needs: readonly number[];
}

/** Time spent once if any of the views is chosen (injection, coil change). */
export interface SharedTime {
  readonly views: readonly number[];
  readonly nominalS: number;
  readonly time: Distribution;
}

/**
 * The whole choice. A set of picks is allowed when every chosen view serves an answer (a question of
 * rank 1 or more needs it, or a chosen view that does requires it), required views are chosen too, nominal seconds stay
 * within the stay limit, and P(table time <= slot) reaches the confidence. Choosing nothing is always
 * allowed, even if the base alone misses the slot.
 */
export interface ChoiceProblem {
  readonly questions: readonly ChoiceQuestion[];
  readonly views: readonly ChoiceView[];
  /** Entry, positioning, localiser, exit: always spent. */
  readonly base: Distribution;
  readonly shared: readonly SharedTime[];
  readonly slotS: number;
  /** Probability to end inside the slot, e.g. 0.9. */
  readonly confidence: number;
  /** Nominal seconds in the scanner may not exceed this. */
  readonly stayLimitS: number;
  /** Part of the base counted against the stay limit, seconds. */
  readonly baseNominalS: number;
}

/** Lexicographic, in this order; the first four: more is better, the last: less. */
export interface ChoiceObjective {
  /** Sum of the weights of questions at rank 3. */
  readonly diagnostic: number;
  /** Sum of the weights of questions at rank 2 or more. */
  readonly targeted: number;
  /** Sum of the weights of questions at rank 1 or more. */
  readonly screening: number;
  /** Sum of the chosen candidates' quality, percent. */
  readonly quality: number;
  /** Nominal seconds of everything chosen, shared times included, the base not. */
  readonly nominalS: number;
}

export interface Choice {
  /** Candidate index per view, -1 for none. */
  readonly picks: readonly number[];
  /** Grade reached per question. */
  readonly ranks: readonly GradeRank[];
  readonly objective: ChoiceObjective;
  /** P(table time <= slot). */
  readonly chance: number;
  readonly tableTime: Distribution;
  /** In words: which method found it and what stands behind it. */
  readonly provedBy: string;
}

/** Lexicographic comparison: above zero when `a` is the better, below when `b` is, zero when equal. */
export function compareObjectives(a: ChoiceObjective, b: ChoiceObjective): number {
  return (
    a.diagnostic - b.diagnostic ||
    a.targeted - b.targeted ||
    a.screening - b.screening ||
    a.quality - b.quality ||
    b.nominalS - a.nominalS
  );
}

export { judgeChoice, type Judgement } from './judge.js';
