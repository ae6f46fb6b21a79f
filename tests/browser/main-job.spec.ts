import { holdUntil } from './support/hold-until';
import { expect, test } from './support/product';
import {
  atRest,
  declare,
  goButton,
  newest,
  openArm,
  setCeiling,
  takeControlAndEnergise,
  watchArm,
} from './support/steps';

// The whole job of a person on a fresh machine, once through.
test('sign in, bring up, jog, teach, record, rehearse, hold the first cycle, run three, read the history', async ({
  as,
}) => {
  test.setTimeout(300_000);
  const page = await as('teacher');
  await openArm(page, 'Heron');
  await page.locator('canvas[data-ready=true]').waitFor();
  await takeControlAndEnergise(page);
  await declare(page);
  await watchArm(page);
  await setCeiling(page, 'easy');

  // Hold-jog each joint both ways; the arm really moves, and stands after letting go.
  const joints = [
    ['Base turn', 'right'],
    ['Upper arm', 'raise'],
    ['Forearm', 'fold'],
    ['Wrist tilt', 'tilt up'],
  ] as const;
  const captured = new Map<string, number[]>();
  for (const [index, [joint, word]] of joints.entries()) {
    const before = (await newest(page)).q[index]!;
    await holdUntil(
      page,
      page
        .getByRole('button', { name: `${joint}, ${word}: hold to move` })
        .or(page.locator(`[data-joint="${index}"] .held`)),
      async () => Math.abs((await newest(page)).q[index]! - before) > 0.12,
    );
    await atRest(page);
    await expect(page.locator('.c-motors')).toContainText('standing');
    // Capture a pose at each place.
    await page.locator('.recent').getByRole('button', { name: 'Capture pose' }).click();
    await expect(page.getByText(new RegExp(`Captured as “Pose ${index + 1}”`))).toBeVisible();
    captured.set(`Pose ${index + 1}`, (await newest(page)).q);
  }

  // Record a pick-and-place by marking.
  await page.getByRole('link', { name: 'Sequences', exact: true }).click();
  await page.getByRole('button', { name: 'New sequence' }).click();
  await page.getByLabel('Name of the sequence').fill('Carry one vial');
  await page.getByRole('button', { name: 'Record', exact: true }).click();
  const steps = page.getByRole('list', { name: 'Steps' }).getByRole('listitem');
  const mark = page.getByRole('button', { name: 'Mark', exact: true });
  const grip = (word: 'Open' | 'Close') => page.getByRole('button', { name: word, exact: true }).click();
  await mark.click();
  await expect(steps).toHaveCount(1);
  await expect(steps.first()).toContainText('Pose 4');
  // The fingers close: the next mark adds a Grip.
  await grip('Close');
  await mark.click();
  await expect(steps).toHaveCount(2);
  await expect(steps.last()).toContainText('Grip');
  // Elsewhere: go to the first pose by hold, then mark again.
  for (const name of ['Pose 1', 'Pose 2']) {
    const before = await steps.count();
    await page.getByRole('button', { name: 'Save', exact: true }).click();
    await expect(page.getByText(/Saved as version/).first()).toBeVisible();
    await page.getByRole('link', { name: 'Poses', exact: true }).click();
    await page.locator('.pc', { hasText: name }).click();
    await holdUntil(page, goButton(page), async () => {
      const { q, qd } = await newest(page);
      return qd.every((v) => v === 0) && q.every((v, i) => Math.abs(v - captured.get(name)![i]!) < 1e-4);
    });
    await page.getByRole('link', { name: 'Sequences', exact: true }).click();
    await page.getByRole('link', { name: 'Carry one vial' }).click();
    await page.getByRole('button', { name: 'Record', exact: true }).click();
    await expect(steps).toHaveCount(before);
    await mark.click();
    await expect(steps).toHaveCount(before + 1);
    await expect(steps.last()).toContainText(name);
  }
  // Put down: the fingers open.
  await grip('Open');
  await mark.click();
  await expect(steps).toHaveCount(5);
  await page.getByRole('button', { name: 'Save', exact: true }).click();
  await expect(page.getByText('Saved as version 4.')).toBeVisible();

  // Rehearse: limits and duration.
  await page.getByRole('button', { name: 'Done', exact: true }).click();
  const rehearsal = page.getByRole('region', { name: 'Rehearsal' });
  await expect(rehearsal).toContainText('Duration of a cycle');
  await expect(rehearsal).toContainText('Nearest limit');

  // Hold through the first cycle, then three in all.
  await page.getByRole('textbox', { name: 'Cycles' }).fill('4');
  await page.getByRole('button', { name: /^Run\s*first cycle held/ }).click();
  await holdUntil(
    page,
    page.locator('.run .go', { hasText: /Hold to run|let go to stop/ }),
    async () => (await page.getByRole('button', { name: /Resume/ }).count()) > 0,
    120_000,
  );
  await page.getByRole('button', { name: /Resume/ }).click();
  await expect(page.getByRole('button', { name: /Moves in/ })).toBeVisible();
  await expect(page.getByRole('button', { name: /^Run\s*from step 1, after 3 s/ })).toBeVisible({
    timeout: 120_000,
  });

  // History: every cycle timed.
  await page.getByRole('link', { name: 'Runs', exact: true }).click();
  const row = page.getByRole('row', { name: /Carry one vial/ });
  await expect(row).toContainText('finished');
  await expect(row).toContainText(/4\s*of\s*4/);
  const cycles = page.getByRole('table', { name: 'Cycles' }).getByRole('row');
  await expect(cycles).toHaveCount(5);
  await expect(cycles.nth(1)).toContainText('held');
  await expect(cycles.nth(2)).toContainText('by itself');
  await expect(cycles.nth(4)).toContainText(/\d+\.\d\d s/);
  expect(captured.size).toBe(4);
});
