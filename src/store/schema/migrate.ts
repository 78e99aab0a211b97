import { sql } from 'kysely';
import { ProblemError } from '../../shared/index.js';
import type { Database, DatabaseKind } from '../database.js';
import { retried } from '../retried.js';
import { achievedTables } from './achieved-tables.js';
import { consoleTables } from './console-tables.js';
import { firstTables } from './first-tables.js';
import { jointChanges } from './joint-changes.js';
import { scenarioTables } from './scenario-tables.js';

/** Forward only: a step that has been given out is never changed, only followed by another. */
const steps: readonly {
  readonly name: string;
  readonly statements: (kind: DatabaseKind) => readonly string[];
}[] = [
  { name: 'first tables', statements: firstTables },
  { name: 'console log', statements: consoleTables },
  { name: 'joint changes', statements: jointChanges },
  { name: 'scenarios', statements: scenarioTables },
  { name: 'achieved', statements: achievedTables },
];

/** Brings the tables to what this program expects: all missing steps or none, whoever else starts now. */
export async function migrate(database: Database): Promise<void> {
  await retried(() =>
    database.kysely.transaction().execute(async (transaction) => {
      await database.lockForSchema(transaction);
      await sql`create table if not exists schema_step
        (number integer not null primary key, name text not null)`.execute(transaction);
      const done = await transaction.selectFrom('schema_step').select('number').execute();
      const newest = Math.max(0, ...done.map((step) => step.number));
      if (newest > steps.length) throw newerSchema(newest);
      for (const [index, step] of steps.entries()) {
        if (index < newest) continue;
        for (const statement of step.statements(database.kind)) {
          await sql.raw(statement).execute(transaction);
        }
        await transaction
          .insertInto('schema_step')
          .values({ number: index + 1, name: step.name })
          .execute();
      }
    }),
  );
}

const newerSchema = (met: number) =>
  new ProblemError({
    code: 'store-newer',
    thing: 'database, schema step',
    value: String(met),
    limit: `this program knows steps up to ${steps.length}`,
    wayOut: 'Start the newer program that wrote it, or put a backup in its place.',
  });
