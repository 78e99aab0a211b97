import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openSite, type Site } from '../browser/harness.js';
import { requestFor } from '../planning/ground.js';

// Holds for any right booking desk: the numbers are the issue's own.
describe('the application under simultaneous demand', () => {
  let site: Site;
  beforeAll(async () => {
    site = await openSite({ seed: false });
  });
  afterAll(() => site.close());

  const post = (path: string, form: Record<string, string>, headers: Record<string, string> = {}) =>
    fetch(site.url + path, {
      method: 'POST',
      body: new URLSearchParams(form),
      redirect: 'manual',
      headers,
    });

  it('fifty attempts on one gap: one wins, 49 are told who has it, the board holds one', async () => {
    const ids = Array.from({ length: 50 }, (_, n) => `Q-${n}`);
    for (const id of ids)
      await site.store.requests.add(requestFor('knee', { id, slotS: 1800 }), 'test', 0);
    const answers = await Promise.all(
      ids.map((request) =>
        post('/day/2026-12-10/place', { request, scanner: 'mr1', start: '09:00' }),
      ),
    );
    expect(answers.filter((a) => a.status === 303)).toHaveLength(1);
    const told = await Promise.all(answers.filter((a) => a.status === 409).map((a) => a.text()));
    expect(told).toHaveLength(49);
    const held = await site.store.bookings.listDay('2026-12-10');
    expect(held).toHaveLength(1);
    for (const page of told) expect(page).toContain(`by ${held[0]!.requestId}`);
  });

  it("refuses a change that another site sends in a reader's name", async () => {
    const foreign = await post('/undo', {}, { 'sec-fetch-site': 'cross-site' });
    expect(foreign.status).toBe(403);
    expect((await post('/undo', {}, { origin: 'https://elsewhere.example' })).status).toBe(403);
  });

  it('never sends a reader to another site', async () => {
    for (const back of [
      'https://elsewhere.example/',
      '//elsewhere.example',
      '/\\elsewhere.example',
      'javascript:alert(1)',
    ]) {
      const answer = await post('/who', { who: 'A', back });
      expect(answer.headers.get('location')).toBe('/');
    }
  });

  it('takes no words from an address, and knows which days there are', async () => {
    const page = await (await fetch(`${site.url}/day/2026-12-10?told=All+scanners+closed`)).text();
    expect(page).not.toContain('All scanners closed');
    expect((await fetch(`${site.url}/day/2026-02-30`)).status).toBe(422);
    expect(
      (await post('/day/2026-02-30/place', { request: 'Q-3', scanner: 'mr1', start: '10:00' }))
        .status,
    ).toBe(422);
  });

  it('shows what was typed as text, never as markup', async () => {
    const note = '<script>alert(1)</script>"\'';
    await site.store.requests.add(requestFor('knee', { id: 'X-1', note }), 'test', 0);
    const page = await (await fetch(`${site.url}/requests/X-1`)).text();
    expect(page).not.toContain('<script>alert');
    expect(page).toContain('&lt;script&gt;alert(1)');
  });

  it.each([
    ['/day/2026-12-10/place', { request: 'Q-3', scanner: 'mr1', start: '25:00' }, 422],
    ['/day/2026-12-10/place', { request: 'Q-3', scanner: 'mr1', start: '12:20' }, 422],
    ['/day/2026-12-10/place', { request: 'nobody', scanner: 'mr1', start: '10:00' }, 422],
    ['/bookings/none/move', { version: '1', start: '10:00' }, 422],
    ['/requests', { exam: 'liver' }, 422],
  ] as const)('%s with %j is a page that says why, status %d', async (path, form, status) => {
    const answer = await post(path, form);
    expect(answer.status).toBe(status);
    expect(await answer.text()).toContain('class="problems"');
  });

  it('keeps what was typed when the form is refused', async () => {
    const page = await (
      await post('/requests', {
        request_id: 'R-7',
        exam: 'knee',
        slot: 'soon',
        note: 'comes by bus',
      })
    ).text();
    expect(page).toContain('value="comes by bus"');
    expect(page).toContain('<strong>Slot:</strong>');
  });

  it('says no more than it must when something breaks inside', async () => {
    const answer = await fetch(`${site.url}/day/2026-12-10?gap=mr1_540_600&booking=%F0%9F`);
    expect(answer.status).toBeLessThan(500);
    const big = await post('/requests/look', { note: 'x'.repeat(100_000) });
    expect(big.status).toBe(413);
    expect(await big.text()).not.toContain('node_modules');
  });
});
