import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { join } from 'node:path';
import { demoFolder } from '../../src/cli/files.js';
import { openRequests } from '../../src/cli/ground.js';
import { openSite, type Site } from '../browser/harness.js';

// Ireland leaves summer time on 2026-10-25 and enters it on 2027-03-28, both at 01:00 UTC (Directive 2000/84/EC).
describe('the clock of an exam', () => {
  let site: Site;
  let nowMs = 0;
  beforeEach(async () => {
    site = await openSite({ seed: false, now: () => nowMs });
  });
  afterEach(() => site.close());

  const id = 'R-102.1';
  const bookedAt = async (date: string, startMin: number) => {
    const { requests } = openRequests(join(demoFolder, 'requests.csv'));
    const { request, booking } = requests.find((r) => r.request.id === 'R-102')!;
    const placed = { ...booking!, date, startMin, teams: [] };
    await site.store.seed({ requests: [request], bookings: [placed] }, 'first start', 0);
  };
  const look = async () => (await fetch(`${site.url}/console/${id}`)).text();
  const tapAt = async (instant: string, fields: Record<string, string>) => {
    nowMs = Date.parse(instant);
    const body = new URLSearchParams(fields);
    await fetch(`${site.url}/console/${id}`, { method: 'POST', body, redirect: 'manual' });
  };
  const start = { kind: 'started', view: 'ax-t2', sequence: 'head-ax-t2-ss-half' };
  const times = async () => (await site.store.consoleLog.list(id)).map((e) => Math.round(e.atS));

  it.each([
    ['2026-10-25', '2026-10-25T09:00:00Z'],
    ['2027-03-28', '2027-03-28T08:00:00Z'],
  ])('begins at 09:00 of the wall on %s', async (date, instant) => {
    await bookedAt(date, 540);
    nowMs = Date.parse(instant);
    expect(await look()).toContain(`data-zero-ms="${Date.parse(instant)}"`);
  });

  it('counts the minutes that go by where the wall shows an hour twice', async () => {
    await bookedAt('2026-10-25', 90);
    await tapAt('2026-10-25T00:50:00Z', start);
    await tapAt('2026-10-25T01:10:00Z', { kind: 'clean' });
    expect(await times()).toEqual([1200, 2400]);
  });

  it('counts the minutes that go by where the wall skips an hour', async () => {
    await bookedAt('2027-03-28', 30);
    await tapAt('2027-03-28T00:50:00Z', start);
    await tapAt('2027-03-28T01:10:00Z', { kind: 'clean' });
    expect(await times()).toEqual([1200, 2400]);
  });

  it('runs on past midnight, to the hand-over', async () => {
    await bookedAt('2026-12-08', 23 * 60 + 50);
    await tapAt('2026-12-08T23:55:00Z', start);
    await tapAt('2026-12-09T00:02:00Z', { kind: 'clean' });
    await tapAt('2026-12-09T00:03:00Z', { kind: 'ended' });
    expect(await times()).toEqual([300, 720, 780]);
    const page = await look();
    expect(page).toContain('Hand over');
    expect(page).toMatch(/Run: 5:00 [^;]+, clean\./);
  });
});
