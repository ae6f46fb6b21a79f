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
