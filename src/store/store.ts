import { ProblemError } from '../shared/index.js';
import { achievedIn, type Achieved } from './achieved.js';
import { backUp, type BackupOutcome } from './backup.js';
import { bookingsIn, type Bookings } from './bookings.js';
import { consoleLogIn, type ConsoleLog } from './console-log.js';
import type { Database } from './database.js';
import { historyIn, type History } from './history.js';
import { owedIn, type Owed } from './owed.js';
import { openPostgres } from './postgres.js';
import { scenariosIn, type Scenarios } from './scenarios.js';
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
  readonly consoleLog: ConsoleLog;
  readonly scenarios: Scenarios;
  readonly achieved: Achieved;
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
export const openStore = async (settings: StoreSettings): Promise<Store> =>
  storeOn(await openDatabase(settings));

/** The database alone, its tables up to date. */
export async function openDatabase(settings: StoreSettings): Promise<Database> {
  const database =
    settings.kind === 'sqlite' ? await openSqlite(settings.file) : openPostgres(settings.url);
  try {
    await migrate(database);
  } catch (error) {
    await database.close();
    throw error instanceof ProblemError || settings.kind === 'sqlite' ? error : unreachable(error);
  }
  return database;
}

export function storeOn(database: Database): Store {
  return {
    requests: requestsIn(database),
    bookings: bookingsIn(database),
    owed: owedIn(database),
    history: historyIn(database),
    consoleLog: consoleLogIn(database),
    scenarios: scenariosIn(database),
    achieved: achievedIn(database),
    seed: (seed, who, atMs) => seedInto(database, seed, who, atMs),
    backup: (path) => backUp(database, path),
    onChange: database.listeners.listen,
    close: database.close,
  };
}

/** Says what went wrong without the connection string, which holds a password. */
function unreachable(error: unknown): ProblemError {
  const { code, name } = error as Error & { readonly code?: unknown };
  return new ProblemError({
    code: 'store-open',
    thing: 'database server',
    value: typeof code === 'string' ? code : name,
    limit: 'it must accept the connection string, and tables may be made in its schema',
    wayOut:
      'Check host, port, database, user and rights; the connection string itself is not shown.',
  });
}
