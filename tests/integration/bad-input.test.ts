import { createConnection } from 'node:net';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { MAX_MESSAGE_BYTES } from '../../shared/live/client-messages';
import { type LiveSocket, TestServer } from '../support/test-server';

let server: TestServer;
let owner: string;
beforeAll(async () => {
  server = await TestServer.start();
  owner = await server.signIn('owner');
});
afterAll(() => server.close());

const json = { 'Content-Type': 'application/json' };
const post = (body: string, headers: Record<string, string> = {}) =>
  server.raw('POST', `/api/arms/${server.arm('Heron')}/poses/typed`, {
    headers: { ...json, Origin: server.url, Cookie: owner, ...headers },
    body,
  });

describe('HTTP', () => {
  it.each([
    ['half an object', '{"name":'],
    ['NaN', '{"name":"x","q":[NaN,0,0,0]}'],
    ['an overflowing number', '{"name":"x","q":[1e999,0,0,0]}'],
    ['a polluted prototype', '{"name":"x","q":[0,1,-1,0],"__proto__":{"role":"owner"}}'],
    ['an unknown field', '{"name":"x","q":[0,1,-1,0],"trust":"referenced"}'],
    ['a list', '[1,2]'],
    ['null', 'null'],
  ])('answers %s with problem details and changes nothing', async (_what, body) => {
    const before = server.server.context.poses.list(server.arm('Heron')).length;
    const reply = await post(body);
    expect(reply.status).toBe(400);
    expect(reply.headers.get('content-type')).toContain('application/problem+json');
    expect(reply.body).toMatchObject({ status: 400, code: expect.any(String), detail: expect.any(String) });
    expect(JSON.stringify(reply.body)).not.toMatch(/node_modules|\.ts:|select |insert /i);
    expect(server.server.context.poses.list(server.arm('Heron')).length).toBe(before);
  });

  it('answers 10 MB with 413', async () => {
    const reply = await post(JSON.stringify({ name: 'x'.repeat(10_000_000) }));
    expect(reply.status).toBe(413);
    expect(reply.body).toMatchObject({ code: 'tooLarge' });
  });

  it('names the joint that a typed pose takes beyond its limit', async () => {
    const reply = await post(JSON.stringify({ name: 'Far', q: [9, 1, -1, 0] }));
    expect(reply.status).toBe(400);
    expect(JSON.stringify(reply.body)).toContain('Base turn');
  });

  it.each(['../../etc/passwd', '..%2f..%2fetc', '%00', 'a'.repeat(200), "x' or 1=1 --", 'CON'])(
    'answers the id “%s” with 400 or 404',
    async (id) => {
      const reply = await server.call('GET', `/arms/${encodeURIComponent(id)}`, { cookie: owner });
      expect([400, 404]).toContain(reply.status);
    },
  );

  it('does not find a pose of another arm', async () => {
    const pose = server.server.context.poses.list(server.arm('Heron'))[0]!;
    const reply = await server.call('GET', `/arms/${server.arm('Wren')}/poses/${pose.id}/revisions`, {
      cookie: owner,
    });
    expect(reply.status).toBe(404);
  });

  it.each([
    ['a foreign origin', { Origin: 'https://evil.example' }],
    ['a null origin', { Origin: 'null' }],
    ['a look-alike origin', { Origin: 'http://localhost.evil.example' }],
    ['another port', { Origin: 'http://localhost:1' }],
  ])('refuses a change from %s', async (_what, headers) => {
    const reply = await post('{"name":"x","q":[0,1,-1,0]}', headers);
    expect(reply.status).toBe(403);
    expect(reply.body).toMatchObject({ code: 'foreignOrigin' });
  });

  it('refuses a change that carries a cookie but no origin, and one that is a form', async () => {
    const without = await server.raw('POST', '/api/stop', {
      headers: { ...json, Cookie: owner },
      body: '{}',
    });
    expect(without.status).toBe(403);
    const form = await server.raw('POST', '/api/stop', {
      headers: { Origin: server.url, Cookie: owner, 'Content-Type': 'application/x-www-form-urlencoded' },
      body: 'a=1',
    });
    expect(form.status).toBe(415);
  });

  it('does not answer to another host name (DNS rebinding)', async () => {
    const { port } = new URL(server.url);
    const text = await new Promise<string>((resolve, reject) => {
      const socket = createConnection(Number(port), '127.0.0.1');
      let heard = '';
      socket.on('data', (data) => {
        heard += String(data);
      });
      socket.on('end', () => resolve(heard));
      socket.on('error', reject);
      socket.write('GET /api/health HTTP/1.1\r\nHost: evil.example\r\nConnection: close\r\n\r\n');
    });
    expect(text).toContain('HTTP/1.1 421');
  });

  it('sends the headers that browsers need to protect the page', async () => {
    const { headers } = await server.call('GET', '/health');
    expect(headers.get('x-content-type-options')).toBe('nosniff');
    const policy = headers.get('content-security-policy') ?? '';
    for (const part of [
      "object-src 'none'",
      "base-uri 'none'",
      "frame-ancestors 'none'",
      "script-src 'self'",
    ])
      expect(policy).toContain(part);
    expect(headers.get('access-control-allow-origin')).toBeNull();
    expect(headers.get('x-powered-by')).toBeNull();
  });

  it('answers an unknown address under /api with 404 problem details', async () => {
    const reply = await server.call('GET', '/nothing', { cookie: owner });
    expect(reply.status).toBe(404);
    expect(reply.body).toMatchObject({ code: 'noSuchAddress' });
  });
});

