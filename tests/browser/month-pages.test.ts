import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { made, openMonth, type MonthSite } from '../web/month-site.js';
import { browserPath, openBrowser, openPage } from './harness.js';
import { follow, typeOver } from './keyboard.js';

describe.skipIf(browserPath === undefined)("the month's pages in a browser", () => {
  let site: MonthSite;
  let browser: Browser;
  beforeAll(async () => {
    [site, browser] = await Promise.all([openMonth(), openBrowser()]);
  });
  afterAll(async () => {
    await browser?.close();
    await site?.close();
  });

  it('a server that went away is told of on the page, and what to do when it is back', async () => {
    const other = await openMonth();
    const run = await other.compared([await made(other, { name: 'Cut off', months: '500' })]);
    const page = await openPage(browser);
    await page.goto(other.url + run);
    await page.getByRole('progressbar', { name: 'Done so far' }).waitFor();
    const port = Number(new URL(other.url).port);
    await other.close();
    await page.getByText('The server does not answer; it is asked again.').waitFor();
    const anew = await openMonth({ port });
    await page.getByText('compare the scenarios again').waitFor();
    await anew.close();
    await page.context().close();
  });

  it('prints findings, charts and table in black and white, without what only a screen needs', async () => {
    const run = await site.compared(['S-1', 'S-3']);
    await site.until(run, (p) => p.state === 'done');
    for (const colorScheme of ['light', 'dark'] as const) {
      const page = await openPage(browser, { colorScheme });
      await page.goto(site.url + run);
      await page.emulateMedia({ media: 'print' });
      for (const gone of ['.top nav', 'a[download]', 'text=Back to the scenarios'])
        expect(await page.locator(gone).first().isVisible()).toBe(false);
      const coloured = await page.evaluate(() => {
        const grey = (colour: string) => {
          const [r, g, b] = (/rgba?\((\d+), (\d+), (\d+)/.exec(colour) ?? []).slice(1);
          return r === g && g === b;
        };
        return [...document.querySelectorAll('main, main *')].flatMap((element) => {
          const { color, borderLeftColor, borderLeftWidth, backgroundColor, stroke } =
            getComputedStyle(element);
          const used = [
            color,
            backgroundColor,
            ...(borderLeftWidth === '0px' ? [] : [borderLeftColor]),
            ...(stroke === 'none' ? [] : [stroke]),
          ];
          return used.every(grey)
            ? []
            : [`${element.tagName} ${element.className.toString()} ${used.join(' ')}`];
        });
      });
      expect(coloured).toEqual([]);
      const ink = await page
        .locator('.chart')
        .first()
        .evaluate((e) => getComputedStyle(e).color);
      expect(ink).toBe('rgb(0, 0, 0)');
      const pdf = await page.pdf({ format: 'A4' });
      const pages = pdf.toString('latin1').match(/\/Type\s*\/Page[^s]/g)?.length ?? 0;
      expect(pages).toBeLessThanOrEqual(4);
      // A4 between its margins, at 96 dots an inch.
      await page.setViewportSize({ width: 700, height: 1000 });
      const wider = await page.evaluate(() => document.documentElement.scrollWidth - innerWidth);
      expect(wider).toBeLessThanOrEqual(1);
      await page.context().close();
    }
  });

  it('works without client script: the page looks again by itself', async () => {
    const page = await openPage(browser, { javaScriptEnabled: false });
    const run = await site.compared([await made(site, { name: 'No script', months: '4' })]);
    await page.goto(site.url + run);
    await page.getByRole('heading', { name: 'All figures' }).waitFor();
    await page.context().close();
  });

  it('slot advice by keyboard: a row is chosen and drawn', async () => {
    const page = await openPage(browser);
    await page.goto(`${site.url}/month/slots`);
    await typeOver(page, 'Wished chance to end in time', '95');
    await page.keyboard.press('Enter');
    await page.getByRole('heading', { name: 'All exams and groups' }).waitFor();
    expect(await page.getByRole('columnheader', { name: 'Slot for 95 %, min' }).count()).toBe(1);
    await follow(page, 'Knee', /exam=knee/);
    expect(await page.locator('tr[aria-current="true"]').textContent()).toContain('Knee');
    expect(await page.locator('.chart-grid svg').count()).toBe(2);
    expect(page.faults).toEqual([]);
    await page.context().close();
  });
});
