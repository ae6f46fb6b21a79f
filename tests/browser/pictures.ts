import { mkdirSync } from 'node:fs';
import { join } from 'node:path';
import { chromium, type Page } from '@playwright/test';
import playwright from './playwright.config';
import { holdUntil } from './support/hold-until';
import { Product } from './support/product';
import {
  declare,
  goButton,
  newest,
  openArm,
  setCeiling,
  takeControlAndEnergise,
  watchArm,
} from './support/steps';

/**
 * `npm run pictures`: photographs the running product for the README. With `-- FOLDER`, photographs every page at
 * three sizes into that folder as well, to be looked at. Needs a build.
 */
const FOLDER = join(import.meta.dirname, 'pictures');
const EVERY_SIZE = process.argv[2];
const WIDE = { width: 1440, height: 900 };
const SIZES = [WIDE, { width: 1024, height: 768 }, { width: 390, height: 844 }];
for (const folder of [FOLDER, EVERY_SIZE]) if (folder) mkdirSync(folder, { recursive: true });
const product = await Product.start();
const browser = await chromium.launch(playwright.use?.launchOptions);
const page: Page = await browser.newPage({ baseURL: product.url, viewport: WIDE });
const picture = async (name: string) => {
  await page.screenshot({ path: join(FOLDER, `${name}.png`) });
  await everySize(name);
};
const everySize = async (name: string) => {
  if (!EVERY_SIZE) return;
  for (const size of SIZES) {
    await page.setViewportSize(size);
    await page.waitForTimeout(500);
    await page.screenshot({ path: join(EVERY_SIZE, `${name}-${size.width}.png`) });
  }
  await page.setViewportSize(WIDE);
  await page.waitForTimeout(300);
};
const sheet = async (name: string) => {
  await page.getByRole('link', { name, exact: true }).click();
  await page.getByRole('heading', { level: 1 }).first().waitFor();
  await page.waitForTimeout(800);
};

const { email, password } = product.signInOf('teacher');
await page.goto('/');
await page.getByLabel('E-mail').fill(email);
await page.getByLabel('Password').fill(password);
await picture('sign-in');
await page.getByRole('button', { name: 'Sign in' }).click();
await page.getByRole('heading', { name: 'Arms' }).waitFor();
await everySize('arms');
await openArm(page, 'Heron');
await page.locator('canvas[data-ready=true]').waitFor();
await page.waitForTimeout(1000);
await picture('rest');
await takeControlAndEnergise(page);
await declare(page);
await watchArm(page);
await setCeiling(page, 'easy');
await sheet('Poses');
await picture('poses');
await page.locator('.pc', { hasText: 'Hand clear' }).click();
await holdUntil(page, goButton(page), async () => {
  const { q, qd } = await newest(page);
  return qd.every((v) => v === 0) && Math.abs(q[1]! - (80 * Math.PI) / 180) < 1e-3;
});
await sheet('Sequences');
await page.getByRole('link', { name: 'Weigh one vial' }).click();
await page.getByText('Duration of a cycle').waitFor();
await page.waitForTimeout(800);
await picture('sequence');
await page.getByRole('textbox', { name: 'Cycles' }).fill('3');
await page.getByRole('button', { name: /^Run\s*first cycle held/ }).click();
await holdUntil(
  page,
  page.locator('.run .go', { hasText: /Hold to run|let go to stop/ }),
  async () => (await page.getByRole('button', { name: /Resume/ }).count()) > 0,
  180_000,
);
await page.getByRole('button', { name: /Resume/ }).click();
await sheet('Move');
const moving = async () => (await page.locator('.c-motors').textContent())?.includes('moving');
for (let k = 0; k < 200 && !(await moving()); k++) await page.waitForTimeout(50);
await page.waitForTimeout(400);
await picture('move');
await page.setViewportSize({ width: 390, height: 844 });
await page.waitForTimeout(500);
await picture('move-phone');
await page.setViewportSize(WIDE);
await page.getByRole('link', { name: 'Glance' }).click();
await page.waitForTimeout(500);
await picture('glance');
await page.getByRole('link', { name: 'Leave glance' }).click();
await sheet('Build');
await picture('build');
await sheet('Runs');
for (let k = 0; k < 400 && !(await page.getByText('finished').count()); k++) await page.waitForTimeout(200);
await page.waitForTimeout(600);
await picture('runs');
// The tool of Wren, and a ghost of it.
await page.goto('/');
await openArm(page, 'Wren');
await page.locator('canvas[data-ready=true]').waitFor();
await takeControlAndEnergise(page);
await declare(page);
await page.getByRole('button', { name: 'tool along base' }).click();
await page.waitForTimeout(800);
await picture('tool');
await page.getByRole('button', { name: 'a ghost first' }).click();
for (let k = 0; k < 12; k++) await page.getByRole('button', { name: 'Tool point z, 5 mm more' }).click();
for (let k = 0; k < 12; k++) await page.getByRole('button', { name: 'Tool point y, 5 mm less' }).click();
await page.waitForTimeout(800);
await picture('ghost');
if (EVERY_SIZE) {
  await page.goto('/');
  await openArm(page, 'Heron');
  await page.getByRole('link', { name: 'Sequences', exact: true }).click();
  await page.getByRole('link', { name: 'Weigh one vial' }).waitFor();
  await everySize('sequences');
  await page.getByRole('link', { name: 'Weigh one vial' }).click();
  await page.getByRole('button', { name: 'Record', exact: true }).click();
  await everySize('record');
  // The owner's pages.
  await page.context().clearCookies();
  const owner = product.signInOf('owner');
  await page.goto('/');
  await page.getByLabel('E-mail').fill(owner.email);
  await page.getByLabel('Password').fill(owner.password);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await page.getByRole('heading', { name: 'Arms' }).waitFor();
  for (const path of ['team', 'outbox', 'audit', 'settings']) {
    await page.goto(`/${path}`);
    await page.getByRole('heading', { level: 1 }).waitFor();
    await everySize(path);
  }
}
await browser.close();
await product.stop();
