import type { Kysely, Transaction } from 'kysely';
import type { Listeners } from './listeners.js';
import type { Tables } from './tables.js';

export type DatabaseKind = 'sqlite' | 'postgres';

/** An open database of either kind. What differs between the two is all here. */
export interface Database {
  readonly kind: DatabaseKind;
  readonly kysely: Kysely<Tables>;
  /** Called first in every writing transaction: from here on, nobody else writes. */
  readonly lockForWriting: (transaction: Transaction<Tables>) => Promise<void>;
  /** The same before there are tables. */
  readonly lockForSchema: (transaction: Transaction<Tables>) => Promise<void>;
  /** A whole copy in one new file. */
  readonly copyInto?: (path: string) => Promise<void>;
  readonly listeners: Listeners;
  readonly close: () => Promise<void>;
}
