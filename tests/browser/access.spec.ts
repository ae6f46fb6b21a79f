import { AxeBuilder } from '@axe-core/playwright';
import { expect, test } from './support/product';
import { openArm } from './support/steps';

const SIZES = [
  { width: 1440, height: 900 },
  { width: 1024, height: 768 },
  { width: 390, height: 844 },
];

async function serious(page: Parameters<typeof openArm>[0]): Promise<string[]> {
  const { violations } = await new AxeBuilder({ page }).analyze();
  return violations
    .filter((v) => v.impact === 'serious' || v.impact === 'critical')
    .map((v) => `${v.id}: ${v.nodes.map((n) => n.target.join(' ')).join(', ')}`);
}

test('axe finds nothing serious or critical on any page, at three sizes', async ({
  as,
  browser,
  product,
}) => {
  test.setTimeout(400_000);
  const page = await as('owner');
  const found: string[] = [];
  const look = async (name: string) => {
    for (const [k, size] of SIZES.entries()) {
      await page.setViewportSize(size);
      // The widest and the narrowest have all the parts there are.
      if (k !== 1) for (const line of await serious(page)) found.push(`${name} ${size.width}: ${line}`);
      // Nothing of a page may run off its side.
      const over = await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth);
      if (over > 1) found.push(`${name} ${size.width}: ${over} px too wide`);
    }
    await page.setViewportSize(SIZES[0]!);
  };
  await look('arms');
  for (const path of ['/team', '/outbox', '/audit', '/settings']) {
    await page.goto(path);
    await page.getByRole('heading', { level: 1 }).waitFor();
    await look(path);
  }
  await page.goto('/');
  await openArm(page, 'Heron');
  await look('move');
  for (const name of ['Poses', 'Sequences', 'Runs', 'Build']) {
    await page.getByRole('link', { name, exact: true }).click();
    await page.getByRole('heading', { level: 1 }).first().waitFor();
    await look(name);
  }
  await page.getByRole('link', { name: 'Sequences', exact: true }).click();
  await page.getByRole('link', { name: 'Weigh one vial' }).click();
  await page.getByText('Duration of a cycle').waitFor();
  await look('sequence');
  await page.getByRole('link', { name: 'Glance' }).click();
  await page.getByRole('heading', { level: 1 }).waitFor();
  await look('glance');
  const elsewhere = await browser.newContext({ baseURL: product.url });
  const stranger = await elsewhere.newPage();
  await stranger.goto('/sign-in');
  await stranger.getByLabel('E-mail').waitFor();
  for (const line of await serious(stranger)) found.push(`sign-in: ${line}`);
  await elsewhere.close();
  expect(found).toEqual([]);
});
