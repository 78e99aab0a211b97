import type { StatementSource } from '../exams/index.js';

export const achievedKinds = ['still', 'hold', 'stay', 'entry', 'exam'] as const;
export type AchievedKind = (typeof achievedKinds)[number];

/**
 * What one exam showed of one thing. One exam gives at most one record a kind, so that records stand for themselves, as
 * survival curves and their limits need it.
 *
 * - still: time that had to be kept still, pieces added up, until the first movement
 * - hold: the breath-hold at which the breath first gave out, or the longest that was asked and kept
 * - stay: time in the scanner until the patient first wanted out
 * - entry: getting in, without what the policy adds for the exam's positioning, localiser and first pause
 * - exam: start of getting in to the end of the exam
 *
 * Nothing about a person stands in it beyond the group: no number, no age, and never race or ethnicity.
 */
export interface AchievedRecord {
  readonly kind: AchievedKind;
  /** The policy's group, as planning picks it; for `entry` class and transport; for `exam` the exam. */
  readonly group: string;
  readonly seconds: number;
  /** True: it ended before the patient moved, let go or wanted out; more was not asked. */
  readonly censored: boolean;
  /** What was said before the exam, s; for `exam` what was planned. Absent: nobody was asked. */
  readonly statedS?: number;
  readonly saidBy?: StatementSource;
  /** ISO date of the day it was recorded. */
  readonly on: string;
}
