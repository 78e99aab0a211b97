import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { browserPath, openBrowser, openPage, openSite, type Site } from './harness.js';

// Common practice, no source: what happens in the room does not wait for the network.
describe.skipIf(browserPath === undefined)('at the scanner without a network', () => {
  let site: Site;
  let browser: Browser;
  beforeAll(async () => {
    [site, browser] = await Promise.all([openSite(), openBrowser()]);
  });
  afterAll(async () => {
    await browser?.close();
    await site?.close();
  });

  const tablet = { viewport: { width: 1024, height: 768 }, hasTouch: true };
  const tap = (page: Page, name: string) =>
    page.getByRole('button', { name, exact: true }).first().tap();
  const openConsole = async (requestId: string) => {
    const booked = (await site.store.bookings.ofRequest(requestId))!;
    const page = await openPage(browser, tablet);
    await page.goto(`${site.url}/console/${booked.id}`);
    return { page, booked, kept: () => site.store.consoleLog.list(booked.id) };
  };

  it('a sequence started in the cut can be ended in it, each at its own time', async () => {
    const { page, kept } = await openConsole('R-101');
    await page.context().setOffline(true);
    await tap(page, 'Start');
    await page.getByText('Not sent yet; taps are kept here.').waitFor();
    await page.getByRole('heading', { name: /^Running: \w/ }).waitFor();
    await page.waitForTimeout(2000);
    await tap(page, 'Hold failed');
    await page.getByText('What comes next is worked out once they are through.').waitFor();
    await page.context().setOffline(false);
    await page.getByRole('heading', { name: /^Next/ }).waitFor();
    const [started, failed] = await kept();
    expect([started?.kind, failed?.kind]).toEqual(['started', 'hold failed']);
    expect(failed!.atS - started!.atS).toBeGreaterThan(1.9);
    expect(failed?.kind === 'hold failed' && failed.afterS).toBeGreaterThan(1.9);
    await page.context().close();
  });

  it('asks again after a pause, not at once, and a server that is too busy loses nothing', async () => {
    const { page, kept } = await openConsole('R-110');
    let asked = 0;
    await page.route('**/taps', (route) => {
      asked++;
      return route.fulfill({ status: 429, body: 'Too many requests' });
    });
    await tap(page, 'Start');
    await page.waitForTimeout(3400);
    expect(asked).toBeGreaterThanOrEqual(2);
    expect(asked).toBeLessThanOrEqual(4);
    await page.unroute('**/taps');
    await page.locator('#sending').filter({ hasText: /^$/ }).waitFor({ state: 'attached' });
    expect((await kept()).map((e) => e.kind)).toEqual(['started']);
    await page.context().close();
  });

  it('a tap that is refused for good is named', async () => {
    const { page, booked } = await openConsole('R-111');
    await site.store.bookings.cancel(booked.id, booked.version, 'another desk', Date.now());
    await tap(page, 'Start');
    await page
      .getByText('Not kept, because this exam takes no such tap any more: Start.')
      .waitFor();
    await page.getByText('This booking was taken off the board').waitFor();
    await page.context().close();
  });

  it('by keyboard, what comes next is where the reader already is', async () => {
    const { page } = await openConsole('R-112');
    await page.getByRole('button', { name: 'Start', exact: true }).focus();
    await page.keyboard.press('Enter');
    await page.getByRole('heading', { name: /^Running/ }).waitFor();
    expect(await page.evaluate(() => document.activeElement?.textContent)).toMatch(/^Running/);
    await page.keyboard.press('Tab');
    expect(await page.evaluate(() => document.activeElement?.textContent)).toBe('Clean');
    await page.context().close();
  });

  it('everything to tap is a fingertip wide and high', async () => {
    const { page } = await openConsole('R-113');
    await tap(page, 'Start');
    await page.getByRole('heading', { name: /^Running/ }).waitFor();
    const small = () =>
      page.locator('a:visible, button:visible, input:visible').evaluateAll((all) =>
        all
          .filter((one) => !one.classList.contains('skip'))
          .map((one) => ({ words: one.textContent, box: one.getBoundingClientRect() }))
          .filter(({ box }) => box.width < 44 || box.height < 44)
          .map(({ words }) => words),
      );
    expect(await small()).toEqual([]);
    await tap(page, 'End the exam');
    await page.getByRole('heading', { name: 'Hand over' }).waitFor();
    expect(await small()).toEqual([]);
    await page.context().close();
  });
});
