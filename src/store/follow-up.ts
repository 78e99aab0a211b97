import type { Tx } from './in-transaction.js';
import { isOpen, writeOwed } from './owed-change.js';
import { owedFrom, type StoredOwed } from './stored.js';
import type { RequestStatus } from './tables.js';

/** Open answers owed that name this request as their follow-up. */
export async function waitingFor(tx: Tx, requestId: string): Promise<readonly StoredOwed[]> {
  const rows = await tx.db
    .selectFrom('owed')
    .selectAll()
    .where('follow_up_request_id', '=', requestId)
    .orderBy('id')
    .execute();
  return rows.map(owedFrom).filter(isOpen);
}

/**
 * Keeps "follow-up booked" true: it stands only while the follow-up request has a place on the board.
 * A follow-up that is called off for good is no follow-up any more.
 */
export async function followRequest(
  tx: Tx,
  requestId: string,
  status: RequestStatus,
): Promise<void> {
  for (const owed of await waitingFor(tx, requestId)) {
    if (status === 'booked') {
      await writeOwed(tx, owed, { state: 'follow-up booked' }, 'follow-up booked');
    } else if (status === 'cancelled') {
      const patch = { state: 'owed', follow_up_request_id: null } as const;
      await writeOwed(tx, owed, patch, 'follow-up called off');
    } else if (owed.state !== 'owed') {
      const action = status === 'done' ? 'follow-up done' : 'follow-up off the board';
      await writeOwed(tx, owed, { state: 'owed' }, action);
    }
  }
}
