import { z } from 'zod';
import type { Booking } from '../day/index.js';
import type { ExamRequest } from '../planning/index.js';
import type { BookingStatus } from './booking-status.js';
import { readBody } from './request-body.js';
import type { BookingRow, OwedRow, OwedState, RequestRow, RequestStatus } from './tables.js';
import type { Grade } from '../exams/index.js';

/** A request with where it stands. */
export interface StoredRequest {
  readonly id: string;
  readonly version: number;
  readonly status: RequestStatus;
  readonly body: ExamRequest;
  readonly createdMs: number;
  readonly updatedMs: number;
}

/** A request's place on the board. */
export interface StoredBooking extends Booking {
  readonly id: string;
  readonly version: number;
  readonly teams: readonly string[];
  readonly status: BookingStatus;
  /** What the caller kept of the plan (JSON); null when there is none that fits this slot and request. */
  readonly plan: unknown;
}

/** A question whose best answer so far is below diagnostic, and how it was closed if it was. */
export interface StoredOwed {
  readonly id: string;
  readonly version: number;
  readonly requestId: string;
  readonly questionId: string;
  readonly questionName: string;
  readonly grade: Exclude<Grade, 'diagnostic'>;
  /** ISO date. */
  readonly dueDate: string;
  readonly state: OwedState;
  readonly followUpRequestId: string | null;
  readonly answeredByRequestId: string | null;
  readonly signedBy: string | null;
  readonly signedReason: string | null;
}

const teamList = z.array(z.string());

export const requestFrom = (row: RequestRow): StoredRequest => ({
  id: row.id,
  version: row.version,
  status: row.status,
  body: readBody(row.body, row.id),
  createdMs: row.created_ms,
  updatedMs: row.updated_ms,
});

export const bookingFrom = (row: BookingRow): StoredBooking => ({
  id: row.id,
  version: row.version,
  requestId: row.request_id,
  scannerId: row.scanner_id,
  date: row.date,
  startMin: row.start_min,
  slotMin: row.slot_min,
  teams: teamList.parse(JSON.parse(row.teams)),
  status: row.status,
  plan: row.plan === null ? null : JSON.parse(row.plan),
});

export const owedFrom = (row: OwedRow): StoredOwed => ({
  id: row.id,
  version: row.version,
  requestId: row.request_id,
  questionId: row.question_id,
  questionName: row.question_name,
  grade: row.grade,
  dueDate: row.due_date,
  state: row.state,
  followUpRequestId: row.follow_up_request_id,
  answeredByRequestId: row.answered_by_request_id,
  signedBy: row.signed_by,
  signedReason: row.signed_reason,
});
