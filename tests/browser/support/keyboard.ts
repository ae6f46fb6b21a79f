import type { Locator, Page } from '@playwright/test';
import { expect } from './product';

const MOST_TABS = 150;
const MOST_PRESSES = 12;

/** Tabs on until the control has the focus, as somebody without a mouse does. */
export async function tabTo(page: Page, control: Locator): Promise<void> {
  const one = control.first();
  await one.waitFor();
  const focused = () => one.evaluate((element) => element === document.activeElement);
  for (let k = 0; k < MOST_TABS; k++) {
    if (await focused()) return;
    await page.keyboard.press('Tab');
  }
  throw new Error(`not reached by ${MOST_TABS} presses of Tab: ${control}`);
}

/** Tabs to it and presses Enter (or Space). */
export async function enter(page: Page, control: Locator, key: 'Enter' | ' ' = 'Enter'): Promise<void> {
  await tabTo(page, control);
  await expect(control.first()).toBeEnabled();
  await page.keyboard.press(key);
}

/** Holds Space on the control until `done`; presses again when the page let go by itself. */
export async function holdKeyUntil(
  page: Page,
  control: Locator,
  done: () => Promise<boolean>,
): Promise<void> {
  for (let press = 0; press < MOST_PRESSES; press++) {
    await tabTo(page, control);
    await page.keyboard.down(' ');
    try {
      for (let idle = 0; idle < 6; ) {
        if (await done()) return;
        idle = (await page.locator('.held').count()) > 0 ? 0 : idle + 1;
        await page.waitForTimeout(60);
      }
    } finally {
      await page.keyboard.up(' ');
    }
    await page.waitForTimeout(200);
    if (await done()) return;
  }
  throw new Error(`held ${MOST_PRESSES} times without getting there`);
}