describe('the socket', () => {
  const refusedUpgrade = async (headers: Record<string, string>, armId = server.arm('Heron')) => {
    const socket = server.socket(armId, headers);
    await socket.when(() => socket.refusedWith !== null || socket.closed !== null);
    return socket.refusedWith;
  };
  it.each([
    ['a foreign origin', 'https://evil.example'],
    ['a null origin', 'null'],
    ['a sub-domain', 'http://a.localhost:4310'],
  ])('is refused from %s', async (_what, origin) => {
    expect(await refusedUpgrade({ Origin: origin, Cookie: owner })).toBe(403);
  });
  it('is refused without an origin, without a session, with a made-up session, for no arm', async () => {
    expect(await refusedUpgrade({ Cookie: owner })).toBe(403);
    expect(await refusedUpgrade({ Origin: server.url })).toBe(401);
    expect(await refusedUpgrade({ Origin: server.url, Cookie: 'elbowroom=made-up' })).toBe(401);
    expect(await refusedUpgrade({ Origin: server.url, Cookie: owner }, 'no-such-arm')).toBe(404);
  });

  const stillServed = async (socket: LiveSocket) => expect(await socket.command({ type: 'stop' })).toBeNull();

  it('answers nonsense with a reason and goes on', async () => {
    const socket = await server.open(server.arm('Heron'), owner);
    for (const text of [
      '{',
      'null',
      '[]',
      '{"type":"fly","id":"1"}',
      '{"type":"nudge","id":"1","turn":0,"frame":"joint","axis":0,"amount":1e999}',
    ]) {
      const before = socket.messages.length;
      socket.socket.send(text);
      await socket.when(() =>
        socket.messages.slice(before).some((m) => m.type === 'refused' && m.code === 'badMessage'),
      );
    }
    await stillServed(socket);
    expect(socket.state).toMatchObject({ motors: 'resting' });
    socket.close();
  });

  it('closes on a message of 10 MB without disturbing others', async () => {
    const other = await server.open(server.arm('Heron'), owner);
    const socket = await server.open(server.arm('Heron'), owner);
    socket.socket.send('x'.repeat(10_000_000));
    await socket.when(() => socket.closed !== null);
    expect(socket.closed?.code).toBe(1009);
    await stillServed(other);
    other.close();
    expect(MAX_MESSAGE_BYTES).toBe(16 * 1024);
  });

  it('ends with the session, everywhere, at sign-out', async () => {
    const cookie = await server.signIn('teacher');
    const elsewhere = await server.signIn('teacher');
    const sockets = [
      await server.open(server.arm('Heron'), cookie),
      await server.open(server.arm('Wren'), elsewhere),
    ];
    expect((await server.call('DELETE', '/session', { cookie })).status).toBe(204);
    for (const socket of sockets) {
      await socket.when(() => socket.closed !== null);
      expect(socket.closed?.code).toBe(1008);
    }
    expect((await server.call('GET', '/arms', { cookie: elsewhere })).status).toBe(401);
  });

  it('ends when the session has run out, and moves nothing', async () => {
    const cookie = await server.signIn('operator');
    const socket = await server.open(server.arm('Dipper'), cookie);
    server.server.context.db.$client
      .prepare(
        'update sessions set expires_at_ms = 0 where person_id in (select id from people where role = ?)',
      )
      .run('operator');
    server.server.context.sessions.sweep();
    await socket.when(() => socket.closed !== null);
    expect(socket.closed?.code).toBe(1008);
    expect(await refusedUpgrade({ Origin: server.url, Cookie: cookie })).toBe(401);
  });
});
