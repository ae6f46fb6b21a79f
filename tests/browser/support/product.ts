import { type ChildProcess, spawn } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { type BrowserContext, test as base, expect, type Page } from '@playwright/test';
import type { Role } from '../../../shared/team/roles';

const ROOT = resolve(import.meta.dirname, '../../..');

/** Console lines that are nobody's fault here; exact beginnings, each with its reason. */
const KNOWN_WARNINGS = [
  // Software rendering, when a screenshot reads pixels back.
  '[.WebGL-',
];

/** The built product on demo data of its own, as `npm run demo` starts it. */
export class Product {
  private constructor(
    readonly url: string,
    readonly folder: string,
    private readonly child: ChildProcess,
    private readonly log: string[],
  ) {}

  static async start(): Promise<Product> {
    const folder = mkdtempSync(join(tmpdir(), 'elbowroom-browser-'));
    const child = spawn(process.execPath, ['dist/server/index.js', '--demo'], {
      cwd: ROOT,
      env: { ...process.env, PORT: '0', ELBOWROOM_DATA: folder },
      stdio: ['ignore', 'pipe', 'pipe'],
    });
    const log: string[] = [];
    const url = await new Promise<string>((done, fail) => {
      const hear = (data: Buffer) => {
        log.push(String(data));
        const found = /Elbowroom is at (\S+)/.exec(log.join(''))?.[1];
        if (found) done(found);
      };
      child.stdout.on('data', hear);
      child.stderr.on('data', hear);
      child.once('exit', () => fail(new Error(`the product did not start: ${log.join('')}`)));
    });
    return new Product(url, folder, child, log);
  }

  /** What the server has printed since it told where it is. */
  complaints(): string {
    return this.log.slice(1).join('');
  }

  /** `kill -9` for every arm process this product has started. */
  killArmProcesses(): void {
    const { pid } = this.child;
    const children = readFileSync(`/proc/${pid}/task/${pid}/children`, 'utf8').trim().split(' ');
    for (const child of children) process.kill(Number(child), 'SIGKILL');
  }

  /** One line of the log that belongs to what the test did. */
  expectComplaint(line: RegExp): void {
    const at = this.log.findIndex((text, i) => i > 0 && line.test(text));
    expect(at, `${line} in the server log`).toBeGreaterThan(0);
    this.log.splice(at, 1);
  }

  signInOf(role: Role): { email: string; password: string; name: string } {
    const all = JSON.parse(readFileSync(join(this.folder, 'demo-sign-ins.json'), 'utf8')) as {
      role: Role;
      email: string;
      password: string;
      name: string;
    }[];
    return all.find((s) => s.role === role)!;
  }

  async stop(): Promise<void> {
    const gone = new Promise<void>((done) => this.child.once('exit', () => done()));
    this.child.kill('SIGTERM');
    await gone;
    rmSync(this.folder, { recursive: true, force: true });
  }
}

/** Notes every console error and warning and every uncaught error of a page. */
export function listen(page: Page, into: string[]): void {
  page.on('console', (message) => {
    const text = message.text();
    if (!['error', 'warning'].includes(message.type())) return;
    if (!KNOWN_WARNINGS.some((known) => text.startsWith(known))) into.push(`${message.type()}: ${text}`);
  });
  page.on('pageerror', (error) => into.push(`uncaught: ${error.message}`));
}

interface Fixtures {
  product: Product;
  complaints: string[];
  /** A page of a signed-in person, in a browser of its own. */
  as: (role: Role) => Promise<Page>;
}

/** Every test gets a product of its own and fails on any console error or warning, in page and server log. */
export const test = base.extend<Fixtures>({
  // biome-ignore lint/correctness/noEmptyPattern: the form Playwright asks for
  product: async ({}, use) => {
    const product = await Product.start();
    await use(product);
    expect(product.complaints(), 'the server log').toBe('');
    await product.stop();
  },
  // biome-ignore lint/correctness/noEmptyPattern: the form Playwright asks for
  complaints: async ({}, use) => {
    const found: string[] = [];
    await use(found);
    expect(found, 'console of the pages').toEqual([]);
  },
  as: async ({ browser, product, complaints }, use) => {
    const contexts: BrowserContext[] = [];
    await use(async (role) => {
      const context = await browser.newContext({
        baseURL: product.url,
      });
      contexts.push(context);
      const page = await context.newPage();
      listen(page, complaints);
      const { email, password } = product.signInOf(role);
      await page.goto('/');
      await page.getByLabel('E-mail').fill(email);
      await page.getByLabel('Password').fill(password);
      await page.getByRole('button', { name: 'Sign in' }).click();
      await page.getByRole('heading', { name: 'Arms' }).waitFor();
      return page;
    });
    for (const context of contexts) await context.close();
  },
});
export { expect };
