import { patientClasses, statementSources } from '../../exams/index.js';
import {
  contrastStates,
  dayParts,
  priorities,
  screeningStates,
  transports,
  type ExamRequest,
} from '../../planning/index.js';
import type { Booking } from '../../day/index.js';
import type { Problem, Result } from '../../shared/index.js';
import { conditions, type Condition, type SpanStatement } from '../../tolerance/index.js';
import { z } from 'zod';
import { describe } from '../library/index.js';
import type { RawRow, RequestColumn } from './columns.js';
import { parseDurationS } from './duration.js';

/** A request with the place it is booked at, if it has one. */
export interface BookedRequest {
  readonly request: ExamRequest;
  readonly booking?: Booking;
}

const longestSlotS = 8 * 3600;
const isoDate = z.iso.date();

/** One row turned into a request; every field that cannot be used is named, not only the first. */
export function readRow(row: RawRow, place: string): Result<BookedRequest> {
  const problems: Problem[] = [];
  const refuse = (column: RequestColumn, limit: string, wayOut: string): undefined => {
    problems.push({
      code: 'request-value',
      thing: `${place}, field ${column}`,
      value: row[column] === undefined || row[column] === '' ? 'missing' : describe(row[column]),
      limit,
      wayOut,
    });
    return undefined;
  };
  const text = (column: RequestColumn) => (row[column] ?? '').trim();
  const oneOf = <T extends string>(
    column: RequestColumn,
    allowed: readonly T[],
    otherwise: T,
  ): T => {
    const value = text(column).toLowerCase();
    if (value === '') return otherwise;
    const found = allowed.find((a) => a === value);
    if (found === undefined)
      refuse(column, `one of: ${allowed.join(', ')}`, 'Write one of these words.');
    return found ?? otherwise;
  };
  const list = (column: RequestColumn) =>
    text(column)
      .split(';')
      .map((part) => part.trim())
      .filter((part) => part !== '');
  const span = (
    column: RequestColumn,
    longestS: number,
    zeroWords: readonly string[],
  ): SpanStatement => {
    const value = text(column).toLowerCase();
    if (value === '' || value === 'not asked') return { kind: 'not asked' };
    if (zeroWords.includes(value)) return { kind: 'stated', seconds: 0 };
    const seconds = parseDurationS(value);
    if (seconds === undefined || seconds > longestS || (seconds === 0 && zeroWords.length === 0)) {
      refuse(
        column,
        `a time above 0 and up to ${longestS} s with its unit, or "not asked"`,
        'Write for example "20 min" or "12 s".',
      );
      return { kind: 'not asked' };
    }
    return { kind: 'stated', seconds };
  };

  const id = text('request_id');
  if (!/^[A-Za-z0-9._-]{1,40}$/.test(id)) {
    refuse(
      'request_id',
      '1 to 40 letters, figures, dots, hyphens or underscores; never a name',
      'Give the request its number.',
    );
  }
  const examId = text('exam').toLowerCase();
  if (examId === '')
    refuse('exam', 'every request names its exam', 'Write the exam id, for example brain-general.');
  const slotS = parseDurationS(text('slot'));
  if (slotS === undefined || slotS < 60 || slotS > longestSlotS) {
    refuse('slot', 'a length with its unit, 1 min to 8 h', 'Write for example "30 min".');
  }
  const wrongConditions = list('conditions').filter(
    (c) => !conditions.includes(c.toLowerCase() as Condition),
  );
  if (wrongConditions.length > 0) {
    refuse(
      'conditions',
      `any of: ${conditions.join('; ')}`,
      'Only what bears on stillness, breath or bearing the scanner belongs here.',
    );
  }
  const dateIn = (column: RequestColumn): string => {
    const value = text(column);
    if (value !== '' && !isoDate.safeParse(value).success) {
      refuse(column, 'a date as year-month-day', 'Write for example 2026-12-18.');
    }
    return value;
  };
  const dueDate = dateIn('due_date');
  const from = dateIn('can_come_from');
  const until = dateIn('can_come_until');
  if (from !== '' && until !== '' && until < from) {
    refuse('can_come_until', `not before ${from}`, 'Swap the two dates.');
  }
  const age = readNumber(text('age_years'));
  if (age === 'wrong' || (age !== undefined && (age < 0 || age > 120))) {
    refuse('age_years', 'years, 0 to 120', 'Write the age in years, or leave it empty.');
  }
  const b1Limit = readNumber(text('b1rms_limit_microtesla'));
  if (b1Limit === 'wrong' || (b1Limit !== undefined && !(b1Limit > 0 && b1Limit < 20))) {
    refuse(
      'b1rms_limit_microtesla',
      'microtesla, above 0 and below 20',
      "Copy the figure from the implant's label, or leave it empty.",
    );
  }
  const escort = oneOf('escort', ['yes', 'no'], 'no');
  const still = span('still_for', 4 * 3600, []);
  const hold = span('hold_breath_for', 180, ['none', 'no', '0']);
  const stay = span('stay_for', 6 * 3600, []);
  const nobodyAsked = [still, hold, stay].every((s) => s.kind === 'not asked');
  if (!nobodyAsked && text('said_by') === '') {
    refuse('said_by', `one of: ${statementSources.join(', ')}`, 'Say who made the statement.');
  }
  const request: ExamRequest = {
    id,
    examId,
    questionIds: [...new Set(list('questions').map((q) => q.toLowerCase()))],
    priority: oneOf('priority', priorities, 'routine'),
    ...(dueDate === '' ? {} : { dueDate }),
    canCome: {
      ...(from === '' ? {} : { from }),
      ...(until === '' ? {} : { until }),
      partOfDay: oneOf('can_come_part', dayParts, 'any'),
    },
    tolerance: {
      still,
      hold,
      stay,
      saidBy: oneOf('said_by', statementSources, 'patient'),
      followsInstructions: oneOf('follows_instructions', ['yes', 'no', 'not asked'], 'not asked'),
      conditions: list('conditions').map((c) => c.toLowerCase() as Condition),
      patientClass: oneOf('patient_class', patientClasses, 'outpatient'),
      ...(typeof age === 'number' ? { ageYears: age } : {}),
    },
    contrast: oneOf('contrast', contrastStates, 'not needed'),
    safetyScreening: oneOf('safety_screening', screeningStates, 'not yet'),
    transport: oneOf('transport', transports, 'walking'),
    escort: escort === 'yes',
    slotS: slotS ?? 0,
    ...(typeof b1Limit === 'number' ? { b1RmsLimitMicroTesla: b1Limit } : {}),
    ...(text('note') === '' ? {} : { note: text('note') }),
  };
  const booking = readBooking(text('scanner'), text('start'), id, slotS ?? 0, refuse);
  if (problems.length > 0) return { kind: 'refused', problems };
  return { kind: 'ok', value: { request, ...(booking === undefined ? {} : { booking }) } };
}

function readNumber(text: string): number | undefined | 'wrong' {
  if (text === '') return undefined;
  const value = Number(text.replace(',', '.'));
  return Number.isFinite(value) ? value : 'wrong';
}

function readBooking(
  scannerId: string,
  start: string,
  requestId: string,
  slotS: number,
  refuse: (column: RequestColumn, limit: string, wayOut: string) => undefined,
): Booking | undefined {
  if (scannerId === '' && start === '') return undefined;
  if (scannerId === '')
    return refuse(
      'scanner',
      'a booked start needs its scanner',
      'Name the scanner, or leave both empty.',
    );
  if (start === '') return undefined;
  const match = /^(\d{4}-\d{2}-\d{2})[ T](\d{2}):(\d{2})$/.exec(start);
  const hours = Number(match?.[2]);
  const minutes = Number(match?.[3]);
  if (match === null || !isoDate.safeParse(match[1]).success || hours > 23 || minutes > 59) {
    return refuse(
      'start',
      "the site's own date and 24-hour time",
      'Write for example "2026-12-08 09:30".',
    );
  }
  return {
    requestId,
    scannerId,
    date: match[1] ?? '',
    startMin: hours * 60 + minutes,
    slotMin: Math.ceil(slotS / 60),
  };
}
