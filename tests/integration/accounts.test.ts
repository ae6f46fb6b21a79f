import { existsSync, readdirSync, readFileSync, statSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { TestServer } from '../support/test-server';

describe('a workshop without demo data', () => {
  let server: TestServer;
  beforeAll(async () => {
    server = await TestServer.start({ demo: false });
  });
  afterAll(() => server.close());
  const first = (code: string) => ({
    code,
    workshop: 'Shed',
    name: 'Bea',
    email: 'bea@shed.example',
    password: 'hinge and bracket',
  });

  it('has nobody and no password, and asks for the code that the server printed', async () => {
    expect((await server.call('GET', '/session')).body).toMatchObject({ setupNeeded: true, you: null });
    const wrong = await server.call('POST', '/setup', { body: first('0000-0000') });
    expect(wrong).toMatchObject({ status: 403, body: { code: 'wrongCode' } });
  });

  it('makes the first owner once, signs them in, and never again', async () => {
    const code = server.server.context.setupCode.shown;
    expect(code.replaceAll('-', '')).toMatch(/^[0-9a-f]{32}$/);
    const weak = await server.call('POST', '/setup', { body: { ...first(code), password: 'password123' } });
    expect(weak.body).toMatchObject({ code: 'weakPassword' });
    const made = await server.call('POST', '/setup', { body: first(code) });
    expect(made.status).toBe(201);
    const cookie = made.headers.get('set-cookie')!;
    expect(cookie).toContain('HttpOnly');
    expect(cookie).toContain('SameSite=Strict');
    expect((await server.call('GET', '/arms', { cookie: cookie.split(';')[0] })).body).toEqual([]);
    const again = await server.call('POST', '/setup', {
      body: { ...first(code), email: 'eve@shed.example' },
    });
    expect(again.body).toMatchObject({ code: 'setUpAlready' });
  });

  it('keeps its files to itself', () => {
    const database = join(server.folder, 'elbowroom.sqlite');
    expect(statSync(database).mode & 0o077).toBe(0);
    expect(existsSync(join(server.folder, 'demo-sign-ins.json'))).toBe(false);
  });
});

describe('sign-in', () => {
  let server: TestServer;
  beforeAll(async () => {
    server = await TestServer.start({ signInLimit: { perAddress: 30, perAccount: 4 } });
  });
  afterAll(() => server.close());
  const attempt = (email: string, password: string) =>
    server.call('POST', '/session', { body: { email, password } });

  it('answers an unknown address and a wrong password alike', async () => {
    const unknown = await attempt('nobody@tidemill.example', 'whatever it is');
    const wrong = await attempt('moss@tidemill.example', 'whatever it is');
    expect(unknown.status).toBe(401);
    expect(wrong.body).toEqual(unknown.body);
  });

  it('is slowed down per account, whatever the case of the address', async () => {
    const statuses: number[] = [];
    for (const email of [
      'ada@tidemill.example',
      'ADA@tidemill.example',
      'ada@tidemill.example',
      'Ada@tidemill.example',
      'ada@tidemill.example',
    ])
      statuses.push((await attempt(email, 'wrong password')).status);
    expect(statuses).toEqual([401, 401, 401, 401, 429]);
    // Somebody else is not kept out by it.
    const { email, password } = server.signIns().find((s) => s.role === 'observer')!;
    expect((await attempt(email, password)).status).toBe(200);
  });

  it('stores no password and no session token in clear', async () => {
    const { email, password } = server.signIns().find((s) => s.role === 'builder')!;
    const reply = await attempt(email, password);
    const token = reply.headers.get('set-cookie')!.split(';')[0]!.split('=')[1]!;
    server.server.context.db.$client.pragma('wal_checkpoint(TRUNCATE)');
    for (const file of readdirSync(server.folder).filter((name) => name.startsWith('elbowroom.sqlite'))) {
      const bytes = readFileSync(join(server.folder, file)).toString('latin1');
      expect(bytes.includes(token)).toBe(false);
      expect(bytes.includes(password)).toBe(false);
    }
  });
});

describe('the team', () => {
  let server: TestServer;
  let owner: string;
  beforeAll(async () => {
    server = await TestServer.start();
    owner = await server.signIn('owner');
  });
  afterAll(() => server.close());

  it('invites by mail: the link works once, for its address and role', async () => {
    const invited = await server.call('POST', '/invitations', {
      cookie: owner,
      body: { email: 'Wim@tidemill.example', name: 'Wim', role: 'teacher' },
    });
    expect(invited.status).toBe(201);
    const mails = (await server.call('GET', '/outbox', { cookie: owner })).body as {
      to: string;
      body: string;
      sent: boolean;
    }[];
    expect(mails[0]).toMatchObject({ to: 'wim@tidemill.example', sent: false });
    const token = /#(\S+)/.exec(mails[0]!.body)![1]!;
    expect(mails[0]!.body).toContain(`${server.url}/invitation#`);
    const both = await Promise.all(
      [1, 2].map(() =>
        server.call('POST', '/invitations/accept', { body: { token, password: 'hinge and bracket' } }),
      ),
    );
    expect(both.map((reply) => reply.status).sort()).toEqual([201, 410]);
    const joined = both.find((reply) => reply.status === 201)!;
    expect(joined.body).toMatchObject({ you: { email: 'wim@tidemill.example', role: 'teacher' } });
  });

  it('always keeps an owner', async () => {
    const people = (await server.call('GET', '/people', { cookie: owner })).body as {
      id: string;
      role: string;
    }[];
    const ada = people.find((p) => p.role === 'owner')!;
    for (const body of [{ role: 'builder' }, { disabled: true }])
      expect(await server.call('PATCH', `/people/${ada.id}`, { cookie: owner, body })).toMatchObject({
        status: 409,
        body: { code: 'lastOwner' },
      });
  });

  it('ends the sessions of somebody whose role changes', async () => {
    const juno = await server.signIn('operator');
    const people = (await server.call('GET', '/people', { cookie: owner })).body as {
      id: string;
      name: string;
    }[];
    const id = people.find((p) => p.name === 'Juno')!.id;
    expect(
      (await server.call('PATCH', `/people/${id}`, { cookie: owner, body: { role: 'observer' } })).status,
    ).toBe(200);
    expect((await server.call('GET', '/arms', { cookie: juno })).status).toBe(401);
  });

  it('writes an audit log whose chain shows a changed entry', () => {
    const { audit, db } = server.server.context;
    expect(audit.page().length).toBeGreaterThan(3);
    expect(audit.firstBroken()).toBeNull();
    db.$client.prepare("update audit_log set who = 'somebody else' where seq = 2").run();
    expect(audit.firstBroken()).toBe(2);
  });
});
