import type { Basis, BreathingRules, Family } from '../sequences/index.js';
import type { Grade, GradeLevels } from './grade.js';

/** A value with where it comes from; every number of the policy is one. */
export interface Sourced<T> {
  readonly value: T;
  readonly basis: Basis;
  readonly source: string;
}

/** A signed rule: what one family may at most answer for one question. */
export interface CatalogueEntry {
  /** Exam and question ids joined by a slash; `*` for every question of the exam. */
  readonly question: string;
  readonly family: Family;
  readonly atMost: Grade;
  readonly because: string;
  readonly basis: Basis;
  readonly source: string;
  readonly signedBy: string;
  /** ISO date. */
  readonly signedOn: string;
}

export const patientClasses = ['outpatient', 'inpatient', 'emergency'] as const;
export type PatientClass = (typeof patientClasses)[number];

/** Who made a tolerance statement. */
export const statementSources = ['patient', 'carer', 'referrer', 'earlier exam'] as const;
export type StatementSource = (typeof statementSources)[number];

/** Mean (s) and coefficient of variation of a duration. */
export interface Spread {
  readonly meanS: number;
  readonly cv: number;
}

/** Chance that a group goes undisturbed for a time: the calibration point of a survival curve. */
export interface Calibration {
  readonly chance: number;
  readonly atS: number;
}

/** What the site's own records may replace. */
export const learnedKinds = ['still', 'hold', 'stay', 'entry'] as const;
export type LearnedKind = (typeof learnedKinds)[number];

/** A signature that puts the site's own records, up to the day it was given, in the place of a prior. */
export interface LearningEntry {
  readonly group: string;
  readonly kind: LearnedKind;
  readonly signedBy: string;
  /** ISO date; later records do not change what was signed. */
  readonly signedOn: string;
  readonly because: string;
  /** Where the curve is read instead of at the prior's own point, s: records that end earlier are then carried on. */
  readonly readAtS?: number;
  /** The same for a statement: share of what was said, 0..1. */
  readonly readAtShare?: number;
}

export interface SitePolicy {
  readonly site: string;
  readonly signedBy: string;
  readonly signedOn: string;
  readonly catalogue: {
    /** What a family may at most answer where no entry says otherwise. */
    readonly otherwise: Readonly<Record<Family, Sourced<Grade>>>;
    readonly entries: readonly CatalogueEntry[];
  };
  readonly physics: {
    /** Contrast-to-noise of the target relative to the view's full-quality reference, fraction. */
    readonly relativeContrastToNoise: Sourced<GradeLevels>;
    /** Border width over the width a caliper reading tolerates, fraction; less is better. */
    readonly borderOverCaliper: Sourced<GradeLevels>;
  };
  readonly movement: {
    /** Chance of a clean acquisition. */
    readonly cleanChance: Sourced<GradeLevels>;
    /** Part of the time already spent that still counts against the patient after a rest, 0..1. */
    readonly restCarryOver: Sourced<number>;
    /** Time already spent that choosing assumes, s; the running order then uses the real one. */
    readonly assumedElapsedS: Sourced<number>;
    /** Pieces up to this long are taken again on the spot, once, s. */
    readonly retakeUpToS: Sourced<number>;
    /** Part of movements that a rotating-blade acquisition corrects, 0..1. */
    readonly bladesCorrect: Sourced<number>;
    /** Weibull shape of time to first movement; 1: constant hazard. */
    readonly shape: Sourced<number>;
  };
  readonly breathing: Sourced<BreathingRules> & {
    readonly breathsPerMinute: Sourced<number>;
    /** Weibull shape of time to failing a hold. */
    readonly shape: Sourced<number>;
  };
  readonly time: {
    /** Wished chance that the exam ends inside its slot. */
    readonly finishConfidence: Sourced<number>;
    /** Wished chance that the patient bears the planned time. */
    readonly stayConfidence: Sourced<number>;
    readonly entry: Sourced<Spread>;
    readonly exit: Sourced<Spread>;
    readonly localiserS: Sourced<number>;
    readonly idleBetweenS: Sourced<number>;
    readonly injection: Sourced<Spread>;
    readonly coilChange: Sourced<Spread>;
    /** Variation of triggered acquisitions. */
    readonly triggeredCv: Sourced<number>;
    /** Added to entry by patient class, s. */
    readonly classExtraS: Readonly<Record<PatientClass, Sourced<number>>>;
    /** Added to entry by transport, s. */
    readonly transportExtraS: Readonly<
      Record<'walking' | 'wheelchair' | 'trolley' | 'bed', Sourced<number>>
    >;
  };
  readonly tolerance: {
    /** Chance that a stated span is reached, by who said so. */
    readonly statedReached: Readonly<Record<StatementSource, Sourced<number>>>;
    /** The same of one kind of span, where the site's own records replace the figure; never in the file. */
    readonly statedReachedLearned?: Readonly<
      Partial<
        Record<
          'still' | 'hold' | 'stay',
          Readonly<Partial<Record<StatementSource, Sourced<number>>>>
        >
      >
    >;
    /** Where nothing was stated. */
    readonly still: Readonly<Record<PatientClass, Sourced<Calibration>>>;
    /** Children by age: the first row whose `underYears` exceeds the age. */
    readonly stillChild: readonly (Sourced<Calibration> & { readonly underYears: number })[];
    readonly holdAdult: Sourced<Spread>;
    readonly holdBreathless: Sourced<Spread>;
    /** Below this age no hold on command is planned unless stated, years. */
    readonly holdFromYears: Sourced<number>;
    readonly stay: Sourced<Calibration>;
    readonly stayClaustrophobic: Sourced<Calibration>;
    /** Chance that must be left when a prior, not a statement, sets the span planned for. */
    readonly plannedReached: Sourced<number>;
  };
  readonly learning: {
    /** Fewer records of a group than this replace nothing. */
    readonly leastRecords: Sourced<number>;
    readonly entries: readonly LearningEntry[];
  };
  readonly owed: {
    /** Days in which a question left below diagnostic must be answered, by priority. */
    readonly dueDays: Readonly<Record<'stat' | 'asap' | 'urgent' | 'routine', Sourced<number>>>;
  };
}

/** The rule that governs a family and a question: the question's own entry, the exam's, or the default. */
export function catalogueRule(
  policy: SitePolicy,
  examId: string,
  questionId: string,
  family: Family,
): { readonly atMost: Grade; readonly entry?: CatalogueEntry; readonly basis: string } {
  const entries = policy.catalogue.entries.filter((e) => e.family === family);
  const entry =
    entries.find((e) => e.question === `${examId}/${questionId}`) ??
    entries.find((e) => e.question === `${examId}/*`);
  if (entry !== undefined) return { atMost: entry.atMost, entry, basis: entry.source };
  const otherwise = policy.catalogue.otherwise[family];
  return { atMost: otherwise.value, basis: otherwise.source };
}
