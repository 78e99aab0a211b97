import { backUp, type BackupOutcome } from './backup.js';
import { bookingsIn, type Bookings } from './bookings.js';
import type { Database } from './database.js';
import { historyIn, type History } from './history.js';
import { owedIn, type Owed } from './owed.js';
import { openPostgres } from './postgres.js';
import { requestsIn, type Requests } from './requests.js';
import { migrate } from './schema/migrate.js';
import { seedInto, type Seed, type Seeded } from './seed.js';
import { openSqlite } from './sqlite.js';

export type StoreSettings =
  | { readonly kind: 'sqlite'; readonly file: string }
  | { readonly kind: 'postgres'; readonly url: string };

/**
 * What the department knows, kept. Expected outcomes are values with a `kind`; what no caller may cause
 * throws. Who writes and when comes with every write.
 */
export interface Store {
  readonly requests: Requests;
  readonly bookings: Bookings;
  readonly owed: Owed;
  readonly history: History;
  readonly seed: (seed: Seed, who: string, atMs: number) => Promise<Seeded>;
  readonly backup: (path: string) => Promise<BackupOutcome>;
  /**
   * Calls the listener after every commit of this store with the number of its last change; what
   * other processes write is found with `history.since`. Returns what ends it.
   */
  readonly onChange: (listener: (seq: number) => void) => () => void;
  readonly close: () => Promise<void>;
}

/** Opens a store and brings its tables up to date; `:memory:` is a SQLite store that is never saved. */
export async function openStore(settings: StoreSettings): Promise<Store> {
  const listeners = new Set<(seq: number) => void>();
  const committed = (seq: number) => {
    // Apart from the write, so that a listener's fault is not taken for a failed write.
    for (const listener of listeners) queueMicrotask(() => listener(seq));
  };
  const database: Database =
    settings.kind === 'sqlite'
      ? await openSqlite(settings.file, committed)
      : openPostgres(settings.url, committed);
  try {
    await migrate(database);
  } catch (error) {
    await database.close();
    throw error;
  }
  return {
    requests: requestsIn(database),
    bookings: bookingsIn(database),
    owed: owedIn(database),
    history: historyIn(database),
    seed: (seed, who, atMs) => seedInto(database, seed, who, atMs),
    backup: (path) => backUp(database, path),
    onChange: (listener) => {
      listeners.add(listener);
      return () => void listeners.delete(listener);
    },
    close: () => database.close(),
  };
}
