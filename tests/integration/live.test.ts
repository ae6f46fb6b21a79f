import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { type LiveSocket, TestServer } from '../support/test-server';

let server: TestServer;
let heron: string;
beforeAll(async () => {
  server = await TestServer.start();
  heron = server.arm('Heron');
});
afterAll(() => server.close());

const q = (socket: LiveSocket) => socket.telemetry!.q as number[];
const moves = (socket: LiveSocket) => (socket.telemetry!.qd as number[]).some((v) => Math.abs(v) > 1e-6);

describe('an arm over the real socket and the real process', () => {
  let ines: LiveSocket;
  beforeAll(async () => {
    ines = await server.open(heron, await server.signIn('teacher'));
    await ines.bringUp();
  });
  afterAll(() => ines.close());

  it('moves while a hold is kept and comes to rest by itself when the keeps stop', async () => {
    const before = q(ines)[2]!;
    expect(
      await ines.command({
        type: 'hold.start',
        turn: ines.turn,
        holdId: 'h1',
        motion: { kind: 'jog', frame: 'joint', axis: 2, direction: -1 },
      }),
    ).toBeNull();
    for (let seq = 0; seq < 8; seq++) {
      const t = ines.telemetry!.t as number;
      ines.post({ type: 'hold.keep', holdId: 'h1', seq, seenT: t });
      await ines.when(() => (ines.telemetry!.t as number) > t + 0.04);
    }
    await ines.when(() => moves(ines));
    const lastKeep = ines.telemetry!.t as number;
    // Nobody keeps it any more.
    await ines.when(() => !moves(ines) && Math.abs(q(ines)[2]! - before) > 1e-3);
    // 250 ms, the ramp at creep, and the telemetry's own 20 ms grid.
    expect((ines.telemetry!.t as number) - lastKeep).toBeLessThan(0.25 + 0.25 + 0.1);
    await ines.when(() => ines.state?.hold === null);
  });

  it('shows an observer the same arm, refuses to be moved by them, and is stopped by them', async () => {
    const otis = await server.open(heron, await server.signIn('observer'));
    await otis.when(() => otis.telemetry !== null);
    expect(q(otis)).toEqual(q(otis).map((_, i) => expect.closeTo(q(ines)[i]!, 3)));
    expect(await otis.command({ type: 'control.take' })).toMatchObject({ code: 'notAllowed' });
    const jog = {
      type: 'hold.start',
      turn: otis.turn,
      holdId: 'x',
      motion: { kind: 'jog', frame: 'joint', axis: 0, direction: 1 },
    };
    expect(await otis.command(jog)).toMatchObject({ code: 'notAllowed' });

    expect(await ines.command({ ...jog, turn: ines.turn, holdId: 'h2' })).toBeNull();
    ines.post({ type: 'hold.keep', holdId: 'h2', seq: 0, seenT: ines.telemetry!.t });
    await otis.when(() => moves(otis));
    expect(await otis.command({ type: 'stop' })).toBeNull();
    await otis.when(() => !moves(otis));
    expect(otis.state).toMatchObject({ stop: { by: 'Otis' }, hold: null });
    otis.close();
  });

  it('captures a pose where the controller stands, and not what a page says', async () => {
    const cookie = await server.signIn('teacher');
    await ines.when(() => ines.state?.motors === 'standing');
    const reply = await server.call('POST', `/arms/${heron}/poses`, { cookie, body: { name: 'Here' } });
    expect(reply.status).toBe(201);
    expect((reply.body as { q: number[] }).q).toEqual(q(ines).map((v) => expect.closeTo(v, 5)));
    const lie = await server.call('POST', `/arms/${heron}/poses`, {
      cookie,
      body: { name: 'There', q: [0, 1, -1, 0] },
    });
    expect(lie.status).toBe(400);
    const other = await server.call('POST', `/arms/${server.arm('Wren')}/poses`, { cookie, body: {} });
    expect(other.body).toMatchObject({ code: 'notStanding' });
  });

  it('asks before control changes hands, and the next turn is a new one', async () => {
    const juno = await server.open(heron, await server.signIn('operator'));
    const before = ines.turn;
    expect(await juno.command({ type: 'control.take' })).toBeNull();
    await ines.when(
      () => (ines.state!.control as { request: { name: string } | null }).request?.name === 'Juno',
    );
    expect(await ines.command({ type: 'control.answer', accept: true })).toBeNull();
    await juno.when(() => (juno.state!.control as { name: string }).name === 'Juno');
    expect(juno.turn).toBeGreaterThan(before);
    expect(
      await ines.command({ type: 'nudge', turn: before, frame: 'joint', axis: 0, amount: Math.PI / 180 }),
    ).toMatchObject({
      code: 'notInControl',
    });
    expect(await juno.command({ type: 'control.handBack', turn: juno.turn })).toBeNull();
    juno.close();
    expect(await ines.command({ type: 'control.take' })).toBeNull();
    await ines.when(() => (ines.state!.control as { name: string } | null)?.name === 'Ines');
  });

  it('comes back resting with its position unknown after its process is killed in mid-move', async () => {
    const host = server.server.arms.open(heron)!;
    const first = host.pid!;
    const jog = { kind: 'jog', frame: 'joint', axis: 0, direction: 1 };
    expect(await ines.command({ type: 'hold.start', turn: ines.turn, holdId: 'h3', motion: jog })).toBeNull();
    ines.post({ type: 'hold.keep', holdId: 'h3', seq: 0, seenT: ines.telemetry!.t });
    await ines.when(() => moves(ines));
    process.kill(first, 'SIGKILL');
    await ines.until((m) => m.type === 'event' && m.code === 'armProcessEnded');
    expect(ines.state).toMatchObject({
      link: { state: 'restarting' },
      motors: 'resting',
      hold: null,
      control: null,
    });
    // The web side does not falter meanwhile.
    expect((await server.call('GET', '/health')).status).toBe(200);
    await ines.when(
      () =>
        host.pid !== undefined &&
        host.pid !== first &&
        (ines.state!.link as { state: string }).state === 'steady',
    );
    expect(ines.state).toMatchObject({
      motors: 'resting',
      run: null,
      control: null,
      energised: [false, false, false, false],
    });
    expect((ines.state!.trust as string[]).every((t) => t === 'unknown')).toBe(true);
    const t = ines.telemetry!.t as number;
    await ines.when(() => (ines.telemetry!.t as number) !== t);
    expect(moves(ines)).toBe(false);
  });
});
