import type { Page } from '@playwright/test';
import { DEMO_ARMS } from '../../shared/arm/demo-arms';
import { compileChain, forwardKinematics } from '../../shared/kinematics';
import { holdUntil } from './support/hold-until';
import { expect, test } from './support/product';
import {
  armState,
  atRest,
  declare,
  newest,
  openArm,
  samples,
  setCeiling,
  takeControlAndEnergise,
  watchArm,
} from './support/steps';

type Place = [number, number, number];
const place = async (page: Page) => (await newest(page)).tool.position as Place;

async function ready(page: Page, arm: string): Promise<void> {
  await openArm(page, arm);
  await takeControlAndEnergise(page);
  await declare(page);
  await watchArm(page);
  await setCeiling(page, 'easy');
}

/** Goes by hold to typed joint values, degrees. */
async function goTo(page: Page, degrees: readonly number[]): Promise<void> {
  await page.getByRole('button', { name: 'Go to…' }).click();
  const dialog = page.getByRole('dialog');
  for (const [i, value] of degrees.entries()) await dialog.getByRole('textbox').nth(i).fill(String(value));
  const rad = degrees.map((d) => (d * Math.PI) / 180);
  await holdUntil(page, dialog.locator('.go'), async () => {
    const { q, qd } = await newest(page);
    return qd.every((v) => v === 0) && q.every((v, i) => Math.abs(v - rad[i]!) < 1e-4);
  });
  await page.keyboard.press('Escape');
  if (await dialog.count())
    await dialog
      .getByRole('button', { name: /close|cancel|done/i })
      .first()
      .click();
}

test('the tool held 100 mm along base x on Wren stays on its line, and stops where it must', async ({
  as,
}) => {
  test.setTimeout(240_000);
  const page = await as('teacher');
  await ready(page, 'Wren');
  await goTo(page, [11, 95, -110, 17, -50, 11]);
  if ((await page.locator('.c-motors').textContent())?.includes('standing') === false) await atRest(page);
  await page.getByRole('button', { name: 'tool along base' }).click();
  const start = await place(page);
  const from = (await newest(page)).t;
  const ahead = page.getByRole('button', { name: 'Tool along base x, ahead: hold to move' });
  const held = page.locator('[data-axis="base x"] .held');
  await holdUntil(page, ahead.or(held), async () => (await place(page))[0] - start[0] > 0.1);
  await atRest(page);
  const seen = (await samples(page)).filter((s) => s.t >= from);
  for (const { tool } of seen) {
    expect(Math.abs(tool.position[1]! - start[1])).toBeLessThan(1e-4);
    expect(Math.abs(tool.position[2]! - start[2])).toBeLessThan(1e-4);
  }
  // On to the end of the way: it stops by itself, and the page names the joint.
  await holdUntil(page, ahead.or(held), async () => (await newest(page)).blocked !== undefined);
  await expect(page.locator('.bottom')).toContainText(/No farther that way\..*(limit|faster than it can)/);
  await atRest(page);
});

test('a ghost of the tool is dragged, shows whether it can be reached, and is gone to by hold', async ({
  as,
}) => {
  test.setTimeout(240_000);
  const page = await as('teacher');
  await ready(page, 'Heron');
  await page.locator('canvas[data-ready=true]').waitFor();
  await page.getByRole('button', { name: 'a ghost first' }).click();
  const upright = page.getByRole('button', { name: /^Ghost up and down/ });
  await upright.waitFor();
  const z = page.getByLabel('Tool point z', { exact: true });
  const before = Number((await z.inputValue()).replace('−', '-'));
  // By the mouse, then by an arrow key.
  const box = (await upright.boundingBox())!;
  await page.mouse.move(box.x + box.width / 2, box.y + box.height / 2);
  await page.mouse.down();
  await page.mouse.move(box.x + box.width / 2, box.y - 40, { steps: 5 });
  await page.mouse.up();
  const dragged = Number((await z.inputValue()).replace('−', '-'));
  expect(dragged).toBeGreaterThan(before + 10);
  await upright.press('ArrowUp');
  await expect.poll(async () => Number((await z.inputValue()).replace('−', '-'))).toBeCloseTo(dragged + 5, 0);
  // Nothing has moved.
  expect((await newest(page)).qd.every((v) => v === 0)).toBe(true);

  await page.getByLabel('Tool point x', { exact: true }).fill('2000');
  await expect(page.locator('.ghost')).toContainText('Out of reach');
  await expect(page.locator('.ghost .go')).toHaveAttribute('aria-disabled', 'true');
  await page.getByRole('button', { name: 'Back to the arm' }).click();
  await page.getByRole('button', { name: 'Tool point z, 5 mm more' }).click();
  await page.getByRole('button', { name: 'Tool point z, 5 mm more' }).click();
  await expect(page.locator('.ghost')).toContainText('Can be reached');
  const wanted = Number((await z.inputValue()).replace('−', '-')) / 1000;
  await holdUntil(page, page.locator('.ghost .go'), async () => {
    const { qd, tool } = await newest(page);
    return qd.every((v) => v === 0) && Math.abs(tool.position[2]! - wanted) < 2e-4;
  });
});

