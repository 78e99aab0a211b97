import { randomUUID } from 'node:crypto';
import type { AchievedRecord } from '../tolerance/index.js';
import type { Database } from './database.js';
import { looking, type Tx } from './in-transaction.js';
import type { AchievedRow } from './tables.js';

/** What patients achieved, from exams recorded as done. */
export function achievedIn(database: Database) {
  return {
    /** All records, oldest day first; within a day in no order that says which exam they are from. */
    list: (): Promise<readonly AchievedRecord[]> =>
      looking(database, async (db) => {
        const rows = await db
          .selectFrom('achieved')
          .selectAll()
          .orderBy('recorded_on')
          .orderBy('id')
          .execute();
        return rows.map(recordFrom);
      }),
  };
}
export type Achieved = ReturnType<typeof achievedIn>;

/**
 * Keeps what an exam showed, in the transaction that files it as done. The same exam a second time adds nothing. The rows
 * get a number drawn by chance: the booking's would lead to the request, and so, in the site's own lists, to a person.
 */
export async function keepAchieved(
  tx: Tx,
  bookingId: string,
  records: readonly AchievedRecord[],
): Promise<void> {
  if (records.length === 0) return;
  const first = await tx.db
    .insertInto('counted_exam')
    .values({ booking_id: bookingId })
    .onConflict((c) => c.doNothing())
    .returning('booking_id')
    .executeTakeFirst();
  if (first === undefined) return;
  const rows = records.map((record): AchievedRow => ({
    id: randomUUID(),
    kind: record.kind,
    patient_group: record.group,
    seconds: record.seconds,
    censored: record.censored ? 1 : 0,
    stated_s: record.statedS ?? null,
    said_by: record.saidBy ?? null,
    recorded_on: record.on,
  }));
  await tx.db.insertInto('achieved').values(rows).execute();
}

const recordFrom = (row: AchievedRow): AchievedRecord => ({
  kind: row.kind,
  group: row.patient_group,
  seconds: row.seconds,
  censored: row.censored === 1,
  ...(row.stated_s === null ? {} : { statedS: row.stated_s }),
  ...(row.said_by === null ? {} : { saidBy: row.said_by }),
  on: row.recorded_on,
});
