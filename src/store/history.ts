import type { Database } from './database.js';
import { inTransaction, looking, type NewChange } from './in-transaction.js';
import type { ChangeRow } from './tables.js';
import { undoLast, type UndoOutcome } from './undo.js';
import type { Selectable } from 'kysely';

/** One line of the history: who changed what, when, from what, to what. */
export interface Change {
  readonly seq: number;
  readonly atMs: number;
  readonly who: string;
  readonly what: string;
  readonly id: string;
  readonly action: string;
  /** JSON; null where there was nothing before. */
  readonly from: unknown;
  readonly to: unknown;
  /** The change that this one put back, if it is an undo. */
  readonly undoes: number | null;
  /** The same number on all lines of one joint change (`bookings.moveMany`). */
  readonly joint: number | null;
}

const mostAtOnce = 1000;

/** The history: every write of the store, in the order of the commits. */
export function historyIn(database: Database) {
  return {
    /** What happened to one thing, oldest first. */
    of: (what: NewChange['what'], id: string): Promise<readonly Change[]> =>
      looking(database, async (db) => {
        const rows = await db
          .selectFrom('change')
          .selectAll()
          .where('what', '=', what)
          .where('thing_id', '=', id)
          .orderBy('seq')
          .execute();
        return rows.map(changeFrom);
      }),

    /** What happened after a change, oldest first, the first thousand. */
    since: (seq: number): Promise<readonly Change[]> =>
      looking(database, async (db) => {
        const rows = await db
          .selectFrom('change')
          .selectAll()
          .where('seq', '>', seq)
          .orderBy('seq')
          .limit(mostAtOnce)
          .execute();
        return rows.map(changeFrom);
      }),

    /** The number of the newest change, 0 when there is none. */
    lastSeq: (): Promise<number> =>
      looking(database, async (db) => {
        const newest = await db
          .selectFrom('change')
          .select(({ fn }) => fn.max('seq').as('seq'))
          .executeTakeFirst();
        return newest?.seq ?? 0;
      }),

    /** Puts back the last change somebody made to a booking, unless something newer rests on it. */
    undoLast: (who: string, atMs: number): Promise<UndoOutcome> =>
      inTransaction(database, { who, atMs }, undoLast),
  };
}
export type History = ReturnType<typeof historyIn>;

export const changeFrom = (row: Selectable<ChangeRow>): Change => ({
  seq: row.seq,
  atMs: row.at_ms,
  who: row.who,
  what: row.what,
  id: row.thing_id,
  action: row.action,
  from: row.before === null ? null : JSON.parse(row.before),
  to: row.after === null ? null : JSON.parse(row.after),
  undoes: row.undoes,
  joint: row.joint,
});
