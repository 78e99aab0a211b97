import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { join } from 'node:path';
import { demoFolder } from '../../src/cli/files.js';
import { openRequests } from '../../src/cli/ground.js';
import { openSite, type Site } from '../browser/harness.js';

// Common practice, no source: a page whose script does not run still says what happened, and a slip of the finger is never the end.
describe('the console without its script', () => {
  let site: Site;
  beforeEach(async () => {
    site = await openSite({ seed: false });
    const { requests } = openRequests(join(demoFolder, 'requests.csv'));
    const { request, booking } = requests.find((r) => r.request.id === 'R-102')!;
    await site.store.seed(
      { requests: [request], bookings: [{ ...booking!, teams: [] }] },
      'first start',
      0,
    );
  });
  afterEach(() => site.close());

  const id = 'R-102.1';
  const look = async (path: string) => (await fetch(site.url + path)).text();
  const post = (path: string, fields: Record<string, string>) =>
    fetch(site.url + path, {
      method: 'POST',
      body: new URLSearchParams(fields),
      redirect: 'manual',
    });
  const tap = (fields: Record<string, string>) => post(`/console/${id}`, fields);

  /** Fields of the form with a button of these words, as a browser would send them. */
  function fieldsOf(page: string, words: RegExp): Record<string, string> {
    const form = [...page.matchAll(/<form[^>]*class="tap">(.*?)<\/form>/gs)]
      .map((m) => m[1]!)
      .find((inner) => words.test(/<button[^>]*>([^<]*)/.exec(inner)?.[1] ?? ''));
    expect(form, String(words)).toBeDefined();
    return Object.fromEntries(
      [...form!.matchAll(/name="([^"]+)" value="([^"]*)"/g)].map((m) => [m[1]!, m[2]!]),
    );
  }
  const tapOn = async (words: RegExp) => tap(fieldsOf(await look(`/console/${id}`), words));

  it('dates a failed hold by the time since the start, never as no breath at all', async () => {
    await tapOn(/^Start$/);
    await new Promise((resolve) => setTimeout(resolve, 1200));
    expect((await tapOn(/^Hold failed$/)).status).toBe(303);
    const [started, failed] = await site.store.consoleLog.list(id);
    expect(failed).toMatchObject({ kind: 'hold failed' });
    const afterS = failed?.kind === 'hold failed' ? failed.afterS : 0;
    expect(afterS).toBeGreaterThan(1);
    expect(afterS).toBeCloseTo(failed!.atS - started!.atS, 0);
  });

  it('an end that was tapped by mistake is taken back', async () => {
    await tapOn(/^Start$/);
    await tapOn(/^End the exam$/);
    expect(await look(`/console/${id}`)).toContain('Hand over');
    await tapOn(/^Take back: ended$/);
    const page = await look(`/console/${id}`);
    expect(page).not.toContain('Hand over');
    expect(page).toContain('End the exam');
  });

  it('offers for the record what the taps showed, not what was planned', async () => {
    const chosen = async () =>
      [...(await look(`/bookings/${id}/done`)).matchAll(/value="(\w+)" checked/g)].map((m) => m[1]);
    expect(await chosen()).toContain('targeted');
    await tapOn(/^Start$/);
    await tapOn(/^Moved$/);
    await tapOn(/^End the exam$/);
    expect(await chosen()).toEqual(['none']);
  });

  it('recorded twice is recorded once, and the second time says so', async () => {
    const page = await look(`/bookings/${id}/done`);
    const version = /name="version" value="(\d+)"/.exec(page)![1]!;
    const question = /name="(grade_[^"]+)"/.exec(page)![1]!;
    const record = () => post(`/bookings/${id}/done`, { version, [question]: 'targeted' });
    expect((await record()).status).toBe(303);
    const again = await record();
    expect(again.status).toBe(303);
    expect(decodeURIComponent(again.headers.get('set-cookie') ?? '')).toContain(
      'is recorded as done already',
    );
    expect(await site.store.owed.list()).toHaveLength(1);
  });

  it('a booking off the board takes no taps and says why', async () => {
    const { version } = (await site.store.bookings.get(id))!;
    await post(`/bookings/${id}/cancel`, { version: String(version) });
    const page = await look(`/console/${id}`);
    expect(page).toContain('taken off the board');
    expect(page).not.toContain('class="tap"');
  });
});
