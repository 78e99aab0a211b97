import type { Transaction } from 'kysely';
import type { Database } from './database.js';
import { retried } from './retried.js';
import type { Tables } from './tables.js';

/** Who writes, and when: given by the caller, never read from a clock here. */
export interface Author {
  readonly who: string;
  /** Epoch milliseconds. */
  readonly atMs: number;
}

export interface NewChange {
  readonly what: 'request' | 'booking' | 'owed' | 'answer' | 'console' | 'scenario';
  readonly id: string;
  readonly action: string;
  readonly from?: unknown;
  readonly to?: unknown;
  readonly undoes?: number;
  readonly joint?: number;
}

/** A writing transaction with its author and the pen for the history. */
export interface Tx extends Author {
  readonly db: Transaction<Tables>;
  /** Adds a line to the history; it stands or falls with the transaction. */
  readonly record: (change: NewChange) => Promise<number>;
}

/** Thrown by work that has begun to write and finds that it must not: all of it is taken back, the outcome stays. */
export class TakenBack<T> extends Error {
  constructor(readonly outcome: T) {
    super('taken back');
  }
}

/**
 * The only way to write. One writer at a time; tried again while the database is busy or two
 * transactions cannot both stand, so `work` must do nothing outside its transaction. Listeners hear of
 * it after the commit.
 */
export async function inTransaction<T>(
  database: Database,
  author: Author,
  work: (tx: Tx) => Promise<T>,
): Promise<T> {
  const { outcome, lastSeq } = await retried(() =>
    database.kysely
      .transaction()
      .setIsolationLevel('serializable')
      .execute(async (db) => {
        await database.lockForWriting(db);
        let lastSeq: number | undefined;
        const record = async (change: NewChange) => {
          const { seq } = await db
            .insertInto('change')
            .values({
              at_ms: author.atMs,
              who: author.who,
              what: change.what,
              thing_id: change.id,
              action: change.action,
              before: jsonOrNull(change.from),
              after: jsonOrNull(change.to),
              undoes: change.undoes ?? null,
              joint: change.joint ?? null,
            })
            .returning('seq')
            .executeTakeFirstOrThrow();
          return (lastSeq = seq);
        };
        const outcome = await work({ db, ...author, record });
        return { outcome, lastSeq };
      }),
  ).catch((error: unknown) => {
    if (error instanceof TakenBack) return { outcome: error.outcome as T, lastSeq: undefined };
    throw error;
  });
  if (lastSeq !== undefined) database.listeners.tell(lastSeq);
  return outcome;
}

/** A look without writing, tried again like a write. */
export const looking = <T>(
  database: Database,
  look: (db: Database['kysely']) => Promise<T>,
): Promise<T> => retried(() => look(database.kysely));

const jsonOrNull = (value: unknown) => (value === undefined ? null : JSON.stringify(value));
