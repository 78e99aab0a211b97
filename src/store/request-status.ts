import { followRequest } from './follow-up.js';
import type { Tx } from './in-transaction.js';
import type { RequestStatus } from './tables.js';

/** Gives a request its status, and lets the answers owed that wait for it know. */
export async function setRequestStatus(
  tx: Tx,
  requestId: string,
  status: RequestStatus,
): Promise<void> {
  const before = await tx.db
    .selectFrom('request')
    .select(['status', 'version'])
    .where('id', '=', requestId)
    .executeTakeFirstOrThrow();
  if (before.status === status) return;
  await tx.db
    .updateTable('request')
    .set({ status, version: before.version + 1, updated_ms: tx.atMs })
    .where('id', '=', requestId)
    .execute();
  await tx.record({
    what: 'request',
    id: requestId,
    action: status,
    from: { status: before.status },
    to: { status },
  });
  await followRequest(tx, requestId, status);
}
