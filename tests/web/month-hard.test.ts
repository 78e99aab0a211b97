import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openSite } from '../browser/harness.js';
import { changed, fieldsOf, made, openMonth, type MonthSite } from './month-site.js';

const evil = `<script>alert(1)</script>"&'</title><svg onload=x>`;
/** A name as it must stand in a page: nothing of it is markup. */
const unmarked = (html: string) => !/<script>alert|<svg onload/.test(html);

describe('the month when much is asked of it', () => {
  let site: MonthSite;
  beforeAll(async () => {
    site = await openMonth();
  });
  afterAll(() => site.close());

  it('twelve scanners are simulated; thirteen cannot be asked for', async () => {
    const twelve = { 'many mr1': '4', 'many mr2': '4', 'many mr3': '4', months: '2' };
    const id = await made(site, {
      ...twelve,
      name: 'Twelve',
      requestsPerDay: '240',
      technologists: '12',
    });
    const run = await site.compared([id]);
    await site.until(run, (p) => p.state === 'done');
    const csv = await site.page(`${run}/table.csv`);
    const served = Number(/"Patients served","a day",\d+,([\d.]+)/.exec(csv)?.[1]);
    // Three scanners serve at most about 60 a day; twelve with four times the demand serve far more.
    expect(served).toBeGreaterThan(120);
    const fields = fieldsOf(await site.page(`/month/scenarios/${id}`));
    const more = await site.post(`/month/scenarios/${id}`, changed(fields, { 'many mr1': '5' }));
    expect(more.status).toBe(422);
  });

  it('five hundred months of six scenarios stop when told and show what is done', async () => {
    const ids: string[] = [];
    for (let n = 0; n < 6; n++) ids.push(await made(site, { name: `Long ${n}`, months: '500' }));
    const run = await site.compared(ids);
    await site.until(run, (p) => /^month (1\d|[2-9]\d|\d{3,}) of 3000$/.test(p.at));
    await site.post(`${run}/stop`, []);
    await site.until(run, (p) => p.state === 'stopped');
    const html = await site.page(run);
    expect(html).toContain('Stopped early');
    expect(html).toContain('Run it again to the end');
    expect((await site.page('/month')).match(/stopped early/g)).not.toBeNull();
  });

  it('one stopped before a month is done says so, and runs again when asked', async () => {
    const ids = [
      await made(site, { name: 'Again A' }),
      await made(site, { name: 'Again B', bufferMin: '5' }),
    ];
    const run = await site.compared(ids);
    await site.post(`${run}/stop`, []);
    await site.until(run, (p) => p.state !== 'running');
    expect(await site.page(run)).toContain('there is nothing to show');
    expect((await fetch(`${site.url}${run}/table.csv`)).status).toBe(422);
    const again = await site.post(`${run}/again`, []);
    expect(again.headers.get('location')).toBe(run);
    await site.until(run, (p) => p.state === 'done');
    expect(await site.page(run)).toContain('against Again A');
  });

  it('the same comparison asked for twice at once is one run', async () => {
    const id = await made(site, { name: 'Asked twice', months: '4' });
    const [one, two] = await Promise.all([site.compared([id]), site.compared([id])]);
    expect(one).toBe(two);
    const { at } = await site.until(one!, (p) => p.state === 'done');
    expect(at).toBe('month 4 of 4');
    const listed = (await site.page('/month')).match(/>Asked twice<\/a>: done/g);
    expect(listed).toHaveLength(1);
  });

  it('the one held against is simulated though it is not ticked, and two of one name are told apart', async () => {
    const ids = [
      await made(site, { name: 'Same', months: '2' }),
      await made(site, { name: 'Same', months: '2', seed: '9' }),
    ];
    const answer = await site.post('/month/compare', [
      ['scenario', ids[1]!],
      ['against', ids[0]!],
    ]);
    const run = answer.headers.get('location')!;
    await site.until(run, (p) => p.state === 'done');
    const html = await site.page(run);
    expect(html).toContain(`Same (${ids[1]}) <small>against Same (${ids[0]})</small>`);
    expect(html).toContain('did not meet the same patients');
  });

  it('HTML in names stays text: in the list, the form, the result, its pictures and its table', async () => {
    const id = await made(site, {
      name: evil,
      'team 0 name': evil,
      'team 0 count': '1',
      months: '2',
    });
    expect((await site.store.scenarios.get(id))?.scenario.name).toBe(evil);
    const run = await site.compared([id]);
    await site.until(run, (p) => p.state === 'done');
    for (const path of ['/month', `/month/scenarios/${id}`, `/month/new?from=${id}`, run]) {
      const html = await site.page(path);
      expect(html).toContain('alert(1)');
      expect(unmarked(html), path).toBe(true);
    }
    const running = await site.compared([await made(site, { name: evil, months: '500' })]);
    expect(unmarked(await site.page(running))).toBe(true);
    await site.post(`${running}/stop`, []);
    const csv = await fetch(`${site.url}${run}/table.csv`);
    expect(csv.headers.get('content-type')).toContain('text/csv');
    expect(await csv.text()).toContain(`"${evil.replaceAll('"', '""')}"`);
  });

  it('a name that a spreadsheet would work out stays a name in the CSV', async () => {
    const run = await site.compared([await made(site, { name: '=1+1', months: '2' })]);
    await site.until(run, (p) => p.state === 'done');
    expect(await site.page(`${run}/table.csv`)).toContain(`"'=1+1"`);
  });
});

describe('the month of a department without requests', () => {
  it('shows its pages and says what is missing', async () => {
    const site = await openMonth({ seed: false });
    for (const path of ['/month', '/month/new', '/month/slots'])
      expect((await fetch(site.url + path)).status, path).toBe(200);
    expect(await site.page('/month/new')).toContain('no requests on record');
    const compare = await site.post('/month/compare', [['scenario', 'S-1']]);
    expect(compare.status).toBe(422);
    expect(await compare.text()).toContain('Take some requests first');
    expect((await fetch(`${site.url}/month/slots?chance=90`)).status).toBe(422);
    await site.close();
  });
});

describe('a server started anew during a run', () => {
  it('keeps the scenarios, does not know the run, and says what to do', async () => {
    const file = join(mkdtempSync(join(tmpdir(), 'month-anew-')), 'store.sqlite');
    const before = await openMonth({ file });
    const run = await before.compared(['S-1', 'S-2']);
    await before.close();
    const after = await openSite({ file, seed: false });
    const answer = await fetch(after.url + run);
    expect(answer.status).toBe(422);
    expect(await answer.text()).toContain('compare the scenarios again');
    expect((await fetch(`${after.url}${run}/progress`)).status).toBe(422);
    expect(await after.store.scenarios.list()).toHaveLength(5);
    await after.close();
  });
});
