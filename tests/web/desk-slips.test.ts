import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { join } from 'node:path';
import { demoFolder } from '../../src/cli/files.js';
import { openRequests } from '../../src/cli/ground.js';
import { openSite, type Site } from '../browser/harness.js';

const day = '2026-12-08';

// Common practice, no source: forms are sent twice, two desks work at once, and nobody can come in an hour that has gone by.
describe('slips at the desk', () => {
  let site: Site;
  let nowMs = Date.parse('2026-12-01T09:00:00Z');
  beforeEach(async () => {
    site = await openSite({ seed: false, now: () => nowMs });
    const { requests } = openRequests(join(demoFolder, 'requests.csv'));
    const some = requests.filter((r) => ['R-157', 'R-160', 'R-161'].includes(r.request.id));
    await site.store.seed({ requests: some.map((r) => r.request), bookings: [] }, 'seed', 0);
  });
  afterEach(async () => {
    nowMs = Date.parse('2026-12-01T09:00:00Z');
    await site.close();
  });

  const html = { accept: 'text/html' };
  const look = async (path: string, headers: Record<string, string> = {}) =>
    (await fetch(site.url + path, { headers: { ...html, ...headers } })).text();
  const post = (path: string, fields: Record<string, string>, cookie = '') =>
    fetch(site.url + path, {
      method: 'POST',
      headers: { cookie },
      body: new URLSearchParams(fields),
      redirect: 'manual',
    });
  const said = (answer: Response) => decodeURIComponent(answer.headers.get('set-cookie') ?? '');
  const place = (start: string, cookie = '') =>
    post(`/day/${day}/place`, { request: 'R-157', scanner: 'mr1', start }, cookie);
  /** The cookie of a browser that opens the board for the first time. */
  const newDesk = async () => {
    const answer = await fetch(`${site.url}/day/${day}`, { headers: html });
    return (answer.headers.get('set-cookie') ?? '').split(';')[0]!;
  };

  it('a place asked for twice by one form is given once, and both answers say it is', async () => {
    expect(said(await place('09:00'))).toContain('R-157 is placed at 09:00');
    const again = await place('09:00');
    expect(again.status).toBe(303);
    expect(said(again)).toContain('R-157 is placed at 09:00');
    expect(await site.store.bookings.listDay(day)).toHaveLength(1);
  });

  it('a request that has another place by now says which', async () => {
    await place('09:00');
    expect(said(await place('11:00'))).toContain(
      'Not placed again: R-157 already has its place, 2026-12-08 09:00',
    );
  });

  it('two desks that never said their name do not undo each other', async () => {
    const [one, other] = [await newDesk(), await newDesk()];
    expect(one).not.toBe(other);
    await place('09:00', one);
    expect(said(await post('/undo', { date: day }, other))).toContain(
      'Not undone: there is nothing of yours to undo.',
    );
    expect(await site.store.bookings.listDay(day)).toMatchObject([{ status: 'booked' }]);
    expect(said(await post('/undo', { date: day }, one))).toContain('Undone: R-157 placed.');
  });

  it('an hour of today that has gone by is offered to nobody', async () => {
    nowMs = Date.parse(`${day}T14:02:00Z`);
    const places = await look('/requests/R-160/places');
    const today = [...places.matchAll(/2026-12-08 (\d\d:\d\d)/g)].map((m) => m[1]!);
    expect(today.length).toBeGreaterThan(0);
    for (const start of today) expect(start >= '14:05', start).toBe(true);
    const fill = await look(`/fill?propose=1&from=${day}&until=${day}`);
    const filled = [...fill.matchAll(/\|mr\d\|2026-12-08\|(\d+)\|/g)].map((m) => Number(m[1]));
    expect(filled.length).toBeGreaterThan(0);
    for (const startMin of filled) expect(startMin).toBeGreaterThanOrEqual(14 * 60 + 5);
    const gap = await look(`/day/${day}?gap=mr1_780_1080`);
    expect(gap).toContain('14:05 to 18:00');
  });

  it('nobody is late, overrunning or missing until somebody says who', async () => {
    await place('09:00');
    for (const what of ['late', 'overrun', 'no-show']) {
      const form = await look(`/mend?what=${what}&day=${day}`);
      expect(form, what).toContain('<option value="">choose</option><option value="R-157.1"');
    }
    expect(await look(`/mend?what=no-show&day=${day}&booking=R-157.1`)).not.toContain('>choose<');
  });

  it('a long message is cut where it can be seen, never lost', async () => {
    await place('09:00');
    const value = 'R-157|mr1|2026-12-08|660|30';
    const body = new URLSearchParams(Array.from({ length: 80 }, () => ['place', value]));
    const answer = await fetch(`${site.url}/fill`, { method: 'POST', body, redirect: 'manual' });
    const cookie = answer.headers.get('set-cookie') ?? '';
    expect(cookie.length).toBeLessThan(4096);
    expect(said(answer)).toContain('... and more.');
  });
});
