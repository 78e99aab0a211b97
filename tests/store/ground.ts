/** What the store's tests stand on: a fresh store of every kind, invented requests, and a look at the bare tables. */
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import pg from 'pg';
import { afterEach, describe, it } from 'vitest';
import type { ExamRequest } from '../../src/planning/index.js';
import type { Store, StoreSettings } from '../../src/store/index.js';
import { openDatabase, storeOn } from '../../src/store/store.js';
import type { Database } from '../../src/store/database.js';

export type StoreKind = 'sqlite in memory' | 'sqlite file' | 'postgres';

const serverUrl = process.env['TEST_DATABASE_URL'];

export interface Fresh {
  readonly settings: StoreSettings;
  readonly store: Store;
  /** Under the store: for looking at tables and for trying to break them. */
  readonly database: Database;
}

let disposals: (() => Promise<void> | void)[] = [];
let schemas = 0;

/** An empty store; gone after the test. */
export async function freshStore(kind: StoreKind): Promise<Fresh> {
  const settings = await freshSettings(kind);
  const database = await openDatabase(settings);
  disposals.unshift(() => database.close());
  return { settings, database, store: storeOn(database) };
}

/** One more connection to the same store. */
export async function openAgain(settings: StoreSettings): Promise<Fresh> {
  const database = await openDatabase(settings);
  disposals.unshift(() => database.close());
  return { settings, database, store: storeOn(database) };
}

export async function freshSettings(kind: StoreKind): Promise<StoreSettings> {
  if (kind === 'sqlite in memory') return { kind: 'sqlite', file: ':memory:' };
  if (kind === 'sqlite file') {
    const folder = mkdtempSync(join(tmpdir(), 'stillspan-store-'));
    disposals.push(() => rmSync(folder, { recursive: true, force: true }));
    return { kind: 'sqlite', file: join(folder, 'store.sqlite') };
  }
  const schema = `t_${process.pid}_${(schemas += 1)}`;
  await onServer(`create schema ${schema}`);
  disposals.push(() => onServer(`drop schema ${schema} cascade`));
  const url = new URL(serverUrl ?? '');
  url.searchParams.set('options', `-c search_path=${schema}`);
  return { kind: 'postgres', url: url.href };
}

async function onServer(statement: string): Promise<void> {
  const client = new pg.Client({ connectionString: serverUrl });
  await client.connect();
  await client.query(`set client_min_messages = warning; ${statement}`);
  await client.end();
}

afterEach(async () => {
  const now = disposals;
  disposals = [];
  for (const dispose of now) await dispose();
});

/** The same facts, stated of every kind of store. */
export function onEveryStore(
  name: string,
  facts: (kind: StoreKind) => void,
  kinds: readonly StoreKind[] = ['sqlite in memory', 'sqlite file', 'postgres'],
): void {
  for (const kind of kinds) {
    if (kind === 'postgres' && serverUrl === undefined) {
      it.skip(`${name}, on postgres: set TEST_DATABASE_URL to an empty database to run these`);
    } else {
      describe(`${name}, on ${kind}`, () => facts(kind));
    }
  }
}

/** An invented request. */
export const examRequest = (id: string, more: Partial<ExamRequest> = {}): ExamRequest => ({
  id,
  examId: 'knee',
  questionIds: [],
  priority: 'routine',
  canCome: { partOfDay: 'any' },
  tolerance: {
    still: { kind: 'stated', seconds: 1200 },
    hold: { kind: 'not asked' },
    stay: { kind: 'not asked' },
    saidBy: 'patient',
    followsInstructions: 'yes',
    conditions: [],
    patientClass: 'outpatient',
  },
  contrast: 'not needed',
  safetyScreening: 'done by site',
  transport: 'walking',
  escort: false,
  slotS: 1800,
  ...more,
});

export { at, day } from './ground-places.js';

/** The outcome if it is of the kind expected; the test ends here if not. */
export function expectKind<O extends { readonly kind: string }, K extends O['kind']>(
  outcome: O,
  kind: K,
): Extract<O, { readonly kind: K }> {
  if (outcome.kind !== kind) throw new Error(`expected ${kind}, got ${JSON.stringify(outcome)}`);
  return outcome as Extract<O, { readonly kind: K }>;
}
