import { readFileSync } from 'node:fs';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { made, openMonth, type MonthSite } from '../web/month-site.js';
import { follow, tabTo, typeOver } from './keyboard.js';
import { browserPath, openBrowser, openPage } from './harness.js';

// The manager's story, by keyboard; common practice, no source.
describe.skipIf(browserPath === undefined)('a manager compares slot rules', () => {
  let site: MonthSite;
  let browser: Browser;
  beforeAll(async () => {
    [site, browser] = await Promise.all([openMonth(), openBrowser()]);
  });
  afterAll(async () => {
    await browser?.close();
    await site?.close();
  });

  const ticked = (page: Page) =>
    page
      .locator('input[name="scenario"]:checked')
      .evaluateAll((all) => all.map((one) => one.getAttribute('value')));

  it('from a copy to the table in a spreadsheet, without a mouse', async () => {
    const page = await openPage(browser, { acceptDownloads: true });
    await page.goto(`${site.url}/day/2026-12-08`);
    await follow(page, 'The month', '**/month');
    expect(await page.title()).toBe('The month - Stillspan');

    // A copy of the fixed slots, with another rule and one more request a day; hours mistyped once.
    await follow(page, 'Copy Fixed 30 minutes, full protocol', '**/month/new?from=S-1');
    await typeOver(page, 'Name', 'Forty-five minutes');
    await tabTo(page, 'The same for everybody');
    await page.keyboard.press('ArrowDown');
    await tabTo(page, 'otherwiseMin');
    await page.keyboard.type('45');
    await typeOver(page, 'hours mr1', '8 til late');
    await typeOver(page, 'New requests', '61');
    await page.keyboard.press('Enter');
    await page.getByText('"8 til late" does not fit: hours such as 08:00-18:00').waitFor();
    const hours = page.locator('[name="hours mr1"]');
    expect(await hours.getAttribute('aria-invalid')).toBe('true');
    const said = page.locator(`#${await hours.getAttribute('aria-describedby')}`);
    expect(await said.textContent()).toContain('several with commas');
    expect(await page.getByRole('alert').textContent()).toContain(
      'Hours of Scanner 1, ground floor',
    );
    // Nothing typed is lost.
    expect(await hours.inputValue()).toBe('8 til late');
    expect(await page.locator('[name="name"]').inputValue()).toBe('Forty-five minutes');
    expect(await page.locator('[name="requestsPerDay"]').inputValue()).toBe('61');
    expect(await page.locator('[name="otherwiseMin"]').inputValue()).toBe('45');
    await typeOver(page, 'hours mr1', '08:00-16:00, 17:00-20:00');
    await Promise.all([page.waitForURL('**/month'), page.keyboard.press('Enter')]);
    await page.getByText('"Forty-five minutes" is saved.').waitFor();
    expect((await site.store.scenarios.get('S-6'))?.scenario).toMatchObject({
      ...{ name: 'Forty-five minutes', requestsPerDay: 61 },
      slots: { kind: 'by exam', minutes: {}, otherwise: 45 },
    });

    // Three of six, by the space bar.
    for (const name of [
      'Fixed 30 minutes, planned for the patient',
      'Slots by tolerance, quick looks allowed',
      'Slots by tolerance, quick looks, grouped by coil',
    ]) {
      await tabTo(page, `Compare ${name}`);
      await page.keyboard.press('Space');
    }
    expect(await ticked(page)).toEqual(['S-1', 'S-3', 'S-6']);
    await follow(page, 'Compare the ticked ones', '**/month/runs/*');
    const bar = page.getByRole('progressbar', { name: 'Done so far' });
    await bar.waitFor();
    await page.getByText(/^month \d+ of 60$/).waitFor();
    expect(Number(await bar.getAttribute('value'))).toBeGreaterThan(0);

    // Ends by itself; the page opens the result.
    await page.getByRole('heading', { name: 'All figures' }).waitFor();
    const section = page.locator('section', {
      has: page.getByRole('heading', { name: /^Slots by tolerance/ }),
    });
    expect(await section.locator('.finding-better').first().textContent()).toMatch(
      /^Better: \d+\.\d \(\d+\.\d to \d+\.\d\) more questions a day are answered diagnostically: \d+\.\d instead of \d+\.\d\.$/,
    );
    expect(await section.locator('.finding-worse').count()).toBeGreaterThan(0);
    expect(await page.getByText('They are not asked for the same number of exams').count()).toBe(1);
    expect(await page.locator('.chart-grid svg').count()).toBe(6);

    await tabTo(page, 'The table as CSV');
    const [download] = await Promise.all([
      page.waitForEvent('download'),
      page.keyboard.press('Enter'),
    ]);
    expect(download.suggestedFilename()).toBe('scenarios.csv');
    const csv = readFileSync(await download.path(), 'utf8')
      .split('\r\n')
      .map(cells);
    const names = (await page.locator('table.figures thead th').allTextContents()).slice(2);
    expect(names).toEqual([
      'Fixed 30 minutes, full protocol',
      'Slots by tolerance',
      'Forty-five minutes',
    ]);
    const rows = await page.locator('table.figures tbody tr').all();
    expect(csv).toHaveLength(1 + names.length * rows.length);
    for (const row of rows) {
      const measure = await row.locator('th').textContent();
      const printed = (await row.locator('td').allTextContents()).slice(1);
      names.forEach((name, n) => {
        const line = csv.find((c) => c[0] === name && c[1] === measure);
        const [mean, low, high, ...difference] = numbersIn(printed[n]!);
        const digits = /\.(\d+)/.exec(printed[n]!)?.[1]?.length ?? 0;
        const near = (value: number | undefined, cell: string | undefined) =>
          expect(Math.abs(value! - Number(cell)), `${name}, ${measure}`).toBeLessThanOrEqual(
            0.5001 * 10 ** -digits,
          );
        near(mean, line?.[4]);
        near(low, line?.[5]);
        near(high, line?.[6]);
        expect(difference.length).toBe(n === 0 ? 0 : 3);
        difference.forEach((value, d) => near(value, line?.[7 + d]));
      });
    }
    // The form that came back was a refusal, and the browser says so; nothing else went wrong.
    expect(page.faults.filter((fault) => !fault.includes('422'))).toEqual([]);
    await page.context().close();
  });

  it('stops a long one, sees what is done, and runs it again to the end', async () => {
    await made(site, { name: 'Long A', months: '150' });
    await made(site, { name: 'Long B', months: '150', bufferMin: '5' });
    const page = await openPage(browser);
    await page.goto(`${site.url}/month`);
    for (const id of (await ticked(page)) as string[])
      await page.locator(`input[name="scenario"][value="${id}"]`).uncheck();
    await page.getByRole('checkbox', { name: 'Compare Long A' }).check();
    await page.getByRole('checkbox', { name: 'Compare Long B' }).check();
    await page.getByRole('radio', { name: 'Hold the others against Long A' }).check();
    await follow(page, 'Compare the ticked ones', '**/month/runs/*');
    await page.getByText(/^month ([5-9]|\d{2,}) of 300$/).waitFor();
    await tabTo(page, 'Stop and show what is done');
    await page.keyboard.press('Enter');
    await page
      .getByText('Stopped early: what follows rests on the months that were done.')
      .waitFor();
    const daysWords = page.getByText(/^[\d,]+ working days were simulated for each scenario\./);
    const days = async () =>
      Number(/^[\d,]+/.exec((await daysWords.textContent())!)![0].replace(',', ''));
    const early = await days();
    expect(early).toBeGreaterThan(0);
    expect(early).toBeLessThan(3000);
    expect(await page.locator('.chart-grid svg').count()).toBe(6);

    await tabTo(page, 'Run it again to the end');
    await page.keyboard.press('Enter');
    await page.getByRole('progressbar', { name: 'Done so far' }).waitFor();
    await page.getByRole('heading', { name: 'All figures' }).waitFor();
    expect(await days()).toBe(3000);
    expect(await page.getByText('Stopped early').count()).toBe(0);
    expect(await page.locator('.finding-better, .finding-worse').count()).toBeGreaterThan(1);
    expect(page.faults).toEqual([]);
    await page.context().close();
  });
});

/** A line of CSV whose words stand in quotes. */
const cells = (line: string): string[] =>
  [...line.matchAll(/"((?:[^"]|"")*)"|([^,]+)|(?<=,)(?=,|$)/g)].map((m) =>
    (m[1] ?? m[2] ?? '').replaceAll('""', '"'),
  );

const numbersIn = (text: string): number[] => (text.match(/[+-]?\d+(\.\d+)?/g) ?? []).map(Number);
