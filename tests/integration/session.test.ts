import { afterEach, describe, expect, it } from 'vitest';
import { PASSWORD, type PlayedServer, startPlayedServer } from '../support/played-server';

const DAY_MS = 24 * 3600_000;
let server: PlayedServer;
afterEach(() => server.close());

describe('signing in', () => {
  it('gives a session that lasts from request to request', async () => {
    server = await startPlayedServer();
    const { operator } = await server.team();
    const page = server.browser();
    expect((await page.get('/arms')).status).toBe(401);
    const info = await page.post('/session', { email: 'Operator@Tidemill.example', password: PASSWORD });
    expect(info.status).toBe(200);
    expect(info.body).toMatchObject({ setupNeeded: false, workshop: 'Tidemill Seed Library' });
    expect(info.body.you).toEqual({ ...operator, lastSeenMs: server.clock.ms });
    expect((await page.get('/session')).body.you.id).toBe(operator.id);
    expect((await page.get('/arms')).status).toBe(200);
  });

  it('sets a cookie that scripts cannot read and other sites do not send', async () => {
    server = await startPlayedServer();
    await server.team();
    const response = await server
      .browser()
      .post('/session', { email: 'owner@tidemill.example', password: PASSWORD });
    const cookie = response.headers['set-cookie']![0]!;
    expect(cookie).toMatch(/; HttpOnly(;|$)/);
    expect(cookie).toMatch(/; SameSite=(Lax|Strict)(;|$)/);
    expect(cookie).not.toMatch(/Secure/);
    expect(response.headers['cache-control']).toBe('no-store');
  });

  it('outside plain loopback sets a __Host- cookie for TLS only, with HSTS', async () => {
    server = await startPlayedServer({
      settings: { publicUrl: 'https://arms.tidemill.example', secure: true },
    });
    const { owner } = await server.team();
    // RFC 6265bis §4.1.3.2: __Host- needs Secure, Path=/ and no Domain.
    const cookie = server.context.sessions.begin(owner.id, '');
    expect(cookie).toMatch(/^__Host-[^=]+=[^;]+; Path=\/; /);
    expect(cookie).toMatch(/; Secure(;|$)/);
    expect(cookie).not.toMatch(/Domain/i);
    const health = await server.browser().get('/health');
    expect(health.headers['strict-transport-security']).toMatch(/max-age=\d{7,}/);
  });

  it('keeps only hashes of passwords and session tokens', async () => {
    server = await startPlayedServer();
    await server.team();
    const page = server.browser();
    await page.post('/session', { email: 'owner@tidemill.example', password: PASSWORD });
    const token = page.cookie!.split('=')[1]!;
    const rows = JSON.stringify([
      server.context.db.$client.prepare('select * from sessions').all(),
      server.context.db.$client.prepare('select * from people').all(),
      server.context.db.$client.prepare('select * from audit_log').all(),
    ]);
    expect(rows).not.toContain(token);
    expect(rows).not.toContain(PASSWORD);
  });

  it('answers the same to a wrong password, an unknown address and a disabled person', async () => {
    server = await startPlayedServer();
    const { observer } = await server.team();
    server.context.people.change(observer.id, { disabled: true });
    const answers = await Promise.all(
      [
        { email: 'owner@tidemill.example', password: 'not this one at all' },
        { email: 'nobody@tidemill.example', password: PASSWORD },
        { email: 'observer@tidemill.example', password: PASSWORD },
      ].map((body) => server.browser().post('/session', body)),
    );
    for (const answer of answers) {
      expect(answer.status).toBe(401);
      expect(answer.body).toEqual(answers[0]!.body);
      expect(answer.headers['set-cookie']).toBeUndefined();
    }
  });

  it('takes about as long for an unknown address as for a known one', async () => {
    server = await startPlayedServer();
    await server.team();
    const fastest = async (email: string) => {
      let best = Infinity;
      for (let i = 0; i < 3; i++) {
        const from = performance.now();
        await server.browser().post('/session', { email, password: 'not this one at all' });
        best = Math.min(best, performance.now() - from);
      }
      return best;
    };
    const known = await fastest('owner@tidemill.example');
    const unknown = await fastest('nobody@tidemill.example');
    // Without the hash an answer takes a few ms, with it a hundred or more.
    expect(unknown).toBeGreaterThan(known * 0.4);
    expect(known).toBeGreaterThan(unknown * 0.4);
  });

  it('is limited for each account, whoever asks', async () => {
    server = await startPlayedServer({ signInLimit: { perAddress: 100, perAccount: 3 } });
    await server.team();
    const attempt = (email: string, password = 'not this one at all') =>
      server.browser().post('/session', { email, password });
    for (let i = 0; i < 3; i++) expect((await attempt('owner@tidemill.example')).status).toBe(401);
    const refused = await attempt('OWNER@tidemill.example', PASSWORD);
    expect(refused.status).toBe(429);
    expect(refused.body.code).toBe('tooOften');
    expect((await attempt('teacher@tidemill.example', PASSWORD)).status).toBe(200);
  });

  it('is limited for each address, whatever the account, and a header cannot change that', async () => {
    server = await startPlayedServer({ signInLimit: { perAddress: 3, perAccount: 100 } });
    await server.team();
    for (let i = 0; i < 3; i++)
      await server.browser().post('/session', { email: `p${i}@tidemill.example`, password: 'x' });
    const { default: supertest } = await import('supertest');
    const refused = await supertest(server.url)
      .post('/api/session')
      .set('Origin', server.url)
      .set('X-Forwarded-For', '203.0.113.7')
      .send({ email: 'owner@tidemill.example', password: PASSWORD });
    expect(refused.status).toBe(429);
  });

  it('cannot be used up by another site’s page', async () => {
    server = await startPlayedServer({ signInLimit: { perAddress: 2, perAccount: 2 } });
    await server.team();
    const { default: supertest } = await import('supertest');
    for (let i = 0; i < 5; i++)
      await supertest(server.url)
        .post('/api/session')
        .set('Origin', 'https://elsewhere.example')
        .send({ email: 'owner@tidemill.example', password: 'x' });
    const own = await server
      .browser()
      .post('/session', { email: 'owner@tidemill.example', password: PASSWORD });
    expect(own.status).toBe(200);
  });
});

