import type { RunPlan } from './exam-run.js';

/** What one kind of request is on one scanner. */
export interface SimPlace {
  readonly slotMin: number;
  readonly run: RunPlan;
}

/** A kind of request as the simulation sees it: numbers only. */
export interface SimKind {
  readonly weight: number;
  readonly emergency: boolean;
  /** Taken from the list before the others. */
  readonly urgent: boolean;
  readonly coil: number;
  /** Number of the team it needs; -1: none. */
  readonly team: number;
  readonly contrast: boolean;
  readonly questions: number;
  /** Per scanner; undefined where it cannot be taken. */
  readonly places: readonly (SimPlace | undefined)[];
}

export interface SimScanner {
  readonly id: string;
  /** Open stretches, minutes of the day, breaks taken out, in order. */
  readonly open: readonly (readonly [number, number])[];
}

/** A scenario worked out: plain data that a thread can be given. Times in minutes unless they say otherwise. */
export interface SimDepartment {
  readonly scanners: readonly SimScanner[];
  readonly kinds: readonly SimKind[];
  readonly requestsPerDay: number;
  readonly listAtStart: number;
  /** Minutes past the slot after which an exam is cut short; Infinity: never. */
  readonly cutShortAfterMin: number;
  readonly bufferMin: number;
  readonly overbooked: number;
  readonly groupByCoil: boolean;
  readonly emergenciesPerDay: number;
  readonly noShowShare: number;
  readonly lateShare: number;
  readonly lateMeanMin: number;
  readonly earlyMin: number;
  readonly technologists: number;
  readonly teams: readonly number[];
  readonly followUpShare: number;
  readonly followUpAfterDays: number;
  readonly cannulaShare: number;
  readonly cannulaMeanMin: number;
  readonly coilChangeMeanMin: number;
  readonly coilChangeCv: number;
  readonly downShare: number;
  readonly downMeanMin: number;
  readonly overtimeUpToMin: number;
  readonly daysAMonth: number;
  readonly seed: number;
}
