import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { browserPath, openBrowser, openPage, openSite, type Site } from './harness.js';

// A scheduler lets the machine look for places; the stories are the desk's own.
describe.skipIf(browserPath === undefined)('filling the days', () => {
  let site: Site;
  let browser: Browser;
  beforeAll(async () => {
    [site, browser] = await Promise.all([openSite(), openBrowser()]);
  });
  afterAll(async () => {
    await browser?.close();
    await site?.close();
  });

  const search = async (page: Page, length: RegExp) => {
    await page.goto(`${site.url}/fill`);
    const words = await page.getByLabel('Search').locator('option').allTextContents();
    await page.getByLabel('Search').selectOption(words.find((w) => length.test(w))!);
    await page.getByRole('button', { name: /^Propose places/ }).click();
    await page.waitForURL('**/fill/searches/*');
  };
  const booked = async () =>
    (await site.store.bookings.listBetween('2000-01-01', '2100-01-01')).length;

  it('shows how far it is and what it has, and books nothing by itself', async () => {
    const page = await openPage(browser);
    const before = await booked();
    await search(page, /3 seconds/);
    await page.getByRole('progressbar', { name: 'Done so far' }).waitFor();
    await page.getByRole('button', { name: 'Place the ticked ones' }).waitFor();
    await page.getByText(/\d+ of 9 can be placed/).waitFor();
    expect(await page.getByText('stopped early').count()).toBe(0);
    expect(await booked()).toBe(before);
    expect(page.faults).toEqual([]);
    await page.context().close();
  });

  it('ends one search when the same desk begins another, and turns a fourth desk away in words', async () => {
    const desks: Page[] = [];
    for (let n = 0; n < 4; n++) desks.push(await openPage(browser));
    const [first, , , fourth] = desks;
    for (const desk of desks.slice(0, 3)) {
      await search(desk, /long/);
      await desk.getByRole('heading', { name: 'Searching' }).waitFor();
    }
    await fourth!.goto(`${site.url}/fill`);
    await fourth!.getByRole('button', { name: /^Propose places/ }).click();
    await fourth!.getByText(/3 other desks are searching.*at most 3 at once/).waitFor();

    // The same desk in a second window: its first search gives way.
    const second = await first!.context().newPage();
    await search(second, /long/);
    await first!.getByText('stopped early').waitFor();
    await second.getByRole('heading', { name: 'Searching' }).waitFor();
    await second.getByRole('button', { name: /^Stop/ }).click();
    await Promise.all(
      desks.slice(1, 3).map(async (desk) => {
        await desk.getByRole('button', { name: /^Stop/ }).click();
        await desk.getByText('stopped early').waitFor();
      }),
    );
    for (const desk of desks) await desk.context().close();
  });

  it('serves others while it searches, stops when told, and books just the ticked ones', async () => {
    const page = await openPage(browser);
    await search(page, /long/);
    await page.getByRole('heading', { name: 'Searching' }).waitFor();
    await page.getByText(/Diagnostic answers, .*: \d+ of at most \d+/).waitFor();
    const beganMs = performance.now();
    expect((await fetch(`${site.url}/day/2026-12-08`)).status).toBe(200);
    expect(performance.now() - beganMs).toBeLessThan(2000);

    const bar = page.getByRole('progressbar', { name: 'Done so far' });
    const share = async () => Number(await bar.getAttribute('value'));
    const early = await share();
    await page.waitForFunction(
      (was) => (document.querySelector('progress')?.value ?? 0) > was + 2,
      early,
    );
    await page.getByRole('button', { name: /^Stop/ }).click();
    await page.getByText(/stopped early: this is the best it had found/).waitFor();

    const boxes = page.getByRole('checkbox');
    const count = await boxes.count();
    expect(count).toBeGreaterThan(3);
    const before = await booked();
    const kept: string[][] = [];
    for (let n = 0; n < count; n++) {
      if (n === 1 || n === 3) kept.push((await boxes.nth(n).getAttribute('value'))!.split('|'));
      else await boxes.nth(n).uncheck();
    }
    await page.getByRole('button', { name: 'Place the ticked ones' }).click();
    await page.getByText('2 of 2 placed.').waitFor();
    expect(await booked()).toBe(before + 2);
    for (const [requestId, scannerId, date, start, slot] of kept)
      expect(await site.store.bookings.ofRequest(requestId!)).toMatchObject({
        ...{ scannerId, date, startMin: Number(start), slotMin: Number(slot) },
      });
    expect(page.faults).toEqual([]);
    await page.context().close();
  });

  it('proposes in one go without client script', async () => {
    const page = await openPage(browser, { javaScriptEnabled: false });
    await page.goto(`${site.url}/fill`);
    expect(await page.locator('select[name="seconds"]').isVisible()).toBe(false);
    await page.getByRole('button', { name: /^Propose places/ }).click();
    expect(await page.getByRole('checkbox').count()).toBeGreaterThan(2);
    await page.context().close();
  });
});
