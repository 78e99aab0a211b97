/**
 * A process that writes is killed (SIGKILL, no goodbye) twenty times on one store. Holds for any right
 * store: what was acknowledged is there, and no commit is there by half. A kill ends a process, not the
 * machine: what a power cut does is the disk's and the synchronous setting's matter.
 */
import { sql } from 'kysely';
import { setTimeout as wait } from 'node:timers/promises';
import { expect, it } from 'vitest';
import type { Database } from '../../src/store/database.js';
import { expectWhole } from './check-whole.js';
import { allItSays, childProgram, firstWord } from './child-process.js';
import { examRequest, freshStore, onEveryStore, openAgain, type StoreKind } from './ground.js';

const kills = 20;
const requestIds = Array.from({ length: 12 }, (_, n) => `R-${n + 1}`);

interface Acknowledged {
  readonly atMs: number;
  readonly id: string;
  readonly version: number;
}

/** Moments spread over the first 300 ms of writing, the same in every run. */
const momentMs = (n: number) => 5 + ((n * 97) % 300);

onEveryStore(
  'killed twenty times',
  (kind) => {
    it('nothing acknowledged is lost and nothing is there by half', async () => {
      const first = await freshStore(kind);
      await first.store.seed(
        { requests: requestIds.map((id) => examRequest(id)), bookings: [] },
        'Ina',
        1,
      );
      const start = childProgram('write-until-killed');
      const acknowledged: Acknowledged[] = [];
      for (let n = 1; n <= kills; n++) {
        const child = start({
          settings: first.settings,
          requestIds,
          seed: n,
        });
        const ended = new Promise((end) => child.once('exit', (_code, signal) => end(signal)));
        await firstWord(child);
        const said = allItSays(child);
        await wait(momentMs(n));
        child.kill('SIGKILL');
        expect(await ended).toBe('SIGKILL');
        const lines = (await said).split('\n').slice(0, -1);
        expect(lines.length).toBeGreaterThan(0);
        acknowledged.push(...lines.map((line) => JSON.parse(line) as Acknowledged));

        const { database } = await openAgain(first.settings);
        await expectKept(database, acknowledged, n);
        await expectWhole(database);
        await expectSound(database, kind);
      }
    });
  },
  ['sqlite file', 'postgres'],
);

/** Every acknowledged commit is in the history; beyond them at most the one under way at each kill, whole. */
async function expectKept(
  { kysely }: Database,
  acknowledged: readonly Acknowledged[],
  killed: number,
) {
  const lines = await kysely.selectFrom('change').selectAll().where('at_ms', '>', 1).execute();
  const commits = new Map<number, typeof lines>();
  for (const line of lines) commits.set(line.at_ms, [...(commits.get(line.at_ms) ?? []), line]);
  for (const { atMs, id, version } of acknowledged) {
    const booking = commits.get(atMs)?.find((line) => line.what === 'booking');
    expect(JSON.parse(booking?.after ?? 'null')).toMatchObject({ id, version });
  }
  expect(commits.size).toBeLessThanOrEqual(acknowledged.length + killed);
  for (const commit of commits.values()) {
    const action = commit.find((line) => line.what === 'booking')?.action;
    const parts = commit.map((line) => `${line.what} ${line.action}`).sort();
    if (action === 'placed') expect(parts).toEqual(['booking placed', 'request booked']);
    else if (action === 'cancelled')
      expect(parts).toEqual(['booking cancelled', 'request waiting']);
    else expect(parts).toEqual([`booking ${action}`]);
  }
}

async function expectSound({ kysely }: Database, kind: StoreKind) {
  if (kind === 'postgres') return;
  const { rows } = await sql<{ integrity_check: string }>`pragma integrity_check`.execute(kysely);
  expect(rows).toEqual([{ integrity_check: 'ok' }]);
  expect((await sql`pragma foreign_key_check`.execute(kysely)).rows).toEqual([]);
}
