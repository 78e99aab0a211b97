import { closeSync, mkdirSync, openSync } from 'node:fs';
import { dirname, resolve } from 'node:path';
import {
  Kysely,
  SqliteDialect,
  SqliteDriver,
  type SqliteDatabase,
  type SqliteStatement,
} from 'kysely';
import LibsqlDatabase from 'libsql';
import { ProblemError } from '../shared/index.js';
import type { Database } from './database.js';
import { listenersToCommits } from './listeners.js';
import { retried } from './retried.js';
import type { Tables } from './tables.js';

/** Short, because SQLite waits with the whole process; `retried` does the long wait. */
const busyTimeoutMs = 40;

/** Opens one file (made when missing, readable by its owner only), or a database in memory. */
export async function openSqlite(file: string): Promise<Database> {
  const path = file === ':memory:' ? file : resolve(file);
  const libsql = await retried(() => Promise.resolve().then(() => openFile(path)));
  const kysely = new Kysely<Tables>({ dialect: new ImmediateDialect(libsql) });
  const nothingMore = () => Promise.resolve();
  return {
    kind: 'sqlite',
    kysely,
    // `begin immediate` has already taken the only write lock there is.
    lockForWriting: nothingMore,
    lockForSchema: nothingMore,
    copyInto: async (copy) => {
      // On a connection nobody is using, and not prepared, like the transactions below.
      await kysely.connection().execute(async () => {
        libsql.exec(`vacuum into '${copy.replaceAll("'", "''")}'`);
      });
    },
    listeners: listenersToCommits(),
    close: () => kysely.destroy(),
  };
}

function openFile(path: string): LibsqlDatabase.Database {
  let libsql: LibsqlDatabase.Database | undefined;
  try {
    if (path !== ':memory:') {
      mkdirSync(dirname(path), { recursive: true });
      closeSync(openSync(path, 'a', 0o600));
    }
    libsql = new LibsqlDatabase(path, { timeout: busyTimeoutMs });
    const [mode] = libsql.pragma('journal_mode = wal') as [{ journal_mode: string }];
    if (path !== ':memory:' && mode.journal_mode !== 'wal') {
      throw new Error(`journal mode is ${mode.journal_mode}`);
    }
    libsql.pragma('synchronous = full');
    libsql.pragma('foreign_keys = on');
    return libsql;
  } catch (error) {
    libsql?.close();
    const { code, message } = error as Error & { readonly code?: unknown };
    if (typeof code === 'string' && code.startsWith('SQLITE_BUSY')) throw error;
    throw new ProblemError({
      code: 'store-open',
      thing: `database file ${path}`,
      value: message,
      limit: 'a file of this program on a local disk that may be written',
      wayOut:
        'Check path, rights and disk; to go back to a backup, put it in the place of this file.',
    });
  }
}

class ImmediateDialect extends SqliteDialect {
  constructor(private readonly libsql: LibsqlDatabase.Database) {
    super({ database: guarded(libsql) });
  }
  override createDriver() {
    return new ImmediateDriver(this.libsql);
  }
}

/**
 * Every transaction of ours writes, so it takes the write lock at once and never fails half-way for it.
 * Without prepared statements, because libsql leaves one that met a busy database unfinished until it is
 * collected as garbage, and until then every commit of the connection fails.
 */
class ImmediateDriver extends SqliteDriver {
  constructor(private readonly libsql: LibsqlDatabase.Database) {
    super({ database: guarded(libsql) });
  }
  override async beginTransaction(): Promise<void> {
    this.libsql.exec('begin immediate');
  }
  override async commitTransaction(): Promise<void> {
    this.libsql.exec('commit');
  }
  override async rollbackTransaction(): Promise<void> {
    // Some faults (a full disk) have ended the transaction already.
    if (this.libsql.inTransaction) this.libsql.exec('rollback');
  }
}

/** libsql 0.5.29 ends the whole process when it is given a boolean to bind; nothing it cannot hold gets there. */
function guarded(libsql: LibsqlDatabase.Database): SqliteDatabase {
  return {
    close: () => void libsql.close(),
    prepare(sql): SqliteStatement {
      const statement = libsql.prepare(sql);
      return {
        reader: statement.reader,
        all: (values) => statement.all(bindable(values)),
        run: (values) => statement.run(bindable(values)),
        iterate: (values) => statement.iterate(bindable(values)),
      };
    },
  };
}

function bindable(values: readonly unknown[]): unknown[] {
  return values.map((value, index) => {
    const fits =
      value === null ||
      typeof value === 'string' ||
      typeof value === 'bigint' ||
      (typeof value === 'number' && Number.isFinite(value));
    if (fits) return value;
    const met = typeof value === 'number' ? 'a number that is not finite' : typeof value;
    throw new TypeError(
      `Parameter ${index + 1} of a statement is ${met}; text, finite numbers and null can be bound.`,
    );
  });
}
