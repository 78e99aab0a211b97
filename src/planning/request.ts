import type { ToleranceStatement } from '../tolerance/index.js';

export const priorities = ['routine', 'urgent', 'asap', 'stat'] as const;
/** FHIR request priority. */
export type Priority = (typeof priorities)[number];

export const contrastStates = ['not needed', 'approved', 'not approved', 'undecided'] as const;
/** What the clinicians decided about contrast medium; the tool carries it and decides nothing. */
export type ContrastState = (typeof contrastStates)[number];

export const screeningStates = ['done by site', 'not yet'] as const;
export type SafetyScreening = (typeof screeningStates)[number];

export const transports = ['walking', 'wheelchair', 'trolley', 'bed'] as const;
export type Transport = (typeof transports)[number];

export const dayParts = ['any', 'morning', 'afternoon'] as const;
/** Part of the day in which the patient can come; the afternoon starts at 12:00. */
export type DayPart = (typeof dayParts)[number];

/** When the patient can come: ISO dates, both included; absent: no limit. */
export interface CanCome {
  readonly from?: string;
  readonly until?: string;
  readonly partOfDay: DayPart;
}

/** One exam asked for: what a plan is made from. No name, number or address of the patient. */
export interface ExamRequest {
  readonly id: string;
  readonly examId: string;
  /** Asked clinical questions; all of the exam's when empty. */
  readonly questionIds: readonly string[];
  readonly priority: Priority;
  /** ISO date by which an answer is due. */
  readonly dueDate?: string;
  readonly canCome: CanCome;
  readonly tolerance: ToleranceStatement;
  readonly contrast: ContrastState;
  readonly safetyScreening: SafetyScreening;
  readonly transport: Transport;
  readonly escort: boolean;
  /** Scanner time asked for, s. */
  readonly slotS: number;
  /** B1+rms limit the site read off an implant's label, microtesla. The label rules; this only filters. */
  readonly b1RmsLimitMicroTesla?: number;
  readonly note?: string;
}
