import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { demoFolder } from '../../src/cli/files.js';
import { openDepartment, openGround, openRequests } from '../../src/cli/ground.js';
import { linearSolver } from '../../src/planning/index.js';
import { openStore, type Store } from '../../src/store/index.js';
import type { PageDeps } from '../../src/web/deps.js';
import { FillSearches } from '../../src/web/fill-searches.js';
import { Planner } from '../../src/web/planner.js';

const days = ['2026-12-08', '2026-12-09'];

// Searches of a desk that may close its page at any moment; the clock that says who still looks is the test's.
describe('searches for places', () => {
  let store: Store;
  let searches: FillSearches;
  let nowMs = 0;
  const faults: string[] = [];
  const solver = linearSolver({ wallClockMs: 150 });
  beforeEach(async () => {
    store = await openStore({ kind: 'sqlite', file: ':memory:' });
    const { requests } = openRequests(join(demoFolder, 'requests.csv'));
    const waiting = requests.filter((r) => r.booking === undefined).slice(0, 4);
    await store.seed({ requests: waiting.map((r) => r.request), bookings: [] }, 'first start', 0);
    const given = {
      ...{ store, solver, now: () => nowMs, ground: openGround().ground },
      ...{ department: openDepartment(), log: (line: string) => faults.push(line) },
    };
    searches = new FillSearches({ ...given, planner: new Planner(given) } as unknown as PageDeps);
  });
  afterEach(async () => {
    await store.close();
    expect(faults).toEqual([]);
  });

  const until = async (id: string, when: () => boolean): Promise<void> => {
    for (let n = 0; n < 4000 && !when(); n++) await new Promise((r) => setTimeout(r, 5));
    expect({ id, came: when() }).toEqual({ id, came: true });
  };

  // Source: holds for any right server: nobody's search goes on for ever, and what it found is kept.
  it('end by themselves when nobody looks, with what they have', async () => {
    const { id } = searches.start('desk', days, 30);
    await until(id, () => searches.look(id)?.at === 'search');
    nowMs += 16_000;
    // Looking would keep it going: it is looked at only after it had time to end.
    await new Promise((r) => setTimeout(r, 500));
    const ended = searches.look(id)!;
    expect(ended.state).toBe('stopped');
    expect(ended.proposal!.placements.length + ended.proposal!.waiting.length).toBe(4);
  });

  it('go on while somebody looks, and end when told', async () => {
    const { id } = searches.start('desk', days, 30);
    await until(id, () => searches.look(id)?.at === 'search');
    for (let n = 0; n < 5; n++) {
      nowMs += 10_000;
      await new Promise((r) => setTimeout(r, 50));
      expect(searches.look(id)?.state).toBe('running');
    }
    await searches.stop(id);
    expect(searches.look(id)).toMatchObject({ state: 'stopped', share: 1 });
    expect(searches.look(id)!.bound!.diagnostic).toBeGreaterThanOrEqual(
      searches.look(id)!.reached!.diagnostic,
    );
  });

  it('take about as long as they were asked to', async () => {
    const { id } = searches.start('desk', days, 1);
    await until(id, () => searches.look(id)?.at === 'search');
    const beganMs = performance.now();
    await until(id, () => searches.look(id)?.state === 'done');
    const spentS = (performance.now() - beganMs) / 1000;
    expect(spentS).toBeGreaterThan(0.2);
    expect(spentS).toBeLessThan(2.6);
  });

  it('are three at most, and one a desk', async () => {
    const first = searches.start('a', days, 30);
    const others = ['b', 'c'].map((desk) => searches.start(desk, days, 30));
    expect(() => searches.start('d', days, 30)).toThrow(/at most 3 at once/);
    const again = searches.start('a', days, 30);
    await until(first.id, () => searches.look(first.id)?.state === 'stopped');
    for (const { id } of [again, ...others]) {
      expect(searches.look(id)?.state).toBe('running');
      await searches.stop(id);
    }
  });
});
