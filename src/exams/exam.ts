import type { AcquisitionLimits, Basis, Plane, Weighting } from '../sequences/index.js';

/** What must be seen: a tissue in its background. `border`: the edge between the two, met by a caliper. */
export interface Target {
  readonly kind: 'lesion' | 'border';
  readonly tissue: string;
  readonly background: string;
  /** Lesion: smallest diameter that must be seen. Border: the width a caliper reading tolerates. mm */
  readonly sizeMm: number;
}

/** One thing an exam must show: a plane, a weighting, a coverage. */
export interface View {
  readonly id: string;
  readonly name: string;
  readonly plane: Plane;
  /** Contrast mechanisms that can serve it. */
  readonly weightings: readonly Weighting[];
  readonly contrast: 'none' | 'before' | 'after';
  /** Full-quality sequence the others are measured against. */
  readonly reference: string;
  /** Sequences that may serve it, the reference first. */
  readonly candidates: readonly string[];
  /** View that must be run too (before-contrast twin of an after-contrast view). */
  readonly requires?: string;
  readonly limits?: AcquisitionLimits;
}

/** One view a question needs, and what must be seen on it; no target: the grade rests on the policy alone. */
export interface Need {
  readonly view: string;
  readonly target?: Target;
}

export interface ClinicalQuestion {
  readonly id: string;
  readonly name: string;
  /** The question as a referrer would say it. */
  readonly asks: string;
  /** 1 (by the way) to 9 (the reason for the exam). */
  readonly weight: number;
  readonly needs: readonly Need[];
  /** What a look below diagnostic grade does not exclude, printed beside the grade. */
  readonly notExcluded: string;
}

export interface Exam {
  readonly id: string;
  readonly name: string;
  readonly region: string;
  /** Receiver coil the scanner must have. */
  readonly coil: string;
  readonly contrast: 'never' | 'for some questions';
  /** Positioning beyond the ordinary, s. */
  readonly extraSetUpS: number;
  readonly questions: readonly ClinicalQuestion[];
  readonly views: readonly View[];
  readonly basis: Basis;
  readonly source: string;
}
