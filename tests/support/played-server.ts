import { mkdtempSync, rmSync } from 'node:fs';
import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import supertest from 'supertest';
import { createApp } from '../../server/app';
import { hashPassword } from '../../server/auth/passwords';
import { type Context, openContext } from '../../server/context';
import type { StoredArm } from '../../server/db/arm-store';
import type { Settings } from '../../server/settings';
import { readSettings } from '../../server/settings';
import { DEMO_ARMS } from '../../shared/arm/demo-arms';
import { ROLES, type Role } from '../../shared/team/roles';
import { FakeArms } from './fake-arms';

export const MIGRATIONS = new URL('../../drizzle', import.meta.url).pathname;
export const PASSWORD = 'heron over the tide mill';
const START_MS = Date.UTC(2026, 3, 1, 9);

/** Hashed once for all: it is meant to be slow. */
const hashed = hashPassword(PASSWORD);

export type Team = Record<Role, { id: string; name: string; email: string }>;

export interface PlayedServer {
  url: string;
  context: Context;
  live: FakeArms;
  folder: string;
  /** The wall clock of this server, ms; a test moves it on. */
  clock: { ms: number };
  warnings: string[];
  /** A client with its own cookies that sends this server's Origin, as the page does. */
  browser(cookie?: string): Browser;
  /** One person of each role. */
  team(): Promise<Team>;
  /** A browser in which this person is signed in already. */
  as(person: { id: string }): Browser;
  heron(): StoredArm;
  close(): Promise<void>;
}

/** The real app on a port of its own with a real file of its own; only the arms are played. */
export async function startPlayedServer(
  options: {
    settings?: Partial<Settings>;
    signInLimit?: Context['signInLimit'];
    folder?: string;
    clientFolder?: string;
  } = {},
): Promise<PlayedServer> {
  const folder = options.folder ?? mkdtempSync(join(tmpdir(), 'elbowroom-test-'));
  const settings = { ...readSettings({ ELBOWROOM_DATA: folder, PORT: '0' }, []), ...options.settings };
  const live = new FakeArms();
  const clock = { ms: START_MS };
  const warnings: string[] = [];
  let url = '';
  const context = openContext({
    settings,
    migrationsFolder: MIGRATIONS,
    wallMs: () => clock.ms,
    log: {
      info: () => {},
      warn: (message) => warnings.push(message),
      error: (details, message) => warnings.push(`${message} ${JSON.stringify(details)}`),
    },
    publicUrl: () => settings.publicUrl ?? url,
    live: () => live,
    signInLimit: options.signInLimit ?? { perAddress: 10_000, perAccount: 10_000 },
  });
  const app = createApp(context, {
    clientFolder: options.clientFolder ?? null,
    secure: settings.secure,
    trustProxy: settings.secure && settings.tls === null,
  });
  const http = createServer(app);
  await new Promise<void>((resolve) => http.listen(0, '127.0.0.1', resolve));
  url = `http://localhost:${(http.address() as AddressInfo).port}`;

  const cookieOf = (person: { id: string }) => context.sessions.begin(person.id, '').split(';')[0]!;
  return {
    url,
    context,
    live,
    folder,
    clock,
    warnings,
    browser: (cookie) => new Browser(url, cookie),
    async team() {
      const passwordHash = await hashed;
      const entries = ROLES.map((role) => {
        const name = role[0]!.toUpperCase() + role.slice(1);
        const email = `${role}@tidemill.example`;
        return [role, context.people.add({ name, email, role, passwordHash })] as const;
      });
      context.workshop.set('Tidemill Seed Library', false);
      return Object.fromEntries(entries) as unknown as Team;
    },
    as: (person) => new Browser(url, cookieOf(person)),
    heron: () => context.arms.add(DEMO_ARMS.heron, 'Moss', 'First description'),
    async close() {
      await new Promise<void>((resolve) => {
        http.close(() => resolve());
        http.closeAllConnections();
      });
      context.db.$client.close();
      if (!options.folder) rmSync(folder, { recursive: true, force: true });
    },
  };
}

type Method = 'get' | 'post' | 'put' | 'patch' | 'delete';

/** What a browser on our page does: same Origin, JSON, cookies kept. */
export class Browser {
  constructor(
    readonly url: string,
    public cookie?: string,
  ) {}

  async send(method: Method, path: string, body?: unknown): Promise<supertest.Response> {
    let request = supertest(this.url)[method](`/api${path}`).set('Origin', this.url);
    if (this.cookie) request = request.set('Cookie', this.cookie);
    const response = await (body === undefined
      ? request
      : request
          .set('Content-Type', 'application/json')
          .send(typeof body === 'string' ? body : JSON.stringify(body)));
    const set = (response.headers['set-cookie'] as unknown as string[] | undefined)?.[0];
    if (set) this.cookie = set.includes('Max-Age=0') ? undefined : set.split(';')[0];
    return response;
  }
  get(path: string) {
    return this.send('get', path);
  }
  post(path: string, body: unknown = {}) {
    return this.send('post', path, body);
  }
  put(path: string, body: unknown) {
    return this.send('put', path, body);
  }
  patch(path: string, body: unknown) {
    return this.send('patch', path, body);
  }
  delete(path: string) {
    return this.send('delete', path);
  }
}
