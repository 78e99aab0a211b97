import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { join } from 'node:path';
import { demoFolder } from '../../src/cli/files.js';
import { openDepartment, openGround } from '../../src/cli/ground.js';
import { seedScenarios } from '../../src/web/seed-scenarios.js';
import { openSite, type Site } from '../browser/harness.js';

describe('the month over HTTP', () => {
  let site: Site;
  beforeAll(async () => {
    site = await openSite();
    await seedScenarios(join(demoFolder, 'scenarios.yaml'), {
      store: site.store,
      ground: openGround().ground,
      department: openDepartment(),
      now: () => 0,
    });
  });
  afterAll(() => site.close());

  const post = (path: string, fields: readonly (readonly [string, string])[]) =>
    fetch(site.url + path, {
      method: 'POST',
      body: new URLSearchParams(fields.map((f) => [...f])),
      redirect: 'manual',
    });
  const page = async (path: string) => (await fetch(site.url + path)).text();

  /** The fields of a form as a browser would send them. */
  function fieldsOf(html: string): [string, string][] {
    const form =
      /<form method="post" action="\/month\/scenarios[^]*?<\/form>/.exec(html)?.[0] ?? '';
    const inputs = [...form.matchAll(/<input([^>]*)>/g)].flatMap(([, tag]) => {
      const name = /name="([^"]*)"/.exec(tag!)?.[1];
      const kind = /type="([^"]*)"/.exec(tag!)?.[1] ?? 'text';
      const value = /value="([^"]*)"/.exec(tag!)?.[1] ?? '';
      if (name === undefined) return [];
      if ((kind === 'radio' || kind === 'checkbox') && !tag!.includes(' checked')) return [];
      return [[name, value] as [string, string]];
    });
    const selects = [...form.matchAll(/<select name="([^"]*)">([^]*?)<\/select>/g)].map(
      ([, name, options]): [string, string] => {
        const chosen = /<option(?: value="([^"]*)")? selected>([^<]*)/.exec(options!);
        return [name!, chosen?.[1] ?? chosen?.[2] ?? ''];
      },
    );
    return [...inputs, ...selects];
  }

  it('a scenario saved without a change is the same scenario', async () => {
    const before = await site.store.scenarios.list();
    for (const { id, scenario } of before) {
      const fields = fieldsOf(await page(`/month/scenarios/${id}`));
      expect((await post(`/month/scenarios/${id}`, fields)).status).toBe(303);
      expect((await site.store.scenarios.get(id))?.scenario).toEqual(scenario);
    }
  });

  it('a copy with one more scanner and a team has them, and its own name', async () => {
    const fields = fieldsOf(await page('/month/new?from=S-3')).filter(
      ([name]) => !['many mr1', 'name', 'team 0 name', 'team 0 count'].includes(name),
    );
    const added = await post('/month/scenarios', [
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
    const fields = fieldsOf(await page('/month/scenarios/S-1')).filter(
      ([name]) => !(name in change),
    );
    const answer = await post('/month/scenarios/S-1', [
      ...fields.filter(([name]) => name !== 'name'),
      ['name', 'Typed by hand'],
      ...Object.entries(change),
    ]);
    expect(answer.status).toBe(422);
    const html = await answer.text();
    expect(html).toContain(word);
    expect(html).toContain('field-problem');
    expect(html).toContain('Typed by hand');
    expect((await site.store.scenarios.get('S-1'))?.scenario.name).not.toBe('Typed by hand');
  });

  async function compared(ids: readonly string[]): Promise<string> {
    const answer = await post('/month/compare', [
      ...ids.map((id) => ['scenario', id] as const),
      ['against', ids[0]!],
    ]);
    expect(answer.status).toBe(303);
    return answer.headers.get('location')!;
  }

  async function until(run: string, wanted: (p: { state: string; percent: number }) => boolean) {
    for (let i = 0; i < 1200; i++) {
      const progress = (await (await fetch(`${site.url}${run}/progress`)).json()) as {
        state: string;
        percent: number;
      };
      if (wanted(progress)) return progress;
      await new Promise((resolve) => setTimeout(resolve, 50));
    }
    throw new Error('the simulation did not get there');
  }

  it('two scenarios are simulated, said in words, drawn, and given as CSV and JSON', async () => {
    const run = await compared(['S-1', 'S-2']);
    await until(run, (p) => p.state === 'done');
    const html = await page(run);
    expect(html).toContain('against Fixed 30 minutes, full protocol');
    expect(html).toMatch(
      /\d+\.\d \(\d+\.\d to \d+\.\d\) more questions are answered diagnostically a day: \d/,
    );
    expect(html.match(/<svg/g)!.length).toBeGreaterThanOrEqual(6);
    const csv = await page(`${run}/table.csv`);
    expect(csv.split('\r\n')).toHaveLength(1 + 2 * 18);
    const json = JSON.parse(await page(`${run}/table.json`)) as { days: number };
    expect(json.days).toBe(400);
    // Asked again, it is the same run.
    expect(await compared(['S-1', 'S-2'])).toBe(run);
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
    const run = await compared(['S-1', 'S-2']);
    await until(run, (p) => p.percent > 51);
    expect((await post(`${run}/stop`, [])).status).toBe(303);
    await until(run, (p) => p.state === 'stopped');
    expect(await page(run)).toContain('Stopped early');
  });

  it('no more than two run at once, and nothing ticked is told', async () => {
    const stored = (await site.store.scenarios.get('S-2'))!;
    const runs: string[] = [];
    for (const months of [500, 499]) {
      const { version } = (await site.store.scenarios.get('S-2'))!;
      await site.store.scenarios.save('S-2', version, { ...stored.scenario, months }, 't', 0);
      runs.push(await compared(['S-2', 'S-3']));
    }
    const busy = await post('/month/compare', [['scenario', 'S-3']]);
    expect(busy.status).toBe(422);
    expect(await busy.text()).toContain('at most 2 at once');
    for (const run of runs) await post(`${run}/stop`, []);
    for (const run of runs) await until(run, (p) => p.state === 'stopped');
    expect((await post('/month/compare', [])).status).toBe(422);
  });

  it('slot advice gives a slot per exam and group, and refuses what is no chance', async () => {
    const html = await page('/month/slots?chance=90&late=3&idle=1&exam=knee&group=settled');
    expect(html).toContain('Knee, outpatients who keep still');
    expect(html).toContain('Late and idle minutes balance at');
    const bad = await fetch(`${site.url}/month/slots?chance=120`);
    expect(bad.status).toBe(422);
  });
});
