import type { Tx } from './in-transaction.js';
import { owedFrom, type StoredOwed } from './stored.js';
import type { OwedRow } from './tables.js';

/** Columns of an answer owed that change in its life. */
export type OwedPatch = Partial<
  Pick<
    OwedRow,
    | 'grade'
    | 'state'
    | 'follow_up_request_id'
    | 'answered_by_request_id'
    | 'answered_grade'
    | 'signed_by'
    | 'signed_reason'
  >
>;

export const isOpen = (owed: Pick<StoredOwed, 'state'>) =>
  owed.state === 'owed' || owed.state === 'follow-up booked';

/** Writes a change of an answer owed, with its line in the history. */
export async function writeOwed(
  tx: Tx,
  before: StoredOwed,
  patch: OwedPatch,
  action: string,
): Promise<StoredOwed> {
  const row = await tx.db
    .updateTable('owed')
    .set({ ...patch, version: before.version + 1 })
    .where('id', '=', before.id)
    .where('version', '=', before.version)
    .returningAll()
    .executeTakeFirstOrThrow();
  const after = owedFrom(row);
  await tx.record({ what: 'owed', id: before.id, action, from: before, to: after });
  return after;
}
