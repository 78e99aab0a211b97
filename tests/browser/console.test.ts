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

  it('keeps taps through a cut network, a reload and a restarted server, in order and once', async () => {
    const page = await openPage(browser, tablet);
    const booked = (await site.store.bookings.ofRequest('R-109'))!;
    await page.goto(`${site.url}/console/${booked.id}`);
    await tap(page, 'Start');
    await page.getByRole('heading', { name: /^Running/ }).waitFor();

    await page.context().setOffline(true);
    await tap(page, 'Clean');
    await page.getByText(/1 tap\(s\) kept here/).waitFor();
    await tap(page, 'Breath 6 s');
    await page.getByText(/2 tap\(s\) kept here/).waitFor();
    await page.context().setOffline(false);
    await page.getByRole('heading', { name: /^Next/ }).waitFor();
    await page.getByText('breath for 6 s').waitFor();

    // The server goes away half-way through the next one and comes back on the same file.
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
    expect(kinds).toEqual(['started', 'clean', 'statement', 'started', 'clean']);
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
