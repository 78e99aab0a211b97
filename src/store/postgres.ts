import { Kysely, PostgresDialect, sql } from 'kysely';
import pg from 'pg';
import type { Database } from './database.js';
import { listenersToCommits } from './listeners.js';
import type { Tables } from './tables.js';

const int8 = 20;
/** Any fixed number; held while the tables are made or changed. */
const schemaLock = 7_741_153;

/** Opens a pool of connections. Nothing is sent before the first query. */
export function openPostgres(url: string): Database {
  const pool = new pg.Pool({
    connectionString: url,
    max: 8,
    connectionTimeoutMillis: 10_000,
    lock_timeout: 10_000,
    idle_in_transaction_session_timeout: 30_000,
    types: {
      // Our integers are counts and epoch ms, far below 2^53; the driver's default is text.
      getTypeParser: (oid: number, format?: 'text' | 'binary') =>
        oid === int8 && format !== 'binary'
          ? Number
          : pg.types.getTypeParser(oid, format as 'text'),
    } as pg.CustomTypesConfig,
  });
  // A lost connection fails the query that runs on it; without a listener it would end the process too.
  const lost = () => undefined;
  pool.on('error', lost);
  pool.on('connect', (client) => client.on('error', lost));
  const kysely = new Kysely<Tables>({ dialect: new PostgresDialect({ pool }) });
  return {
    kind: 'postgres',
    kysely,
    // One writer at a time, readers never wait: history numbers then appear in the order of commits.
    // A lock statement takes no snapshot, so the transaction sees all that was committed before it.
    lockForWriting: async (transaction) => {
      await sql`lock table change in exclusive mode`.execute(transaction);
    },
    lockForSchema: async (transaction) => {
      await sql`select pg_advisory_xact_lock(${schemaLock})`.execute(transaction);
    },
    listeners: listenersToCommits(),
    close: () => kysely.destroy(),
  };
}
