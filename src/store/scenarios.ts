import { storedScenario } from '../interchange/index.js';
import type { Scenario } from '../throughput/index.js';
import type { Database } from './database.js';
import { inTransaction, looking, type Tx } from './in-transaction.js';
import { refused, stale, type Refused, type Stale } from './outcomes.js';

/** A scenario as it is kept. */
export interface StoredScenario {
  readonly id: string;
  readonly version: number;
  readonly scenario: Scenario;
}

export type ScenarioOutcome =
  { readonly kind: 'saved'; readonly stored: StoredScenario } | Stale | Refused;

/** More than this are nobody's to look through. */
export const mostScenarios = 60;

/** Scenarios of the month, in the order they were added. */
export function scenariosIn(database: Database) {
  const change = (
    id: string,
    version: number,
    who: string,
    atMs: number,
    work: (tx: Tx, before: StoredScenario) => Promise<ScenarioOutcome>,
  ): Promise<ScenarioOutcome> =>
    inTransaction(database, { who, atMs }, async (tx) => {
      const row = await tx.db
        .selectFrom('scenario')
        .selectAll()
        .where('id', '=', id)
        .executeTakeFirst();
      if (row === undefined) return refused(`there is no scenario ${id}`);
      if (row.version !== version) return stale(`scenario ${id}`, version, row.version);
      return work(tx, scenarioFrom(row));
    });

  return {
    list: (): Promise<readonly StoredScenario[]> =>
      looking(database, async (db) => {
        const rows = await db.selectFrom('scenario').selectAll().orderBy('place').execute();
        return rows.map(scenarioFrom);
      }),

    get: (id: string): Promise<StoredScenario | undefined> =>
      looking(database, async (db) => {
        const row = await db
          .selectFrom('scenario')
          .selectAll()
          .where('id', '=', id)
          .executeTakeFirst();
        return row && scenarioFrom(row);
      }),

    add: (scenario: Scenario, who: string, atMs: number): Promise<ScenarioOutcome> =>
      inTransaction(database, { who, atMs }, async (tx) => {
        const { count, last } = await tx.db
          .selectFrom('scenario')
          .select(({ fn }) => [fn.countAll<number>().as('count'), fn.max('place').as('last')])
          .executeTakeFirstOrThrow();
        if (Number(count) >= mostScenarios)
          return refused(`${mostScenarios} scenarios are kept at most; take one out first`);
        // Numbers are not given twice while a later one stands.
        const place = Number(last ?? 0) + 1;
        const id = `S-${place}`;
        await tx.db
          .insertInto('scenario')
          .values({ id, place, body: JSON.stringify(scenario), version: 1 })
          .execute();
        await tx.record({ what: 'scenario', id, action: 'added', to: scenario });
        return { kind: 'saved', stored: { id, version: 1, scenario } };
      }),

    save: (id: string, version: number, scenario: Scenario, who: string, atMs: number) =>
      change(id, version, who, atMs, async (tx, before) => {
        const next = version + 1;
        await tx.db
          .updateTable('scenario')
          .set({ body: JSON.stringify(scenario), version: next })
          .where('id', '=', id)
          .execute();
        await tx.record({
          ...{ what: 'scenario', id, action: 'changed' },
          ...{ from: before.scenario, to: scenario },
        });
        return { kind: 'saved', stored: { id, version: next, scenario } };
      }),

    remove: (id: string, version: number, who: string, atMs: number) =>
      change(id, version, who, atMs, async (tx, before) => {
        await tx.db.deleteFrom('scenario').where('id', '=', id).execute();
        await tx.record({ what: 'scenario', id, action: 'removed', from: before.scenario });
        return { kind: 'saved', stored: before };
      }),
  };
}
export type Scenarios = ReturnType<typeof scenariosIn>;

const scenarioFrom = (row: { id: string; version: number; body: string }): StoredScenario => ({
  id: row.id,
  version: row.version,
  scenario: storedScenario.parse(JSON.parse(row.body)) as Scenario,
});
