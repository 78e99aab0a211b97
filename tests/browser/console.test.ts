import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { browserPath, openBrowser, openPage, openSite, type Site } from './harness.js';

// The technologist's stories are the issue's own: a restless child, then the same through a dead server and a cut network.
describe.skipIf(browserPath === undefined)('at the scanner', () => {
  const file = join(mkdtempSync(join(tmpdir(), 'stillspan-console-')), 'store.sqlite');
  let site: Site;
  let browser: Browser;
  beforeAll(async () => {
    [site, browser] = await Promise.all([openSite({ file }), openBrowser()]);
  });
  afterAll(async () => {
    await browser?.close();
    await site?.close();
  });

  const tablet = { viewport: { width: 1024, height: 768 }, hasTouch: true };
  const tap = (page: Page, name: string | RegExp) =>
    page
      .getByRole('button', { name, exact: typeof name === 'string' })
      .first()
      .tap();

  it('a child moves twice: full quality is given up, the ventricles come out targeted, the rest is owed', async () => {
    const page = await openPage(browser, tablet);
    await page.goto(`${site.url}/console/R-160`);
    expect((await page.content()).includes('not there any more')).toBe(true);
    // A waiting request has no console; a booked one has.
    const booked = (await site.store.bookings.ofRequest('R-102'))!;
    await page.goto(`${site.url}/console/${booked.id}`);
    await tap(page, 'Still 60 s');
    await page.getByText('still for 60 s').waitFor();
    await tap(page, 'Start');
    await page.getByRole('heading', { name: /^Running/ }).waitFor();
    await tap(page, 'Moved');
    await page.getByRole('heading', { name: /^Next/ }).waitFor();
    await tap(page, 'Start');
    await page.getByRole('heading', { name: /^Running/ }).waitFor();
    await tap(page, 'Moved');
    await page.getByRole('heading', { name: /^Next: .*single-shot/ }).waitFor();
    await page
      .getByText(
        /If it stops now\. .*Ventricular size.*: now not answered; going on could make it targeted/,
      )
      .waitFor();
    for (let n = 0; n < 2; n++) {
      await tap(page, 'Start');
      await page.getByRole('heading', { name: /^Running: .*single-shot/ }).waitFor();
      await tap(page, 'Clean');
      await page.getByRole('heading', { name: /^(Next|Nothing more)/ }).waitFor();
    }
    await page
      .getByText(/Before the patient leaves: Ventricular size: targeted: this question only/)
      .waitFor();
    await tap(page, 'End the exam');
    await page.getByRole('heading', { name: 'Hand over' }).waitFor();
    await tap(page, 'Record and hand over');
    const item = page.locator('.owed-item', { hasText: 'R-102' });
    await item.waitFor();
    expect(await item.textContent()).toContain('this question only, not diagnostic');
    expect(page.faults.filter((f) => !f.includes('422'))).toEqual([]);
    await page.context().close();
  });

  it('a mis-tap is taken back with one tap', async () => {
    const page = await openPage(browser, tablet);
    const booked = (await site.store.bookings.ofRequest('R-107'))!;
    await page.goto(`${site.url}/console/${booked.id}`);
    await tap(page, 'Start');
    await page.getByRole('heading', { name: /^Running/ }).waitFor();
    await tap(page, 'Moved');
    await page.getByRole('heading', { name: /^Next/ }).waitFor();
    await tap(page, /^Take back: moved/);
    await page.getByRole('heading', { name: /^Running/ }).waitFor();
    await page.context().close();
  });

  it('keeps a tap through a server killed half-way and a reload, once', async () => {
    const page = await openPage(browser, tablet);
    const booked = (await site.store.bookings.ofRequest('R-109'))!;
    await page.goto(`${site.url}/console/${booked.id}`);
    // The server goes away half-way through a sequence and comes back on the same file.
    await tap(page, 'Start');
    await page.getByRole('heading', { name: /^Running/ }).waitFor();
    const port = Number(new URL(site.url).port);
    await site.close();
    await tap(page, 'Clean');
    await page.getByText(/1 tap\(s\) kept here/).waitFor();
    site = await openSite({ file, seed: false, port });
    await page.getByRole('heading', { name: /^Next/ }).waitFor();
    await page.reload();
    await page.getByRole('heading', { name: /^Next/ }).waitFor();

    const kinds = (await site.store.consoleLog.list(booked.id)).map((e) => e.kind);
    expect(kinds).toEqual(['started', 'clean']);
    await page.context().close();
  });

  it('keeps taps through half a minute without a network, shows them as waiting, sends them in order and once', async () => {
    const cutMs = 30_000;
    const page = await openPage(browser, tablet);
    const booked = (await site.store.bookings.ofRequest('R-111'))!;
    await page.goto(`${site.url}/console/${booked.id}`);
    await tap(page, 'Start');
    await page.getByRole('heading', { name: /^Running/ }).waitFor();

    const beganMs = performance.now();
    await page.context().setOffline(true);
    await tap(page, 'Clean');
    await page.getByText(/1 tap\(s\) kept here/).waitFor();
    await page.waitForTimeout(10_000);
    await tap(page, 'Breath 6 s');
    await page.getByText(/2 tap\(s\) kept here/).waitFor();
    await page.waitForTimeout(10_000);
    await tap(page, 'Still 20 s');
    await page.getByText(/3 tap\(s\) kept here/).waitFor();
    await page.waitForTimeout(cutMs - (performance.now() - beganMs));
    expect(performance.now() - beganMs).toBeGreaterThanOrEqual(cutMs - 1);
    expect((await site.store.consoleLog.list(booked.id)).map((e) => e.kind)).toEqual(['started']);
    await page.getByText(/3 tap\(s\) kept here/).waitFor();

    // Back again, but the first answer is lost on its way: what was received is sent once more.
    let lost = 0;
    await page.route('**/taps', async (route) => {
      if (lost++ > 0) return route.continue();
      await route.fetch();
      return route.abort();
    });
    await page.context().setOffline(false);
    await page.getByRole('heading', { name: /^Next/ }).waitFor();
    await page.getByText('still for 20 s, breath for 6 s').waitFor();
    expect(await page.locator('#sending').textContent()).toBe('');
    expect(lost).toBeGreaterThanOrEqual(2);

    const events = await site.store.consoleLog.list(booked.id);
    expect(events.map((e) => e.kind)).toEqual(['started', 'clean', 'statement', 'statement']);
    // Each at the time it was tapped, not at the time it came through.
    const [, clean, breath, still] = events.map((e) => e.atS);
    expect(breath! - clean!).toBeGreaterThan(9);
    expect(still! - breath!).toBeGreaterThan(9);
    await page.context().close();
  });

  // Target size: 44 CSS px, WCAG 2.2 success criterion 2.5.5 (enhanced).
  it('is worked through by touch alone on a dark tablet, every target 44 px high or more', async () => {
    const page = await openPage(browser, { ...tablet, colorScheme: 'dark' });
    const booked = (await site.store.bookings.ofRequest('R-101'))!;
    let smallestPx = Infinity;
    const touch = async (name: string | RegExp) => {
      const target = page.getByRole('button', { name, exact: typeof name === 'string' }).first();
      const box = (await target.boundingBox())!;
      smallestPx = Math.min(smallestPx, box.height);
      expect({ name: String(name), px: box.height >= 44 }).toEqual({
        name: String(name),
        px: true,
      });
      await target.tap();
    };
    const shows = (name: RegExp) => page.getByRole('heading', { name }).waitFor();
    await page.goto(`${site.url}/console/${booked.id}`);
    expect(await page.evaluate(() => matchMedia('(prefers-color-scheme: dark)').matches)).toBe(
      true,
    );
    await touch('Still 3 min');
    await page.getByText('still for 180 s').waitFor();
    await touch('Start');
    await shows(/^Running/);
    await touch('Moved');
    await shows(/^Next/);
    await touch(/^Take back: moved/);
    await shows(/^Running/);
    await touch('Clean');
    await shows(/^Next/);
    const later = await page.locator('.later li').count();
    await touch('First');
    await page.getByRole('button', { name: /^Take back: put first/ }).waitFor();
    await touch('Drop');
    await page.getByRole('button', { name: /^Take back: dropped/ }).waitFor();
    expect(await page.locator('.later li').count()).toBeLessThanOrEqual(later);
    await touch('Start');
    await shows(/^Running/);
    await touch('Broken off');
    await page.getByRole('button', { name: /^Take back: stopped/ }).waitFor();
    await touch('End the exam');
    await shows(/^Hand over/);
    await touch('Record and hand over');
    await page.waitForURL('**/owed**');
    expect(smallestPx).toBeGreaterThanOrEqual(44);
    expect(await site.store.bookings.get(booked.id)).toMatchObject({ status: 'fulfilled' });
    await page.context().close();
  });

  it('works without client script', async () => {
    const page = await openPage(browser, { ...tablet, javaScriptEnabled: false });
    const booked = (await site.store.bookings.ofRequest('R-118'))!;
    await page.goto(`${site.url}/console/${booked.id}`);
    await page.getByRole('button', { name: 'Start' }).first().click();
    expect(await page.getByRole('heading', { level: 2 }).first().textContent()).toContain(
      'Running',
    );
    await page.context().close();
  });
});
