import { expect, type Locator, type Page } from '@playwright/test';
import type { StateMessage, TelemetryMessage } from '../../../shared/live/server-messages';

/** What people do on the pages, as people do it. */
export async function openArm(page: Page, name: string): Promise<void> {
  await page
    .getByRole('link', { name: new RegExp(`^${name}`) })
    .first()
    .click();
  await expect(page.locator('.c-link')).toContainText('steady');
}

export async function takeControlAndEnergise(page: Page): Promise<void> {
  await page.getByRole('button', { name: 'Energise…' }).click();
  await page.getByRole('checkbox', { name: /I have read/ }).check();
  await page
    .getByRole('button', { name: /energise$/i })
    .last()
    .click();
  await expect(page.locator('.c-motors')).toContainText('standing');
}

export async function declare(page: Page): Promise<void> {
  await page.getByRole('button', { name: 'Declare position…' }).click();
  await page.getByRole('button', { name: 'Read it off the built-in arm' }).click();
  await page.getByRole('button', { name: 'Declare', exact: true }).click();
  await expect(page.locator('.c-trust')).toContainText('declared');
}

export async function setCeiling(page: Page, name: 'creep' | 'easy' | 'full'): Promise<void> {
  await page
    .getByRole('group', { name: /^Speed ceiling/ })
    .getByRole('button', { name, exact: true })
    .click();
}

/** A second pair of eyes on the arm: a socket opened by the test inside the page, with the page's own session. */
export async function watchArm(page: Page): Promise<void> {
  await page.evaluate(() => {
    const armId = /arms\/([^/]+)/.exec(location.pathname)![1];
    const w = window as unknown as { spy: { state: unknown; samples: unknown[]; socket: WebSocket } };
    const socket = new WebSocket(`${location.origin.replace('http', 'ws')}/api/arms/${armId}/live`);
    w.spy = { state: null, samples: [], socket };
    socket.onmessage = (event) => {
      const message = JSON.parse(event.data);
      if (message.type === 'state') w.spy.state = message;
      if (message.type === 'telemetry') {
        w.spy.samples.push(message);
        if (w.spy.samples.length > 3000) w.spy.samples.shift();
      }
    };
  });
  await expect.poll(() => samples(page).then((s) => s.length)).toBeGreaterThan(0);
}

export function samples(page: Page): Promise<TelemetryMessage[]> {
  return page.evaluate(() => (window as unknown as { spy: { samples: TelemetryMessage[] } }).spy.samples);
}

export async function newest(page: Page): Promise<TelemetryMessage> {
  return page.evaluate(
    () => (window as unknown as { spy: { samples: TelemetryMessage[] } }).spy.samples.at(-1)!,
  );
}

export function armState(page: Page): Promise<StateMessage> {
  return page.evaluate(() => (window as unknown as { spy: { state: StateMessage } }).spy.state);
}

export async function atRest(page: Page): Promise<void> {
  await expect.poll(async () => (await newest(page)).qd.every((v) => v === 0)).toBe(true);
}

/** The big button of a pose, before and while it is held. */
export function goButton(page: Page): Locator {
  return page.locator('.go', { hasText: /Hold to go to|let go to stop/i });
}
