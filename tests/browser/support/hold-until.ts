import type { Locator, Page } from '@playwright/test';

/** How often a person presses again before they give up. */
const MOST_PRESSES = 12;

/**
 * Presses and holds until `done`. A hold may end by itself (a busy machine stalls the page for a moment, and
 * then the page lets go): like a person, lets go and presses again.
 */
export async function holdUntil(
  page: Page,
  button: Locator,
  done: () => Promise<boolean>,
  timeoutMs = 60_000,
): Promise<void> {
  const endMs = Date.now() + timeoutMs;
  await button.first().waitFor();
  for (let press = 0; press < MOST_PRESSES && Date.now() < endMs; press++) {
    const box = await button.boundingBox();
    if (!box) {
      // The page may just be drawing it anew; a person looks again.
      if (await done()) return;
      await page.waitForTimeout(200);
      continue;
    }
    await page.mouse.move(box.x + box.width / 2, box.y + box.height / 2);
    await page.mouse.down();
    try {
      let idle = 0;
      while (Date.now() < endMs) {
        if (await done()) return;
        // Pressed, but no longer held: the page has let go.
        const held = await page.locator('.held').count();
        idle = held > 0 ? 0 : idle + 1;
        if (idle > 5) break;
        await page.waitForTimeout(60);
      }
    } finally {
      await page.mouse.up();
    }
    await page.waitForTimeout(300);
  }
  throw new Error(`held ${MOST_PRESSES} times or ${timeoutMs} ms without getting there`);
}
