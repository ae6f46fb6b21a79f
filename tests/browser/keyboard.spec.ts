import { enter, holdKeyUntil, tabTo } from './support/keyboard';
import { expect, listen, test } from './support/product';
import { atRest, newest, watchArm } from './support/steps';

// The main job once more, without a mouse: Tab, Enter, Space, and letters typed.
test('the whole job by keyboard alone', async ({ browser, product, complaints }) => {
  test.setTimeout(300_000);
  const context = await browser.newContext({ baseURL: product.url });
  const page = await context.newPage();
  listen(page, complaints);
  const { keyboard } = page;
  const button = (name: string | RegExp) =>
    page.getByRole('button', { name, exact: typeof name === 'string' });
  const link = (name: string) => page.getByRole('link', { name, exact: true });
  const jogged = (index: number, label: string) => async (travel: number) => {
    const before = (await newest(page)).q[index]!;
    await holdKeyUntil(page, button(`${label}: hold to move`), async () => {
      return Math.abs((await newest(page)).q[index]! - before) > travel;
    });
    await atRest(page);
  };

  // Sign in.
  const { email, password } = product.signInOf('teacher');
  await page.goto('/');
  await tabTo(page, page.getByLabel('E-mail'));
  await keyboard.type(email);
  await tabTo(page, page.getByLabel('Password'));
  await keyboard.type(password);
  await keyboard.press('Enter');
  await enter(page, page.getByRole('link', { name: /^Heron/ }));
  await expect(page.locator('.c-link')).toContainText('steady');

  // Take control, energise, declare.
  await enter(page, button('Energise…'));
  await enter(page, page.getByRole('checkbox', { name: /I have read/ }), ' ');
  await enter(page, page.getByRole('dialog').getByRole('button', { name: /energise$/i }));
  await expect(page.locator('.c-motors')).toContainText('standing');
  await enter(page, button('Declare position…'));
  await enter(page, button('Read it off the built-in arm'));
  await enter(page, button('Declare'));
  await expect(page.locator('.c-trust')).toContainText('declared');
  await enter(
    page,
    page.getByRole('group', { name: /^Speed ceiling/ }).getByRole('button', { name: 'easy' }),
  );
  await watchArm(page);

  // Jog every joint and capture four poses; C captures from anywhere.
  for (const [index, label] of [
    'Base turn, right',
    'Upper arm, raise',
    'Forearm, fold',
    'Wrist tilt, tilt up',
  ].entries()) {
    await jogged(index, label)(0.1);
    await expect(page.locator('.c-motors')).toContainText('standing');
    await keyboard.press('c');
    await expect(page.getByText(new RegExp(`Captured as “Pose ${index + 1}”`))).toBeVisible();
  }

  // Record by marking; M marks.
  await enter(page, link('Sequences'));
  await enter(page, button('New sequence'));
  await tabTo(page, page.getByLabel('Name of the sequence'));
  await keyboard.press('Control+a');
  await keyboard.type('By keys');
  await enter(page, button('Record'));
  const steps = page.getByRole('list', { name: 'Steps' }).getByRole('listitem');
  await keyboard.press('m');
  await expect(steps).toHaveCount(1);
  await enter(page, button('Close'));
  await expect(button('Mark')).toBeEnabled();
  await keyboard.press('m');
  await expect(steps).toHaveCount(2);
  await jogged(0, 'Base turn, left')(0.15);
  await expect(button('Mark')).toBeEnabled();
  await keyboard.press('m');
  await expect(steps).toHaveCount(3);
  await enter(page, button('Open'));
  await expect(button('Mark')).toBeEnabled();
  await keyboard.press('m');
  await expect(steps).toHaveCount(4);
  await enter(page, button('Save'));
  await expect(page.getByText('Saved as version 2.')).toBeVisible();
  await enter(page, button('Done'));
  await expect(page.getByRole('region', { name: 'Rehearsal' })).toContainText('Duration of a cycle');

  // Hold the first cycle, then three in all.
  await tabTo(page, page.getByRole('textbox', { name: 'Cycles' }));
  await keyboard.press('Control+a');
  await keyboard.type('3');
  await enter(page, button(/^Run\s*first cycle held/));
  await holdKeyUntil(
    page,
    page.locator('.run .go', { hasText: /Hold to run|let go to stop/ }).or(button(/Resume/)),
    async () => (await button(/Resume/).count()) > 0,
  );
  await enter(page, button(/Resume/));
  await expect(button(/Moves in/)).toBeVisible();
  await expect(button(/^Run\s*from step 1, after 3 s/)).toBeVisible({ timeout: 120_000 });
  await enter(page, link('Runs'));
  await expect(page.getByRole('row', { name: /By keys/ })).toContainText(/3\s*of\s*3.*finished/);
  await context.close();
});