describe('a session ends', () => {
  it('everywhere at sign-out, and says so to open sockets', async () => {
    server = await startPlayedServer();
    const { teacher, operator } = await server.team();
    const [desk, phone, other] = [server.as(teacher), server.as(teacher), server.as(operator)];
    const ended: string[] = [];
    server.context.sessions.onEnded((id) => ended.push(id));
    expect((await desk.delete('/session')).status).toBe(204);
    expect(desk.cookie).toBeUndefined();
    expect(new Set(ended).size).toBe(2);
    expect((await phone.get('/arms')).status).toBe(401);
    expect((await other.get('/arms')).status).toBe(200);
  });

  it('when the person is disabled, who then cannot sign in again until enabled', async () => {
    server = await startPlayedServer();
    const { owner, operator } = await server.team();
    const [boss, page] = [server.as(owner), server.as(operator)];
    let ended = 0;
    server.context.sessions.onEnded(() => ended++);
    expect((await boss.patch(`/people/${operator.id}`, { disabled: true })).body.disabled).toBe(true);
    expect(ended).toBe(1);
    expect((await page.get('/arms')).status).toBe(401);
    const signIn = { email: operator.email, password: PASSWORD };
    expect((await server.browser().post('/session', signIn)).status).toBe(401);
    await boss.patch(`/people/${operator.id}`, { disabled: false });
    expect((await server.browser().post('/session', signIn)).status).toBe(200);
  });

  it('when the role changes, the owner’s own included, and not when nothing changes', async () => {
    server = await startPlayedServer();
    const { owner, builder } = await server.team();
    const [boss, page] = [server.as(owner), server.as(builder)];
    await boss.patch(`/people/${builder.id}`, { role: 'builder' });
    await boss.patch(`/people/${builder.id}`, {});
    expect((await page.get('/arms')).status).toBe(200);
    await boss.patch(`/people/${builder.id}`, { role: 'owner' });
    expect((await page.get('/arms')).status).toBe(401);
    const ended: string[] = [];
    server.context.sessions.onEnded((id) => ended.push(id));
    await boss.patch(`/people/${owner.id}`, { role: 'observer' });
    expect(ended).toHaveLength(1);
    expect((await boss.get('/people')).status).toBe(401);
  });

  it('a week after its last use, or a month after sign-in, and the sweep tells the sockets', async () => {
    server = await startPlayedServer();
    const { teacher, operator } = await server.team();
    const [idle, busy] = [server.as(teacher), server.as(operator)];
    const ended: string[] = [];
    server.context.sessions.onEnded((id) => ended.push(id));
    for (let day = 1; day <= 29; day++) {
      server.clock.ms += DAY_MS;
      expect((await busy.get('/session')).body.you?.id).toBe(operator.id);
      server.context.sessions.sweep();
      expect(ended.length).toBe(day > 7 ? 1 : 0);
    }
    expect((await idle.get('/arms')).status).toBe(401);
    server.clock.ms += 2 * DAY_MS;
    expect((await busy.get('/arms')).status).toBe(401);
    server.context.sessions.sweep();
    expect(ended.length).toBe(2);
  });
});

describe('finding a session', () => {
  it('refuses made-up and mangled cookies', async () => {
    server = await startPlayedServer();
    const { owner } = await server.team();
    const good = server.context.sessions.begin(owner.id, '').split(';')[0]!;
    const find = (cookie: string) => server.context.sessions.find({ cookie });
    expect(find(`theme=dark; ${good}`)?.person.role).toBe('owner');
    for (const bad of [
      `${good}x`,
      good.slice(0, -1),
      'elbowroom=',
      'elbowroom',
      '',
      good.replace('elbowroom', 'other'),
    ])
      expect(find(bad)).toBeNull();
  });

  it('takes less than a millisecond, so that it may stand before every request', async () => {
    server = await startPlayedServer();
    const { owner } = await server.team();
    const cookie = server.context.sessions.begin(owner.id, '').split(';')[0]!;
    const times = Array.from({ length: 400 }, () => {
      const from = performance.now();
      server.context.sessions.find({ cookie });
      return performance.now() - from;
    }).sort((a, b) => a - b);
    expect(times[200]).toBeLessThan(1);
  });

  it('goes on when the time of last use cannot be written, so that a full disk does not keep anybody from stopping', async () => {
    server = await startPlayedServer();
    const { observer } = await server.team();
    const page = server.as(observer);
    server.clock.ms += 3600_000;
    const client = server.context.db.$client;
    client.pragma('query_only = ON');
    const stopped = await page.post('/stop');
    client.pragma('query_only = OFF');
    expect(stopped.status).toBe(204);
    expect(server.live.told).toEqual(['stop all by Observer']);
    expect(server.warnings.join()).toMatch(/audit log could not be written/);
  });
});