test('a step straight to a pose stays on its line while it is let go, gone on with, slowed and stopped', async ({
  as,
}) => {
  test.setTimeout(300_000);
  const page = await as('teacher');
  await ready(page, 'Heron');
  const made = await page.evaluate(async () => {
    const armId = /arms\/([^/]+)/.exec(location.pathname)![1];
    const get = async (path: string) => (await (await fetch(`/api/arms/${armId}/${path}`)).json()) as unknown;
    const poses = (await get('poses')) as { id: string; name: string; q: number[] }[];
    const named = (name: string) => poses.find((pose) => pose.name === name)!;
    const [above, tray] = [named('Above tray'), named('In tray A1')];
    const step = (kind: string, poseId: string) => ({ id: kind, kind, poseId, speed: 'full', settle: 0 });
    const answer = await fetch(`/api/arms/${armId}/sequences`, {
      method: 'POST',
      headers: { 'content-type': 'application/json' },
      body: JSON.stringify({
        name: 'Straight down',
        note: '',
        steps: [step('goTo', above.id), step('straightTo', tray.id)],
      }),
    });
    return { status: answer.status, above: above.q, tray: tray.q };
  });
  expect(made.status).toBe(201);
  await page.getByRole('link', { name: 'Sequences', exact: true }).click();
  await page.getByRole('link', { name: 'Straight down' }).click();
  await expect(page.getByRole('list', { name: 'Steps' })).toContainText('Straight to In tray A1');
  await page.getByRole('button', { name: /^Run\s*first cycle held/ }).click();
  const button = page.locator('.run .go', { hasText: /Hold to run|let go to stop/ });
  const chain = compileChain(DEMO_ARMS.heron);
  const toolAt = (q: readonly number[]) => forwardKinematics(chain, q).position as Place;
  const [from, to] = [[...toolAt(made.above)] as Place, [...toolAt(made.tray)] as Place];
  const length = Math.hypot(...to.map((value, k) => value - from[k]!));
  const shareOf = (p: Place) =>
    p.reduce((sum, value, k) => sum + ((value - from[k]!) * (to[k]! - from[k]!)) / length ** 2, 0);
  const onLine = async (share: number) => {
    const { stepPath } = (await armState(page)).run ?? { stepPath: '' };
    return stepPath === '2' && shareOf(await place(page)) > share;
  };
  // Let go in the middle, hold again, then Stop on the way.
  await holdUntil(page, button, () => onLine(0.2), 120_000);
  await atRest(page);
  await setLiveCeiling(page, 'creep');
  await holdUntil(page, button, () => onLine(0.45), 120_000);
  await page.keyboard.press('Escape');
  await expect.poll(async () => (await armState(page)).stop?.by).toBe('Ines');
  await atRest(page);
  // What was sent between the poses never left the line by more than 0.1 mm.
  const line = (await samples(page))
    .map(({ tool }) => tool.position as Place)
    .filter((p) => shareOf(p) > 0.02 && shareOf(p) < 0.98 && offLine(p, from, to) < 0.02);
  expect(line.length).toBeGreaterThan(20);
  expect(Math.max(...line.slice(-20).map((p) => offLine(p, from, to)))).toBeLessThan(1e-4);
  expect(shareOf(line.at(-1)!)).toBeGreaterThan(0.4);
});

function offLine(p: Place, from: Place, to: Place): number {
  const way = to.map((value, k) => value - from[k]!);
  const length = Math.hypot(...way);
  const d = p.map((value, k) => value - from[k]!);
  const along = d.reduce((sum, value, k) => sum + (value * way[k]!) / length, 0);
  return Math.sqrt(Math.max(0, d.reduce((sum, value) => sum + value * value, 0) - along * along));
}

/** The ceiling of a run under way. */
async function setLiveCeiling(page: Page, name: string): Promise<void> {
  await page.getByRole('group', { name: 'Ceiling', exact: true }).getByRole('button', { name }).click();
}
