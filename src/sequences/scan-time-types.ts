import type { Problem } from '../shared/index.js';
import type { BreathingAbility, BreathingRules } from './breathing.js';

/** A stretch of time that must stay undisturbed, and how many of them there are. */
export interface StillIntervals {
  /** `whole`: the acquisition as one piece; `slice`, `repeat`, `hold`, `phase`: pieces that can be taken again alone. */
  readonly kind: 'whole' | 'slice' | 'repeat' | 'hold' | 'phase';
  readonly count: number;
  readonly lengthS: number;
}

/** One line of the working, for the page and the terminal. */
export interface WorkingLine {
  readonly what: string;
  readonly how: string;
  readonly value: string;
}

export interface ScanTime {
  readonly kind: 'possible';
  readonly acquisitionS: number;
  readonly intervals: StillIntervals;
  readonly slicesPerRepeat: number;
  readonly passes: number;
  readonly shots: number;
  /** The repetition time really used: whole breaths when triggered, ms. */
  readonly repetitionTimeMs: number;
  readonly working: readonly WorkingLine[];
}

export interface ImpossibleScan {
  readonly kind: 'impossible';
  readonly problem: Problem;
}

export interface ScanTimeOptions {
  readonly ability: BreathingAbility;
  readonly rules: BreathingRules;
  /** Split held work into this many holds; the fewest possible when absent. */
  readonly holds?: number;
}

/** Breathing values under which no sequence is refused: used to look at a sequence by itself. */
export const untroubledBreathing: ScanTimeOptions = {
  ability: { holdSpanS: 25, breathsPerMinute: 15 },
  rules: { recoveryGapS: 15, mostHolds: 6, acceptanceFraction: 0.4 },
};
