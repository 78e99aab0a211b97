import type { Generated } from 'kysely';
import type { Grade, StatementSource } from '../exams/index.js';
import type { AchievedKind } from '../tolerance/index.js';
import type { BookingStatus } from './booking-status.js';

export const requestStatuses = ['waiting', 'booked', 'done', 'cancelled'] as const;
export type RequestStatus = (typeof requestStatuses)[number];

export const owedStates = ['owed', 'follow-up booked', 'answered', 'signed off'] as const;
export type OwedState = (typeof owedStates)[number];

/** The columns as they stand in the database: text and integers only, instants as epoch ms, JSON as text. */
export interface Tables {
  request: RequestRow;
  booking: BookingRow;
  claim: ClaimRow;
  change: ChangeRow;
  owed: OwedRow;
  done_answer: DoneAnswerRow;
  console_tap: ConsoleTapRow;
  scenario: ScenarioRow;
  achieved: AchievedRow;
  counted_exam: { booking_id: string };
  schema_step: { number: number; name: string };
}

export interface RequestRow {
  id: string;
  status: RequestStatus;
  /** JSON of an exam request. */
  body: string;
  version: number;
  created_ms: number;
  updated_ms: number;
}

export interface BookingRow {
  id: string;
  request_id: string;
  scanner_id: string;
  /** ISO date. */
  date: string;
  start_min: number;
  slot_min: number;
  /** JSON list of team ids. */
  teams: string;
  status: BookingStatus;
  /** JSON of whatever plan the caller gave. */
  plan: string | null;
  version: number;
}

export interface ClaimRow {
  resource: string;
  tick: number;
  booking_id: string;
}

export interface ChangeRow {
  seq: Generated<number>;
  at_ms: number;
  who: string;
  what: string;
  thing_id: string;
  action: string;
  before: string | null;
  after: string | null;
  /** The change that this one put back. */
  undoes: number | null;
  /** The same number on all lines of several bookings changed at once. */
  joint: number | null;
}

export interface OwedRow {
  id: string;
  request_id: string;
  question_id: string;
  question_name: string;
  grade: Exclude<Grade, 'diagnostic'>;
  /** ISO date. */
  due_date: string;
  state: OwedState;
  follow_up_request_id: string | null;
  /** The request whose diagnostic answer closed this. */
  answered_by_request_id: string | null;
  answered_grade: 'diagnostic' | null;
  signed_by: string | null;
  signed_reason: string | null;
  version: number;
}

export interface ConsoleTapRow {
  booking_id: string;
  seq: number;
  tap_id: string;
  at_s: number;
  at_ms: number;
  who: string;
  /** JSON of what was tapped. */
  body: string;
}

export interface AchievedRow {
  /** Drawn by chance; leads to no booking. */
  id: string;
  kind: AchievedKind;
  patient_group: string;
  seconds: number;
  /** 1: censored. */
  censored: number;
  stated_s: number | null;
  said_by: StatementSource | null;
  /** ISO date. */
  recorded_on: string;
}

export interface ScenarioRow {
  id: string;
  place: number;
  /** JSON of a scenario. */
  body: string;
  version: number;
}

export interface DoneAnswerRow {
  request_id: string;
  question_id: string;
  grade: Grade;
  at_ms: number;
}
