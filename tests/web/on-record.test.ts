import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { join } from 'node:path';
import { demoFolder } from '../../src/cli/files.js';
import { openRequests } from '../../src/cli/ground.js';
import { openSite, type Site } from '../browser/harness.js';

const day = '2026-12-08';

// The issue's own rule: an answer below diagnostic never passes for one, and stays owed until it is given or signed off.
describe('what a done exam answered', () => {
  let site: Site;
  beforeEach(async () => {
    site = await openSite({ seed: false });
    const { requests } = openRequests(join(demoFolder, 'requests.csv'));
    const some = requests.filter((r) => ['R-128', 'R-101', 'R-164'].includes(r.request.id));
    await site.store.seed(
      {
        requests: some.map((r) => r.request),
        bookings: some.flatMap((r) => (r.booking === undefined ? [] : { ...r.booking, teams: [] })),
      },
      'first start',
      0,
    );
  });
  afterEach(() => site.close());

  const look = async (path: string) => (await fetch(site.url + path)).text();
  const post = (path: string, fields: Record<string, string>) =>
    fetch(site.url + path, {
      method: 'POST',
      body: new URLSearchParams(fields),
      redirect: 'manual',
    });

  /** R-128 was planned diagnostic throughout and came out as screening, targeted and nothing. */
  const recordLow = async () => {
    const page = await look('/bookings/R-128.1/done');
    const version = /name="version" value="(\d+)"/.exec(page)![1]!;
    const names = [...new Set([...page.matchAll(/name="(grade_[^"]+)"/g)].map((m) => m[1]!))];
    const got = ['screening', 'targeted', 'none'];
    const fields = Object.fromEntries(names.map((name, n) => [name, got[n % got.length]!]));
    expect((await post('/bookings/R-128.1/done', { version, ...fields })).status).toBe(303);
  };
  const panelOf = (page: string) => page.slice(page.indexOf('id="panel"'));
  const blockOf = (page: string) =>
    /<li class="block booking[^>]*data-booking="R-128\.1"[\s\S]*?<\/li>/.exec(page)![0];

  it('stands on the board in place of what was planned', async () => {
    const before = await look(`/day/${day}?booking=R-128.1`);
    expect(blockOf(before)).not.toContain('lowest:');
    await recordLow();
    const page = await look(`/day/${day}?booking=R-128.1`);
    expect(blockOf(page)).toContain('lowest: one not answered');
    expect(panelOf(page)).toContain('screening-grade, not diagnostic');
    expect(panelOf(page)).toContain(
      'targeted: this question only, not diagnostic for anything else',
    );
    expect(panelOf(page)).not.toContain('chance to end in time');
  });

  it('stands in the list of requests and on the plan sheet', async () => {
    await recordLow();
    const list = await look('/requests?status=done');
    expect(list).toContain('not answered');
    expect(list).not.toContain('> diagnostic');
    const sheet = await look('/requests/R-128');
    const recorded = sheet.slice(sheet.indexOf('what it answered'), sheet.indexOf('Below stands'));
    expect(recorded).toContain('screening-grade, not diagnostic');
    expect(recorded).toContain('not answered');
  });

  it('only a request that asks the same question is offered as a follow-up, and none is chosen by itself', async () => {
    await recordLow();
    const owed = await site.store.owed.list();
    const lesion = owed.find((o) => o.questionId === 'new-lesion')!;
    const active = owed.find((o) => o.questionId === 'active-lesion')!;
    const page = await look('/owed');
    const item = (id: string) =>
      page.slice(page.indexOf(`/owed/${id}/follow-up`), page.indexOf(`/owed/${id}/sign-off`));
    expect(item(lesion.id)).toContain('<option value="">choose</option>');
    expect(item(lesion.id)).toContain('R-164');
    expect(page).not.toContain('<option value="R-101"');
    // R-164 asks for new lesions alone.
    expect(page).not.toContain(`/owed/${active.id}/follow-up`);
    const answer = await post(`/owed/${lesion.id}/follow-up`, { version: '1', request: 'R-101' });
    expect(answer.status).toBe(422);
    expect((await site.store.owed.get(lesion.id))?.followUpRequestId).toBeNull();
    const right = await post(`/owed/${lesion.id}/follow-up`, { version: '1', request: 'R-164' });
    expect(right.status).toBe(303);
  });
});
