import type { Page } from 'playwright-core';

/** Tab until the focus stands on a link, button or field with these words, or with this name. */
export async function tabTo(page: Page, words: string): Promise<void> {
  for (let n = 0; n < 250; n++) {
    await page.keyboard.press('Tab');
    const at = await page.evaluate(() => {
      const on = document.activeElement as HTMLInputElement | null;
      const label = on?.labels?.[0]?.textContent ?? on?.textContent ?? '';
      return `${on?.getAttribute('aria-label') ?? label}|${on?.name ?? ''}`;
    });
    if (at.includes(words)) return;
  }
  throw new Error(`the keyboard never got to ${words}`);
}

export async function typeOver(page: Page, words: string, text: string): Promise<void> {
  await tabTo(page, words);
  await page.keyboard.press('Control+A');
  await page.keyboard.type(text);
}

/** Where a link or button leads, by Enter. */
export async function follow(page: Page, words: string, address: string | RegExp): Promise<void> {
  await tabTo(page, words);
  await Promise.all([page.waitForURL(address), page.keyboard.press('Enter')]);
}
