import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { measureWords } from '../../src/throughput/index.js';
import { changed, fieldsOf, openMonth, type MonthSite } from './month-site.js';

describe('the month over HTTP', () => {
  let site: MonthSite;
  beforeAll(async () => {
    site = await openMonth();
  });
  afterAll(() => site.close());

  it('a scenario saved without a change is the same scenario', async () => {
    const before = await site.store.scenarios.list();
    for (const { id, scenario } of before) {
      const fields = fieldsOf(await site.page(`/month/scenarios/${id}`));
      expect((await site.post(`/month/scenarios/${id}`, fields)).status).toBe(303);
      expect((await site.store.scenarios.get(id))?.scenario).toEqual(scenario);
    }
  });

  it('a copy with one more scanner and a team has them, and its own name', async () => {
    const fields = fieldsOf(await site.page('/month/new?from=S-3')).filter(
      ([name]) => !['many mr1', 'name', 'team 0 name', 'team 0 count'].includes(name),
    );
    const added = await site.post('/month/scenarios', [
      ...fields,
      ['name', 'One more'],
      ['many mr1', '2'],
      ['team 0 name', 'play specialist'],
      ['team 0 count', '1'],
      ['team 0 child', 'yes'],
    ]);
    expect(added.status).toBe(303);
    const { scenario } = (await site.store.scenarios.list()).at(-1)!;
    expect(scenario.name).toBe('One more');
    expect(scenario.scanners.map((s) => s.id)).toEqual(['mr1', 'mr1-2', 'mr2', 'mr3']);
    expect(scenario.teams).toEqual([{ name: 'play specialist', count: 1, groups: ['child'] }]);
  });

  it.each([
    [
      'no scanner',
      { 'many mr1': '0', 'many mr2': '0', 'many mr3': '0' },
      'a department has a scanner',
    ],
    ['30-hour days', { 'hours mr1': '08:00-38:00' }, 'from 00:00 to 24:00 of one day'],
    ['hours that are no hours', { 'hours mr2': 'all day' }, 'hours such as 08:00-18:00'],
    ['a negative rate', { requestsPerDay: '-4' }, 'a number from 0 to 500'],
    ['words for a number', { emergenciesPerDay: 'a few' }, 'a number from 0 to 100'],
    ['a million days', { months: '500', daysAMonth: '60' }, 'at most 20000 days a run'],
    ['110 percent', { lateShare: '110' }, '0 to 100 %'],
  ])('%s is refused at its field and nothing typed is lost', async (_, change, word) => {
    const fields = fieldsOf(await site.page('/month/scenarios/S-1'));
    const answer = await site.post(
      '/month/scenarios/S-1',
      changed(fields, { name: 'Typed by hand', ...change }),
    );
    expect(answer.status).toBe(422);
    const html = await answer.text();
    expect(html).toContain(word);
    expect(html).toContain('field-problem');
    expect(html).toContain('Typed by hand');
    expect((await site.store.scenarios.get('S-1'))?.scenario.name).not.toBe('Typed by hand');
  });

  it('two scenarios are simulated, said in words, drawn, and given as CSV and JSON', async () => {
    const run = await site.compared(['S-1', 'S-2']);
    await site.until(run, (p) => p.state === 'done');
    const html = await site.page(run);
    expect(html).toContain('against Fixed 30 minutes, full protocol');
    expect(html).toMatch(
      /\d+\.\d \(\d+\.\d to \d+\.\d\) more questions a day are answered diagnostically: \d/,
    );
    expect(html.match(/<svg/g)!.length).toBeGreaterThanOrEqual(6);
    const csv = await site.page(`${run}/table.csv`);
    expect(csv.split('\r\n')).toHaveLength(1 + 2 * Object.keys(measureWords).length);
    const json = JSON.parse(await site.page(`${run}/table.json`)) as { days: number };
    expect(json.days).toBe(400);
    // Asked again, it is the same run.
    expect(await site.compared(['S-1', 'S-2'])).toBe(run);
  });

  it('a stopped run shows what it had', async () => {
    const stored = (await site.store.scenarios.get('S-1'))!;
    await site.store.scenarios.save(
      'S-1',
      stored.version,
      { ...stored.scenario, months: 500 },
      't',
      0,
    );
    const run = await site.compared(['S-1', 'S-2']);
    await site.until(run, (p) => p.percent > 51);
    expect((await site.post(`${run}/stop`, [])).status).toBe(303);
    await site.until(run, (p) => p.state === 'stopped');
    expect(await site.page(run)).toContain('Stopped early');
  });

  it('no more than two run at once, and nothing ticked is told', async () => {
    const stored = (await site.store.scenarios.get('S-2'))!;
    const runs: string[] = [];
    for (const months of [500, 499]) {
      const { version } = (await site.store.scenarios.get('S-2'))!;
      await site.store.scenarios.save('S-2', version, { ...stored.scenario, months }, 't', 0);
      runs.push(await site.compared(['S-2', 'S-3']));
    }
    const busy = await site.post('/month/compare', [['scenario', 'S-3']]);
    expect(busy.status).toBe(422);
    expect(await busy.text()).toContain('at most 2 at once');
    for (const run of runs) await site.post(`${run}/stop`, []);
    for (const run of runs) await site.until(run, (p) => p.state === 'stopped');
    expect((await site.post('/month/compare', [])).status).toBe(422);
  });

  it('slot advice gives a slot per exam and group, and refuses what is no chance', async () => {
    const html = await site.page('/month/slots?chance=90&late=3&idle=1&exam=knee&group=settled');
    expect(html).toContain('Knee, outpatients who keep still');
    expect(html).toContain('the cheapest slot is');
    const bad = await fetch(`${site.url}/month/slots?chance=120`);
    expect(bad.status).toBe(422);
  });
});
