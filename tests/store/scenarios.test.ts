import { expect, it } from 'vitest';
import { openDepartment } from '../../src/cli/ground.js';
import { firstScenarios, usualScenario } from '../../src/throughput/index.js';
import { freshStore, onEveryStore, openAgain } from './ground.js';

const [fixed, fitted, quick] = firstScenarios(usualScenario(openDepartment(), []).scenario);

onEveryStore('kept scenarios', (kind) => {
  it('come back as they were, in the order they were added', async () => {
    const { store } = await freshStore(kind);
    for (const scenario of [fixed!, fitted!, quick!])
      await store.scenarios.add(scenario, 'manager', 1);
    const list = await store.scenarios.list();
    expect(list.map((s) => s.scenario)).toEqual([fixed, fitted, quick]);
    expect(list.map((s) => s.id)).toEqual(['S-1', 'S-2', 'S-3']);
  });

  it('two managers at once: one saves, the other is told', async () => {
    const { store } = await freshStore(kind);
    await store.scenarios.add(fixed!, 'manager', 1);
    const both = await Promise.all(
      ['a', 'b'].map((name) => store.scenarios.save('S-1', 1, { ...fixed!, name }, name, 2)),
    );
    expect(both.map((o) => o.kind).sort()).toEqual(['saved', 'stale']);
    const kept = await store.scenarios.get('S-1');
    expect(kept?.version).toBe(2);
    expect(['a', 'b']).toContain(kept?.scenario.name);
  });

  it('twenty added at once all have a number of their own', async () => {
    const { store, settings } = await freshStore(kind);
    const other = kind === 'sqlite in memory' ? { store } : await openAgain(settings);
    await Promise.all(
      Array.from({ length: 20 }, (_, n) =>
        (n % 2 === 0 ? store : other.store).scenarios.add(fixed!, 'manager', 1),
      ),
    );
    expect(new Set((await store.scenarios.list()).map((s) => s.id)).size).toBe(20);
  });

  it('one taken out is gone, and what was changed stays in the history', async () => {
    const { store } = await freshStore(kind);
    await store.scenarios.add(fixed!, 'manager', 1);
    await store.scenarios.remove('S-1', 1, 'manager', 2);
    expect(await store.scenarios.get('S-1')).toBeUndefined();
    expect((await store.scenarios.remove('S-1', 1, 'manager', 3)).kind).toBe('refused');
    const actions = (await store.history.of('scenario', 'S-1')).map((c) => c.action);
    expect(actions).toEqual(['added', 'removed']);
  });
});
