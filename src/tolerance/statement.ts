import type { PatientClass, StatementSource } from '../exams/index.js';

/** One span as somebody stated it, or not asked yet. Seconds. */
export type SpanStatement =
  { readonly kind: 'stated'; readonly seconds: number } | { readonly kind: 'not asked' };

export const conditions = [
  'claustrophobia',
  'tremor',
  'breathless',
  'pain',
  'confused',
  'small child',
] as const;
/** Only what bears on stillness, breath or bearing the scanner. */
export type Condition = (typeof conditions)[number];

/**
 * What a patient can bear, as stated. Never holds race, ethnicity, or anything else about a person
 * that is not about stillness, breath or bearing.
 */
export interface ToleranceStatement {
  /** Longest time still in one go. */
  readonly still: SpanStatement;
  /** Longest breath-hold; 0 s stated: cannot. */
  readonly hold: SpanStatement;
  /** Longest time in the scanner at all. */
  readonly stay: SpanStatement;
  readonly saidBy: StatementSource;
  readonly followsInstructions: 'yes' | 'no' | 'not asked';
  readonly conditions: readonly Condition[];
  readonly patientClass: PatientClass;
  readonly ageYears?: number;
}
