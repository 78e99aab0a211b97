import type { Grade } from '../exams/index.js';
import type { Problem } from '../shared/index.js';

/** One line of the exam in its place, seconds since the patient's entry into the scanner. */
export interface PlanStep {
  readonly kind: 'localiser' | 'sequence' | 'injection';
  readonly name: string;
  readonly viewId?: string;
  readonly view?: string;
  readonly sequenceId?: string;
  readonly startS: number;
  readonly endS: number;
  /** Pieces that must be kept still or held: "1 x 212 s still", "3 holds of 14 s". */
  readonly stillness?: string;
  /** Chance that it comes out clean at this place in the order. */
  readonly cleanChance?: number;
  /** B1+rms, microtesla, for comparing; the scanner's own figure rules. */
  readonly b1RmsMicroTesla?: number;
}

/** One reason, its number and its limit. */
export interface Reason {
  readonly view: string;
  readonly sequence: string;
  readonly kind: string;
  readonly grade: Grade;
  /** The grade with the words that must stand beside it. */
  readonly words: string;
  readonly sentence: string;
  readonly value?: number;
  readonly limit?: number;
  readonly unit?: string;
  readonly source: string;
}

/** What would bring a better answer, and to which grade. */
export interface Lift {
  readonly kind:
    | 'minutes'
    | 'stillness'
    | 'hold'
    | 'stay'
    | 'scanner'
    | 'contrast decision'
    | 'second visit'
    | 'clinicians';
  readonly grade?: Grade;
  readonly words?: string;
  readonly sentence: string;
}

/** What one clinical question gets from the planned exam. */
export interface PlannedAnswer {
  readonly questionId: string;
  readonly name: string;
  readonly asks: string;
  readonly weight: number;
  readonly grade: Grade;
  readonly mark: string;
  /** The grade with the words that must stand beside it wherever it appears. */
  readonly words: string;
  /** Stands only if this comes true, e.g. contrast is approved. */
  readonly conditional?: string;
  /** One line: why it is no better; for a diagnostic answer, what carries it. */
  readonly because: string;
  readonly reasons: readonly Reason[];
  /** What a look below diagnostic does not exclude. */
  readonly notExcluded?: string;
  readonly lifts: readonly Lift[];
}

export interface LeftOut {
  readonly view: string;
  readonly why: string;
}

/** One point of the time-answer curve. */
export interface CurvePoint {
  readonly slotS: number;
  readonly chanceToFinish: number;
  /** Per question in the order of `answers`. */
  readonly grades: readonly {
    readonly questionId: string;
    readonly grade: Grade;
    readonly words: string;
  }[];
  readonly sequences: readonly string[];
}

export interface Alternatives {
  /** Shortest slot (5-minute steps) in which every question is diagnostic. */
  readonly shortestAllDiagnosticS?: number;
  /** Why there is none. */
  readonly noneBecause?: string;
  /** Shortest slot (5-minute steps) that gives every question the grade it has in the asked one. */
  readonly sameGradesFromS: number;
  /** Shortest slot beyond which a longer one buys nothing more. */
  readonly nothingMoreAfterS: number;
  /** Two visits in slots of the asked length. */
  readonly twoVisits?: {
    readonly secondVisit: readonly string[];
    readonly grades: readonly {
      readonly questionId: string;
      readonly grade: Grade;
      readonly words: string;
    }[];
  };
}

/** A question that will still be owed a diagnostic answer after this exam. */
export interface AnswerOwed {
  readonly questionId: string;
  readonly name: string;
  readonly grade: Grade;
  readonly words: string;
  readonly dueInDays: number;
  readonly because: string;
}

/** From a booked exam and what the patient can bear to a sequence set in running order, graded and explained. */
export interface Plan {
  readonly requestId: string;
  readonly exam: { readonly id: string; readonly name: string };
  readonly scanner: { readonly id: string; readonly name: string; readonly fieldT: number };
  readonly slotS: number;
  readonly chanceToFinish: number;
  readonly wishedChance: number;
  readonly tableTime: {
    readonly meanS: number;
    readonly tenthS: number;
    readonly medianS: number;
    readonly ninetiethS: number;
  };
  readonly patient: {
    readonly still: string;
    readonly hold: string;
    readonly stay: string;
    readonly restsOnPrior: boolean;
  };
  readonly steps: readonly PlanStep[];
  readonly answers: readonly PlannedAnswer[];
  readonly leftOut: readonly LeftOut[];
  readonly ruledOut: readonly {
    readonly view: string;
    readonly sequence: string;
    readonly why: string;
  }[];
  /** Signed policy entries this plan leans on. */
  readonly signedEntries: readonly string[];
  readonly cautions: readonly string[];
  readonly curve: readonly CurvePoint[];
  readonly alternatives: Alternatives;
  readonly owed: readonly AnswerOwed[];
  /** Which solver picked the set, and what agreed with it. */
  readonly provedBy: string;
}

export type PlanOutcome =
  | { readonly kind: 'planned'; readonly plan: Plan }
  | { readonly kind: 'refused'; readonly requestId: string; readonly problems: readonly Problem[] };
