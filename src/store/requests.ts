import type { ExamRequest } from '../planning/index.js';
import { changeBooking } from './booking-change.js';
import type { Database } from './database.js';
import { inTransaction, looking, type Tx } from './in-transaction.js';
import { refused, stale, type Refused, type Stale } from './outcomes.js';
import { writeBody } from './request-body.js';
import { setRequestStatus } from './request-status.js';
import { bookingFrom, requestFrom, type StoredRequest } from './stored.js';
import type { RequestStatus } from './tables.js';

export interface RequestPatch {
  /** The whole request as it is to be. */
  readonly body?: ExamRequest;
  /** `booked` and `done` come from its booking and are not set by hand. */
  readonly status?: 'waiting' | 'cancelled';
}

export type AddOutcome =
  | { readonly kind: 'added'; readonly request: StoredRequest }
  | { readonly kind: 'exists'; readonly request: StoredRequest };
export type RequestOutcome =
  { readonly kind: 'changed'; readonly request: StoredRequest } | Stale | Refused;

/** Requests: the exams asked for. */
export function requestsIn(database: Database) {
  return {
    /** `exists`: the number is in use; the request that has it comes back unchanged. */
    add: (body: ExamRequest, who: string, atMs: number): Promise<AddOutcome> =>
      inTransaction(database, { who, atMs }, (tx) => addRequest(tx, body)),

    change: (
      id: string,
      version: number,
      patch: RequestPatch,
      who: string,
      atMs: number,
    ): Promise<RequestOutcome> =>
      inTransaction(database, { who, atMs }, (tx) => changeRequest(tx, id, version, patch)),

    get: (id: string): Promise<StoredRequest | undefined> =>
      looking(database, async (db) => {
        const row = await db
          .selectFrom('request')
          .selectAll()
          .where('id', '=', id)
          .executeTakeFirst();
        return row && requestFrom(row);
      }),

    /** In the order they came in. */
    list: (only: { readonly status?: RequestStatus } = {}): Promise<readonly StoredRequest[]> =>
      looking(database, async (db) => {
        const { status } = only;
        let query = db.selectFrom('request').selectAll();
        if (status !== undefined) query = query.where('status', '=', status);
        const rows = await query.orderBy('created_ms').orderBy('id').execute();
        return rows.map(requestFrom);
      }),
  };
}
export type Requests = ReturnType<typeof requestsIn>;

/** Adds a request inside a transaction that is already open. */
export async function addRequest(tx: Tx, body: ExamRequest): Promise<AddOutcome> {
  const known = await find(tx, body.id);
  if (known !== undefined) return { kind: 'exists', request: known };
  const row = await tx.db
    .insertInto('request')
    .values({
      id: body.id,
      status: 'waiting',
      body: writeBody(body),
      version: 1,
      created_ms: tx.atMs,
      updated_ms: tx.atMs,
    })
    .returningAll()
    .executeTakeFirstOrThrow();
  await tx.record({ what: 'request', id: body.id, action: 'added', to: { status: 'waiting' } });
  return { kind: 'added', request: requestFrom(row) };
}

async function changeRequest(
  tx: Tx,
  id: string,
  version: number,
  patch: RequestPatch,
): Promise<RequestOutcome> {
  const before = await find(tx, id);
  if (before === undefined) return refused(`there is no request ${id}`);
  if (before.version !== version) return stale(`request ${id}`, version, before.version);
  if (patch.body !== undefined && patch.body.id !== id) {
    return refused(`a request keeps its number; this one is ${id}`);
  }
  if (before.status === 'done') return refused(`request ${id} is done`);
  if (patch.status !== undefined && before.status === 'booked') {
    return refused(`request ${id} has a place on the board; cancel that first`);
  }
  if (patch.body !== undefined) await changeBody(tx, before, patch.body);
  if (patch.status !== undefined) await setRequestStatus(tx, id, patch.status);
  const after = await find(tx, id);
  if (after === undefined) throw new Error(`request ${id} vanished inside its own transaction`);
  return { kind: 'changed', request: after };
}

async function changeBody(tx: Tx, before: StoredRequest, body: ExamRequest): Promise<void> {
  const fields = (
    [...Object.keys(before.body), ...Object.keys(body)] as (keyof ExamRequest)[]
  ).filter(
    (field, at, all) =>
      all.indexOf(field) === at &&
      JSON.stringify(before.body[field]) !== JSON.stringify(body[field]),
  );
  if (fields.length === 0) return;
  await tx.db
    .updateTable('request')
    .set({ body: writeBody(body), version: before.version + 1, updated_ms: tx.atMs })
    .where('id', '=', before.id)
    .execute();
  const part = (whole: ExamRequest) => Object.fromEntries(fields.map((f) => [f, whole[f]]));
  await tx.record({
    what: 'request',
    id: before.id,
    action: 'changed',
    from: part(before.body),
    to: part(body),
  });
  if (fields.some((field) => field !== 'note')) await dropPlan(tx, before.id);
}

/** A plan made from what the request said before is no plan for what it says now. */
async function dropPlan(tx: Tx, requestId: string): Promise<void> {
  const rows = await tx.db
    .selectFrom('booking')
    .selectAll()
    .where('request_id', '=', requestId)
    .where('plan', 'is not', null)
    .execute();
  for (const before of rows.map(bookingFrom)) {
    await changeBooking(tx, { before, after: { ...before, plan: null }, action: 'plan dropped' });
  }
}

async function find(tx: Tx, id: string): Promise<StoredRequest | undefined> {
  const row = await tx.db.selectFrom('request').selectAll().where('id', '=', id).executeTakeFirst();
  return row && requestFrom(row);
}
