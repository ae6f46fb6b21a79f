import { DEMO_ARMS } from '../../shared/arm/demo-arms';
import { holdUntil } from './support/hold-until';
import { expect, test } from './support/product';
import {
  armState,
  atRest,
  declare,
  goButton,
  newest,
  openArm,
  samples,
  setCeiling,
  takeControlAndEnergise,
  watchArm,
} from './support/steps';

/** A rest position may differ from the shadow by 1 % of the joint's range or 0.2°, whichever is larger. */
function allowed(joint: (typeof DEMO_ARMS.heron.joints)[number]): number {
  return Math.max(0.01 * (joint.limits.upper - joint.limits.lower), (0.2 * Math.PI) / 180);
}

test('Stop in mid-move rests every joint where the stopping shadow said', async ({ as }) => {
  const page = await as('teacher');
  await openArm(page, 'Heron');
  await takeControlAndEnergise(page);
  await declare(page);
  await watchArm(page);
  await setCeiling(page, 'easy');
  await page.getByRole('link', { name: 'Poses', exact: true }).click();
  await page.locator('.pc', { hasText: 'Above scale' }).click();
  // Esc in mid-move, while the button is still held.
  await holdUntil(page, goButton(page), async () => {
    if (Math.max(...(await newest(page)).qd.map(Math.abs)) < 0.1) return false;
    await page.keyboard.press('Escape');
    return true;
  });
  await expect.poll(async () => (await armState(page)).stop?.by).toBe('Ines');
  await atRest(page);

  const all = await samples(page);
  const rest = all.at(-1)!.q;
  // The ramp begins where the speed that had been growing or steady starts to fall for good: its shadow is the promise.
  const speed = all.map((s) => Math.max(...s.qd.map(Math.abs)));
  let start = speed.length - 1;
  while (start > 0 && speed[start - 1]! >= speed[start]! - 1e-9) start--;
  const promise = all[start]!.stopAt;
  expect(speed[start]).toBeGreaterThan(0.05);
  for (const [i, joint] of DEMO_ARMS.heron.joints.entries())
    expect(Math.abs(rest[i]! - promise[i]!), joint.name).toBeLessThanOrEqual(allowed(joint));
  await expect(page.locator('.stopsay')).toContainText('acknowledged');
});

test('an observer in a second browser sees the arm move, cannot move it, and can stop it', async ({ as }) => {
  const ines = await as('teacher');
  await openArm(ines, 'Heron');
  await takeControlAndEnergise(ines);
  await declare(ines);
  await watchArm(ines);
  const otis = await as('observer');
  await openArm(otis, 'Heron');
  await watchArm(otis);

  // The page offers nothing that moves.
  await expect(otis.getByRole('button', { name: /Base turn, right/ })).toHaveAttribute(
    'aria-disabled',
    'true',
  );
  await expect(otis.locator('.c-ctl').getByRole('button')).toHaveCount(0);
  // The raw socket refuses what the page does not offer.
  const refusal = await otis.evaluate(
    () =>
      new Promise<{ code: string }>((done) => {
        const { socket } = (window as unknown as { spy: { socket: WebSocket } }).spy;
        socket.addEventListener('message', (event) => {
          const message = JSON.parse(event.data);
          if (message.type === 'refused') done(message);
        });
        socket.send(
          JSON.stringify({
            type: 'hold.start',
            id: '1',
            turn: 1,
            holdId: 'x',
            motion: { kind: 'jog', frame: 'joint', axis: 0, direction: 1 },
          }),
        );
      }),
  );
  expect(refusal.code).toBe('notAllowed');

  const before = (await newest(otis)).q[0]!;
  const button = ines.getByRole('button', { name: 'Base turn, right: hold to move' });
  let seenMoving = false;
  // Ines holds; as soon as Otis sees the arm move on his own page, he stops it.
  await holdUntil(ines, button.or(ines.locator('[data-joint="0"] .held')), async () => {
    const moving = ((await otis.locator('.c-motors').textContent()) ?? '').includes('moving');
    if (moving && Math.abs((await newest(otis)).q[0]! - before) > 0.01) {
      seenMoving = true;
      await otis
        .getByRole('button', { name: 'Stop arm' })
        .dispatchEvent('pointerdown', { button: 0, isPrimary: true });
    }
    return seenMoving;
  });
  await atRest(otis);
  await expect.poll(async () => (await armState(otis)).stop?.by).toBe('Otis');
  await expect(otis.locator('.stopsay')).toContainText('acknowledged');
  const stopped = (await newest(otis)).q[0]!;
  // Nothing resumes by itself.
  await ines.waitForTimeout(400);
  expect((await newest(ines)).q[0]).toBe(stopped);
});

test('an arm process killed in mid-move: the page says so, the arm comes back resting and nothing resumes', async ({
  as,
  product,
}) => {
  const page = await as('teacher');
  await openArm(page, 'Heron');
  await takeControlAndEnergise(page);
  await declare(page);
  const button = page.getByRole('button', { name: 'Base turn, right: hold to move' });
  await holdUntil(page, button.or(page.locator('[data-joint="0"] .held')), async () => {
    if (!((await page.locator('.c-motors').textContent()) ?? '').includes('moving')) return false;
    product.killArmProcesses();
    return true;
  });
  await expect(page.getByText(/The control process of Heron ended/).first()).toBeVisible();
  await expect(page.locator('.c-motors')).toContainText('resting');
  await expect(page.locator('.c-trust')).toContainText('unknown');
  // The web side never faltered: the same page is still signed in and asks again.
  await page.getByRole('link', { name: 'Poses', exact: true }).click();
  await expect(page.getByRole('heading', { name: 'Poses' })).toBeVisible();
  product.expectComplaint(/arm process of Heron ended \(SIGKILL\)/);
});
