import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openMonth, type MonthSite } from '../web/month-site.js';
import { browserPath, openBrowser, openPage } from './harness.js';

const axeSource = readFileSync(
  createRequire(import.meta.url).resolve('axe-core/axe.min.js'),
  'utf8',
);

interface Violation {
  readonly id: string;
  readonly impact: string | null;
  readonly nodes: readonly {
    readonly target: readonly string[];
    readonly failureSummary: string;
  }[];
}

/** Stands for the address of a comparison that has ended. */
const finishedRun = '/month/runs/finished';

const pages = [
  '/day/2026-12-08',
  '/day/2026-12-08?gap=mr2_965_1080',
  '/requests?status=all',
  '/requests/new',
  '/requests/new?exam=liver',
  '/requests/R-106',
  '/requests/R-106/edit',
  '/requests/R-157/places',
  '/owed',
  '/fill?propose=1',
  '/mend',
  '/mend?what=down&day=2026-12-08&today=2026-12-08&scanner=mr2&from=10:00&to=14:00&now=10:00&propose=1',
  '/month',
  '/month/new',
  '/month/scenarios/S-1',
  '/month/slots?chance=90&exam=knee',
  finishedRun,
  '/library',
  '/library/exams/brain-general',
  '/library/sequences/head-ax-t2-ss-half?field=3',
  '/learning',
  '/policy',
  '/methods',
  '/console/R-102.1',
  '/no-such-page',
];

// Rules: axe-core 4.14.1, WCAG 2.0 to 2.2, levels A and AA. Serious and critical findings fail.
describe.skipIf(browserPath === undefined)('every page, light and dark', () => {
  let site: MonthSite;
  let run: string;
  let browser: Browser;
  beforeAll(async () => {
    [site, browser] = await Promise.all([openMonth(), openBrowser()]);
    run = await site.compared(['S-1', 'S-3', 'S-4']);
    await site.until(run, (p) => p.state === 'done');
  });
  afterAll(async () => {
    await browser?.close();
    await site?.close();
  });

  const address = (path: string) => site.url + (path === finishedRun ? run : path);

  for (const path of pages) {
    it.each(['light', 'dark'] as const)(`${path}, %s`, async (colorScheme) => {
      const page = await openPage(browser, { colorScheme, bypassCSP: true });
      const answer = await page.goto(address(path));
      expect(answer?.status()).toBe(path === '/no-such-page' ? 404 : 200);
      await page.evaluate(axeSource);
      const violations = await page.evaluate(async () => {
        const axe = (
          window as unknown as {
            axe: { run: (d: Document, o: object) => Promise<{ violations: Violation[] }> };
          }
        ).axe;
        return (
          await axe.run(document, {
            runOnly: ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'],
          })
        ).violations;
      });
      const grave = violations
        .filter((v) => v.impact === 'serious' || v.impact === 'critical')
        .map((v) => `${v.id}: ${v.nodes[0]?.target.join(' ')} ${v.nodes[0]?.failureSummary}`);
      expect(grave).toEqual([]);
      await page.context().close();
    });
  }

  it('nothing is cut off sideways at phone width', async () => {
    const page = await openPage(browser, { viewport: { width: 390, height: 800 } });
    for (const path of pages) {
      await page.goto(address(path));
      const wider = await page.evaluate(
        () => document.documentElement.scrollWidth - window.innerWidth,
      );
      expect(wider, path).toBeLessThanOrEqual(1);
    }
    await page.context().close();
  });
});
