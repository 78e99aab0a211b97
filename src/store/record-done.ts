import { rankOf, type Grade } from '../exams/index.js';
import type { AchievedRecord } from '../tolerance/index.js';
import { keepAchieved } from './achieved.js';
import { changeBooking } from './booking-change.js';
import { waitingFor } from './follow-up.js';
import type { Tx } from './in-transaction.js';
import { refused, stale, type Refused, type Stale } from './outcomes.js';
import { writeOwed } from './owed-change.js';
import { readBody } from './request-body.js';
import { bookingFrom, owedFrom, type StoredBooking, type StoredOwed } from './stored.js';

export interface DoneAnswer {
  readonly questionId: string;
  readonly name: string;
  readonly grade: Grade;
}

/** An exam that is over. */
export interface DoneExam {
  readonly bookingId: string;
  readonly version: number;
  /** One for every question asked. */
  readonly answers: readonly DoneAnswer[];
  /** ISO date by which what is still owed is due. */
  readonly dueDate: string;
  /** What the exam showed of stillness, breath, bearing and time; none where nothing was tapped. */
  readonly achieved?: readonly AchievedRecord[];
}

export type DoneOutcome =
  | { readonly kind: 'done'; readonly booking: StoredBooking; readonly owed: readonly StoredOwed[] }
  | Stale
  | Refused;

/**
 * Files an exam as done: each answer goes on record, a diagnostic one closes what was waiting for it,
 * and every lower one is owed from now on.
 */
export async function recordDone(tx: Tx, exam: DoneExam): Promise<DoneOutcome> {
  const { bookingId, answers } = exam;
  const row = await tx.db
    .selectFrom('booking')
    .innerJoin('request', 'request.id', 'booking.request_id')
    .selectAll('booking')
    .select('request.body')
    .where('booking.id', '=', bookingId)
    .executeTakeFirst();
  if (row === undefined) return refused(`there is no booking ${bookingId}`);
  const before = bookingFrom(row);
  if (before.version !== exam.version) {
    return stale(`booking ${bookingId}`, exam.version, before.version);
  }
  if (before.status !== 'booked' && before.status !== 'arrived') {
    return refused(`booking ${bookingId} is ${before.status}`);
  }
  const answered = answers.map((a) => a.questionId);
  const missing = readBody(row.body, before.requestId).questionIds.filter(
    (asked) => !answered.includes(asked),
  );
  if (answers.length === 0) return refused('a done exam says what its questions got');
  if (missing.length > 0) return refused(`no grade was given for ${missing.join(', ')}`);
  if (new Set(answered).size < answered.length) return refused('a question was graded twice');

  await putOnRecord(tx, before.requestId, answers);
  const continued = await settleFollowed(tx, before.requestId, answers);
  const change = {
    before,
    after: { ...before, status: 'fulfilled' },
    action: 'fulfilled',
  } as const;
  const written = await changeBooking(tx, change);
  if (written.kind !== 'placed') throw new Error(`booking ${bookingId} lost the place it held`);
  await keepAchieved(tx, bookingId, exam.achieved ?? []);
  const owed: StoredOwed[] = [];
  for (const { questionId, name, grade } of answers) {
    if (grade === 'diagnostic' || continued.has(questionId)) continue;
    owed.push(await owe(tx, before.requestId, { questionId, name, grade }, exam.dueDate));
  }
  return { kind: 'done', booking: written.booking, owed };
}

async function putOnRecord(tx: Tx, requestId: string, answers: readonly DoneAnswer[]) {
  const rows = answers.map(({ questionId, grade }) => ({
    request_id: requestId,
    question_id: questionId,
    grade,
    at_ms: tx.atMs,
  }));
  await tx.db.insertInto('done_answer').values(rows).execute();
  const to = Object.fromEntries(answers.map((a) => [a.questionId, a.grade]));
  await tx.record({ what: 'answer', id: requestId, action: 'recorded', to });
}

/**
 * What was waiting for this exam: closed by a diagnostic answer, otherwise owed as before, with the
 * better grade of the two. Returns the questions that stay on the list under the earlier request.
 */
async function settleFollowed(
  tx: Tx,
  requestId: string,
  answers: readonly DoneAnswer[],
): Promise<ReadonlySet<string>> {
  const continued = new Set<string>();
  for (const owed of await waitingFor(tx, requestId)) {
    const got = answers.find((a) => a.questionId === owed.questionId)?.grade ?? 'none';
    if (got === 'diagnostic') {
      const by = { answered_by_request_id: requestId, answered_grade: got } as const;
      await writeOwed(tx, owed, { state: 'answered', ...by }, 'answered');
      continue;
    }
    continued.add(owed.questionId);
    const grade = rankOf(got) > rankOf(owed.grade) ? got : owed.grade;
    const patch = { state: 'owed', follow_up_request_id: null, grade } as const;
    await writeOwed(tx, owed, patch, 'still owed after the follow-up');
  }
  return continued;
}

async function owe(
  tx: Tx,
  requestId: string,
  answer: DoneAnswer & { readonly grade: StoredOwed['grade'] },
  dueDate: string,
): Promise<StoredOwed> {
  const row = await tx.db
    .insertInto('owed')
    .values({
      id: `${requestId}:${answer.questionId}`,
      request_id: requestId,
      question_id: answer.questionId,
      question_name: answer.name,
      grade: answer.grade,
      due_date: dueDate,
      state: 'owed',
      follow_up_request_id: null,
      answered_by_request_id: null,
      answered_grade: null,
      signed_by: null,
      signed_reason: null,
      version: 1,
    })
    .returningAll()
    .executeTakeFirstOrThrow();
  const owed = owedFrom(row);
  await tx.record({ what: 'owed', id: owed.id, action: 'owed', to: owed });
  return owed;
}
