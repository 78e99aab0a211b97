import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { browserPath, openBrowser, openPage, openSite, type Site } from './harness.js';

const day = '2026-12-08';
const asked = `/mend?what=down&day=${day}&today=${day}&scanner=mr2`;

// Scanner 2 fails at ten; what a scheduler does then, in a real browser. The stories are the issue's own.
describe.skipIf(browserPath === undefined)('mending a day at the desk', () => {
  let site: Site;
  let browser: Browser;
  beforeAll(async () => {
    [site, browser] = await Promise.all([openSite(), openBrowser()]);
  });
  afterAll(async () => {
    await browser?.close();
    await site?.close();
  });

  /** Tab until the focus stands on what is looked for. */
  async function tabTo(page: Page, found: (element: Element | null) => boolean) {
    for (let n = 0; n < 200; n++) {
      await page.keyboard.press('Tab');
      if (await page.evaluate(`(${found.toString()})(document.activeElement)`)) return;
    }
    throw new Error('the keyboard never got there');
  }
  async function typeInto(page: Page, field: string, text: string) {
    await page.locator(`input[name="${field}"]`).focus();
    await page.keyboard.press('Control+A');
    await page.keyboard.type(text);
  }
  const accepted = (page: Page) =>
    page
      .locator('input[name="move"]')
      .evaluateAll((fields) => fields.map((f) => (f as HTMLInputElement).value.split('|')));

  it('is asked, read and accepted by keyboard alone; the board shows it, and nobody on the way in has moved', async () => {
    const page = await openPage(browser);
    const before = await site.store.bookings.listDay(day);
    await page.goto(site.url + asked);
    await typeInto(page, 'from', '10:00');
    await typeInto(page, 'to', '14:00');
    await typeInto(page, 'now', '10:00');
    await typeInto(page, 'before', '11:00');
    await page.keyboard.press('Enter');
    await page.getByRole('heading', { name: 'Who moves' }).waitFor();
    await page.getByText('Nothing moves until you accept.').waitFor();
    expect(await site.store.bookings.listDay(day)).toEqual(before);
    const moves = await accepted(page);
    expect(moves.length).toBeGreaterThan(1);

    await tabTo(page, (e) => e?.textContent?.startsWith('Accept') === true);
    await page.keyboard.press('Enter');
    await page.getByRole('heading', { name: 'These people must be told' }).waitFor();
    for (const [id] of moves)
      await page.locator('.offers').first().getByText(id!.split('.')[0]!).first().waitFor();
    await tabTo(page, (e) => e?.textContent === 'See the day board');
    await page.keyboard.press('Enter');
    await page.waitForURL(`**/day/${day}`);
    for (const [id, , scanner, date] of moves)
      if (date === day)
        await page.locator(`.lane[data-scanner="${scanner}"] [data-booking="${id}"]`).waitFor();
    // Who starts before eleven stands where they stood, also those on the scanner that failed.
    const now = await site.store.bookings.listDay(day);
    for (const b of before.filter((b) => b.startMin < 660))
      expect(now.find((n) => n.id === b.id)).toEqual(b);
    expect(page.faults).toEqual([]);

    // One undo takes all of it back.
    await page.getByRole('button', { name: 'Undo my last change' }).click();
    await page.getByText(/^Undone/).waitFor();
    const place = (b: (typeof before)[number]) =>
      `${b.id} ${b.scannerId} ${b.startMin} ${b.slotMin}`;
    expect((await site.store.bookings.listDay(day)).map(place)).toEqual(before.map(place));
    await page.context().close();
  });

  it('is refused whole and explained when another desk took one of the places meanwhile', async () => {
    const [page, other] = await Promise.all([openPage(browser), openPage(browser)]);
    await page.goto(`${site.url}${asked}&from=10:00&to=14:00&now=10:00&before=11:00&propose=1`);
    const moves = await accepted(page);
    const [, , scanner, date, start] = moves.find((m) => m[2] === 'mr3')! as string[];
    await other.goto(`${site.url}/day/${date}?gap=${scanner}_${start}_${Number(start) + 120}`);
    const form = other.locator('.offers form').first();
    const winner = (await form.getByRole('button').textContent())!.replace('Place ', '').trim();
    await form.getByRole('button').click();
    await other.getByText(`${winner} is placed at`).waitFor();

    const before = await site.store.bookings.listBetween(day, '2026-12-31');
    await page.getByRole('button', { name: /^Accept/ }).click();
    const said = page.locator('.refused');
    await said.waitFor();
    expect(await said.textContent()).toContain('Nothing was changed.');
    expect(await said.textContent()).toContain(`by ${winner}`);
    expect(await site.store.bookings.listBetween(day, '2026-12-31')).toEqual(before);
    // The page goes on: a proposal for the day as it is now.
    await page.getByRole('heading', { name: 'Who moves' }).waitFor();
    for (const [, , , d, s] of await accepted(page))
      expect(`${d} ${s}`).not.toBe(`${date} ${start}`);
    await Promise.all([page.context().close(), other.context().close()]);
  });

  it('starts from a booking on the board, and works without client script', async () => {
    const page = await openPage(browser, { javaScriptEnabled: false });
    await page.goto(`${site.url}/day/${day}?booking=R-117.1`);
    await page.getByRole('link', { name: 'Something happened' }).click();
    await page.getByRole('link', { name: 'A patient did not come' }).click();
    expect(await page.getByLabel('Patient').inputValue()).toBe('R-117.1');
    await page.getByRole('button', { name: 'Propose what to do' }).click();
    await page.getByText('Nobody has to move.').waitFor();
    await page.getByRole('button', { name: 'Mark R-117 as not come' }).click();
    await page.getByText('Marked as not come').waitFor();
    expect(await site.store.bookings.get('R-117.1')).toMatchObject({ status: 'noshow' });
    await page.context().close();
  });
});
