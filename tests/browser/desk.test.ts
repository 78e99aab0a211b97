import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { browserPath, openBrowser, openPage, openSite, type Site } from './harness.js';

const day = '2026-12-08';

// What a scheduler does, in a real browser over the whole application; the stories are the issue's own.
describe.skipIf(browserPath === undefined)('the booking desk', () => {
  let site: Site;
  let browser: Browser;
  beforeAll(async () => {
    [site, browser] = await Promise.all([openSite(), openBrowser()]);
  });
  afterAll(async () => {
    await browser?.close();
    await site?.close();
  });

  it('takes a phone request to a booked slot', async () => {
    const page = await openPage(browser);
    await page.goto(`${site.url}/requests/new`);
    await page.getByLabel('Request number').fill('R-900');
    await page.locator('select[name="exam"]').selectOption('brain-general');
    await page.getByText('Is there a fresh stroke?').waitFor();
    await page.getByLabel(/Is there a fresh stroke/).check();
    await page
      .getByRole('group', { name: /lie flat and still/ })
      .getByLabel('10 min')
      .check();
    await page.locator('#plan-here strong', { hasText: 'Acute infarct' }).waitFor();
    await page.getByRole('group', { name: 'Slot' }).getByLabel('20 min').check();
    await page.getByRole('button', { name: 'Save the request' }).click();
    await page.waitForURL('**/requests/R-900');
    expect(await page.getByRole('heading', { level: 1 }).textContent()).toContain('R-900');

    await page.goto(`${site.url}/day/${day}`);
    await page.locator('.lane[data-scanner="mr2"] .gap a').last().click();
    await page.getByRole('button', { name: 'Place R-900' }).click();
    await page.getByText(/R-900 is placed at/).waitFor();
    const booking = await site.store.bookings.ofRequest('R-900');
    expect(booking).toMatchObject({ scannerId: 'mr2', date: day, slotMin: 20 });
    expect(page.faults).toEqual([]);
    await page.context().close();
  });

  it('changes the plan when the patient says 6 seconds instead of 20, with no reload and no lost input', async () => {
    const page = await openPage(browser);
    await page.goto(`${site.url}/requests/new?exam=liver`);
    await page.getByLabel('Note, without a name').fill('asked twice');
    const hold = page.getByRole('group', { name: /hold your breath/ });
    await hold.getByLabel('20 s', { exact: true }).check();
    await page
      .getByRole('group', { name: /follow instructions/ })
      .getByLabel('yes')
      .check();
    await page.locator('#plan-here').getByText('holds the breath 20 s').waitFor();
    await page.evaluate(() => Object.assign(window, { stillHere: true }));
    const before = await page.locator('#plan-here .order').textContent();
    await hold.getByLabel('6 s', { exact: true }).check();
    await page.locator('#plan-here').getByText('holds the breath 6 s').waitFor();
    const after = await page.locator('#plan-here .order').textContent();
    expect(after).not.toBe(before);
    expect(
      await page.evaluate(() => (window as unknown as { stillHere?: boolean }).stillHere),
    ).toBe(true);
    expect(await page.getByLabel('Note, without a name').inputValue()).toBe('asked twice');
    expect(page.faults).toEqual([]);
    await page.context().close();
  });

  it('gives a gap wanted by two schedulers at once to exactly one, and tells the other who has it', async () => {
    const gap = `${site.url}/day/${day}?gap=mr3_690_720`;
    const pages = await Promise.all([openPage(browser), openPage(browser)]);
    await Promise.all(pages.map((p) => p.goto(gap)));
    const wanted = ['R-157', 'R-158'] as const;
    await Promise.all(
      pages.map(async (p, n) => {
        const form = p.locator('.offers > li', { hasText: wanted[n]! }).locator('form');
        await form.getByLabel('Start').fill('11:30');
        await form.getByRole('button').click();
        await p.waitForLoadState();
      }),
    );
    const texts = await Promise.all(pages.map((p) => p.locator('#live').textContent()));
    expect(texts.filter((t) => t?.includes('is placed at'))).toHaveLength(1);
    expect(texts.filter((t) => t?.includes('is taken from 11:30'))).toHaveLength(1);
    const held = (await site.store.bookings.listDay(day)).filter(
      (b) => b.scannerId === 'mr3' && b.startMin === 690,
    );
    expect(held).toHaveLength(1);
    await Promise.all(pages.map((p) => p.context().close()));
  });

  it('finds the best places for a request, and places it with one button', async () => {
    const page = await openPage(browser);
    await page.goto(`${site.url}/requests/R-165`);
    await page.getByRole('link', { name: 'Find a place' }).click();
    const offers = page.locator('.offers > li');
    expect(await offers.count()).toBeLessThanOrEqual(10);
    const promised = (await offers.first().locator('strong').first().textContent()) ?? '';
    await offers.first().getByRole('button', { name: 'Place it here' }).click();
    await page.getByText(/R-165 is placed at/).waitFor();
    const booking = (await site.store.bookings.ofRequest('R-165'))!;
    const at = `${booking.date} ${String(Math.floor(booking.startMin / 60)).padStart(2, '0')}:${String(booking.startMin % 60).padStart(2, '0')}`;
    expect(at).toBe(promised.trim());
    await page.context().close();
  });

  it('proposes places for everybody who waits, and places the ticked ones only', async () => {
    const page = await openPage(browser);
    await page.goto(`${site.url}/fill?propose=1`);
    const boxes = page.locator('input[name="place"]');
    const count = await boxes.count();
    expect(count).toBeGreaterThan(2);
    const left = (await boxes.first().getAttribute('value'))!.split('|')[0]!;
    const kept = (await boxes.nth(1).getAttribute('value'))!.split('|');
    await boxes.first().uncheck();
    await page.getByRole('button', { name: 'Place the ticked ones' }).click();
    await page.getByText(`${count - 1} of ${count - 1} placed.`).waitFor();
    expect(await site.store.bookings.ofRequest(left)).toBeUndefined();
    expect(await site.store.bookings.ofRequest(kept[0]!)).toMatchObject({
      scannerId: kept[1],
      date: kept[2],
      startMin: Number(kept[3]),
    });
    await page.context().close();
  });

  it('shows a change to everybody who looks at the day', async () => {
    const [watching, working] = await Promise.all([openPage(browser), openPage(browser)]);
    await watching.goto(`${site.url}/day/2026-12-09`);
    await watching.waitForFunction(() => document.body.dataset['live'] === 'on');
    await working.goto(`${site.url}/day/2026-12-09`);
    const block = working.locator('.block.booking').first();
    const id = await block.getAttribute('data-booking');
    await block.locator('a').click();
    await working.getByRole('button', { name: 'Take off the board' }).click();
    await working.getByText(/is off the board/).waitFor();
    await watching.locator(`[data-booking="${id}"]`).waitFor({ state: 'detached' });
    // Undo brings it back for both.
    await working.getByRole('button', { name: 'Undo my last change' }).click();
    await working.getByText(/^Undone/).waitFor();
    await watching.locator(`[data-booking="${id}"]`).waitFor();
    await Promise.all([watching.context().close(), working.context().close()]);
  });

  it('drags a booking to another time with the pointer', async () => {
    const page = await openPage(browser, { viewport: { width: 1280, height: 1600 } });
    await page.goto(`${site.url}/day/2026-12-09`);
    const id = (await page
      .locator('.lane[data-scanner="mr1"] .block.booking')
      .last()
      .getAttribute('data-booking'))!;
    const before = (await site.store.bookings.get(id))!;
    const block = page.locator(`[data-booking="${id}"]`);
    await block.scrollIntoViewIfNeeded();
    const box = (await block.boundingBox())!;
    const lane = (await page.locator('.lane[data-scanner="mr1"]').boundingBox())!;
    const perMinute = lane.height / 600;
    await page.mouse.move(box.x + 60, box.y + 12);
    await page.mouse.down();
    await page.mouse.move(box.x + 60, box.y + 12 + 20 * perMinute, { steps: 5 });
    await page.mouse.move(box.x + 60, box.y + 12 + 30 * perMinute, { steps: 5 });
    await page.mouse.up();
    await page.getByText(/is now at/).waitFor();
    expect((await site.store.bookings.get(id))?.startMin).toBe(before.startMin + 30);
    await page.context().close();
  });

  it('keeps what an exam left open on the list until a clinician signs it off with a reason', async () => {
    const page = await openPage(browser);
    await page.goto(`${site.url}/day/${day}`);
    await page.locator('.block.booking a', { hasText: 'R-102' }).click();
    await page.getByRole('link', { name: 'Exam is done' }).click();
    await page.getByRole('button', { name: 'Record the exam as done' }).click();
    const item = page.locator('.owed-item', { hasText: 'R-102' });
    await item.waitFor();
    expect(await item.textContent()).toContain('this question only, not diagnostic');
    await item.getByLabel('Follow-up exam').selectOption('R-160');
    await item.getByRole('button', { name: 'Note it' }).click();
    await page.getByText('The answer stays owed').waitFor();
    expect(await page.locator('.owed-item', { hasText: 'R-102' }).count()).toBe(1);
    // Without a reason the browser will not send it; sent all the same, it is refused.
    const id = (await site.store.owed.list()).find((o) => o.requestId === 'R-102')!;
    const refused = await page.request.post(`${site.url}/owed/${id.id}/sign-off`, {
      form: { version: id.version, signed_by: 'Dr A', reason: '  ' },
    });
    expect(refused.status()).toBe(422);
    await page.locator('.owed-item', { hasText: 'R-102' }).getByLabel('Clinician').fill('Dr A');
    await page
      .locator('.owed-item', { hasText: 'R-102' })
      .getByLabel('Reason')
      .fill('CT done elsewhere');
    await page
      .locator('.owed-item', { hasText: 'R-102' })
      .getByRole('button', { name: 'Sign off' })
      .click();
    await page.getByText('CT done elsewhere').waitFor();
    expect(await page.locator('.owed-item', { hasText: 'R-102' }).count()).toBe(0);
    await page.context().close();
  });

  it('prints the warning beside every low answer', async () => {
    const page = await openPage(browser);
    await page.goto(`${site.url}/requests/R-131`);
    await page.emulateMedia({ media: 'print' });
    expect(await page.locator('.warning').isVisible()).toBe(true);
    expect(await page.locator('.warning').textContent()).toContain('not diagnostic');
    for (const low of await page.locator('.answers.big > li:not(.grade-diagnostic)').all()) {
      expect(await low.locator('.words').first().isVisible()).toBe(true);
      expect(await low.textContent()).toMatch(/not diagnostic|not answered/);
    }
    expect(await page.locator('.top nav').isVisible()).toBe(false);
    const pdf = await page.pdf({ format: 'A4' });
    const pages = pdf.toString('latin1').match(/\/Type\s*\/Page[^s]/g)?.length ?? 0;
    expect(pages).toBeGreaterThanOrEqual(1);
    expect(pages).toBeLessThanOrEqual(2);
    await page.context().close();
  });

  it('can be worked with the keyboard alone', async () => {
    const page = await openPage(browser);
    await page.goto(`${site.url}/day/${day}`);
    await page.keyboard.press('Tab');
    expect(await page.evaluate(() => document.activeElement?.textContent)).toBe('To the content');
    await page.keyboard.press('Enter');
    // On to the first free gap, then to the first offer's button, with Tab and Enter only.
    const tabTo = async (found: () => Promise<boolean>) => {
      for (let n = 0; n < 200; n++) {
        await page.keyboard.press('Tab');
        if (await found()) return;
      }
      throw new Error('the keyboard never got there');
    };
    await tabTo(() =>
      page.evaluate(
        () =>
          document.activeElement?.closest('.block.gap') !== null &&
          /free, (7|8|9|1\d)\d min/.test(document.activeElement?.textContent ?? ''),
      ),
    );
    await page.keyboard.press('Enter');
    await page.locator('.offers').waitFor();
    await tabTo(() =>
      page.evaluate(() => document.activeElement?.textContent?.startsWith('Place R-') === true),
    );
    await page.keyboard.press('Enter');
    await page.getByText(/is placed at/).waitFor();
    await page.context().close();
  });

  it('works without client script: the plan comes with the button', async () => {
    const page = await openPage(browser, { javaScriptEnabled: false });
    await page.goto(`${site.url}/requests/new?exam=knee`);
    await page.getByRole('group', { name: 'Slot' }).getByLabel('20 min').check();
    await page.getByRole('button', { name: 'Show the plan' }).click();
    expect(await page.locator('#plan-here').textContent()).toContain('inside 20 minutes');
    await page.context().close();
  });
});
