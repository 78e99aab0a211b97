import type { Grade } from '../exams/index.js';
import type { Database } from './database.js';
import { inTransaction, looking, type Tx } from './in-transaction.js';
import { refused, stale, type Refused, type Stale } from './outcomes.js';
import { isOpen, writeOwed } from './owed-change.js';
import { recordDone, type DoneExam, type DoneOutcome } from './record-done.js';
import { readBody } from './request-body.js';
import { owedFrom, type StoredOwed } from './stored.js';
import type { OwedState } from './tables.js';

export type OwedOutcome = { readonly kind: 'changed'; readonly owed: StoredOwed } | Stale | Refused;

/** A statement takes only so many values at once. */
const askedAtOnce = 500;

/** Grades on record by question. */
export type RecordedGrades = ReadonlyMap<string, Grade>;

/** Answers owed. Nothing is deleted, and nothing is closed but by a diagnostic answer or a signature. */
export function owedIn(database: Database) {
  const change = (
    id: string,
    version: number,
    who: string,
    atMs: number,
    work: (tx: Tx, before: StoredOwed) => Promise<StoredOwed | Refused>,
  ): Promise<OwedOutcome> =>
    inTransaction(database, { who, atMs }, async (tx) => {
      const row = await tx.db
        .selectFrom('owed')
        .selectAll()
        .where('id', '=', id)
        .executeTakeFirst();
      if (row === undefined) return refused(`there is no answer owed ${id}`);
      const before = owedFrom(row);
      if (before.version !== version) return stale(`answer owed ${id}`, version, before.version);
      if (!isOpen(before)) return refused(`answer owed ${id} is ${before.state} already`);
      const done = await work(tx, before);
      return 'kind' in done ? done : { kind: 'changed', owed: done };
    });

  return {
    /** The exam of a booking is over: what each question got. Opens and closes answers owed. */
    recordDone: (exam: DoneExam, who: string, atMs: number): Promise<DoneOutcome> =>
      inTransaction(database, { who, atMs }, (tx) => recordDone(tx, exam)),

    /** All, open and closed, soonest due first. */
    list: (only: { readonly states?: readonly OwedState[] } = {}): Promise<readonly StoredOwed[]> =>
      looking(database, async (db) => {
        const { states } = only;
        let query = db.selectFrom('owed').selectAll();
        if (states !== undefined) query = query.where('state', 'in', states);
        return (await query.orderBy('due_date').orderBy('id').execute()).map(owedFrom);
      }),

    /** What went on record for some requests, by request and question; requests without a record are not in it. */
    recorded: (requestIds: readonly string[]): Promise<ReadonlyMap<string, RecordedGrades>> =>
      looking(database, async (db) => {
        const found = new Map<string, Map<string, Grade>>();
        for (let at = 0; at < requestIds.length; at += askedAtOnce) {
          const rows = await db
            .selectFrom('done_answer')
            .select(['request_id', 'question_id', 'grade'])
            .where('request_id', 'in', requestIds.slice(at, at + askedAtOnce))
            .execute();
          for (const row of rows) {
            const grades = found.get(row.request_id) ?? new Map<string, Grade>();
            found.set(row.request_id, grades.set(row.question_id, row.grade));
          }
        }
        return found;
      }),

    get: (id: string): Promise<StoredOwed | undefined> =>
      looking(database, async (db) => {
        const row = await db.selectFrom('owed').selectAll().where('id', '=', id).executeTakeFirst();
        return row && owedFrom(row);
      }),

    /** Names the request that is to answer it. "Follow-up booked" once that one has a place, not before. */
    bookFollowUp: (id: string, version: number, requestId: string, who: string, atMs: number) =>
      change(id, version, who, atMs, async (tx, before) => {
        const row = await tx.db
          .selectFrom('request')
          .select(['status', 'body'])
          .where('id', '=', requestId)
          .executeTakeFirst();
        if (row === undefined) return refused(`there is no request ${requestId}`);
        if (requestId === before.requestId) return refused('a follow-up is a request of its own');
        if (row.status === 'done' || row.status === 'cancelled') {
          return refused(`request ${requestId} is ${row.status}`);
        }
        const { questionIds } = readBody(row.body, requestId);
        if (questionIds.length > 0 && !questionIds.includes(before.questionId)) {
          return refused(`request ${requestId} does not ask ${before.questionId}`);
        }
        const state = row.status === 'booked' ? 'follow-up booked' : 'owed';
        const patch = { state, follow_up_request_id: requestId } as const;
        return writeOwed(tx, before, patch, 'follow-up named');
      }),

    /** Closes it with the diagnostic answer that another request got and that is on record. */
    answer: (id: string, version: number, byRequestId: string, who: string, atMs: number) =>
      change(id, version, who, atMs, async (tx, before) => {
        const done = await tx.db
          .selectFrom('done_answer')
          .select('grade')
          .where('request_id', '=', byRequestId)
          .where('question_id', '=', before.questionId)
          .executeTakeFirst();
        if (done?.grade !== 'diagnostic') {
          return refused(`request ${byRequestId} has no diagnostic answer to this on record`);
        }
        const patch = {
          state: 'answered',
          answered_by_request_id: byRequestId,
          answered_grade: 'diagnostic',
        } as const;
        return writeOwed(tx, before, patch, 'answered');
      }),

    /** A clinician takes it off the list, with name and reason. */
    signOff: (
      id: string,
      version: number,
      signature: { readonly signedBy: string; readonly reason: string },
      who: string,
      atMs: number,
    ) =>
      change(id, version, who, atMs, async (tx, before) => {
        const signedBy = signature.signedBy.trim();
        const reason = signature.reason.trim();
        if (signedBy === '') return refused('a sign-off needs the name of the clinician');
        if (reason === '') return refused('a sign-off needs a reason');
        const patch = { state: 'signed off', signed_by: signedBy, signed_reason: reason } as const;
        return writeOwed(tx, before, patch, 'signed off');
      }),
  };
}
export type Owed = ReturnType<typeof owedIn>;
