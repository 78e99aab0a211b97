import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { browserPath, openBrowser, openPage, openSite, type Site } from './harness.js';

const day = '2026-12-08';

// The issue's own rule: a grade below diagnostic never stands without its words.
describe.skipIf(browserPath === undefined)('low answers on the day board', () => {
  let site: Site;
  let browser: Browser;
  beforeAll(async () => {
    [site, browser] = await Promise.all([openSite(), openBrowser()]);
    const { id, version } = (await site.store.bookings.ofRequest('R-102'))!;
    await fetch(`${site.url}/bookings/${id}/move`, {
      method: 'POST',
      body: new URLSearchParams({ version: String(version), slot: '15' }),
    });
  });
  afterAll(async () => {
    await browser?.close();
    await site?.close();
  });

  it.each([1280, 1024, 961, 768, 390])(
    'keep their words inside a booking of 15 minutes, %s px wide',
    async (width) => {
      const page = await openPage(browser, { viewport: { width, height: 800 } });
      await page.goto(`${site.url}/day/${day}`);
      expect(await page.locator('.block.booking', { hasText: 'R-102' }).textContent()).toContain(
        'this question only',
      );
      const cut = await page.locator('.block .said').evaluateAll((all) =>
        all
          .map((one) => {
            const block = one.closest('.block')!.getBoundingClientRect();
            const words = one.getBoundingClientRect();
            const whole = words.bottom <= block.bottom + 0.5 && one.scrollWidth <= one.clientWidth;
            return whole
              ? ''
              : `${one.textContent} ${words.bottom - block.bottom} ${one.scrollWidth - one.clientWidth}`;
          })
          .filter((one) => one !== ''),
      );
      expect(cut).toEqual([]);
      await page.context().close();
    },
  );
});
