import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import type { StoredArm } from '../../server/db/arm-store';
import type { Trust } from '../../shared/arm/trust';
import { type Browser, type PlayedServer, startPlayedServer, type Team } from '../support/played-server';

let server: PlayedServer;
let team: Team;
let heron: StoredArm;
let teacher: Browser;
const Q = [0.2, 1.1, -1.3, -0.4];
const ALL = (trust: Trust): Trust[] => [trust, trust, trust, trust];

beforeEach(async () => {
  server = await startPlayedServer();
  team = await server.team();
  heron = server.heron();
  teacher = server.as(team.teacher);
});
afterEach(() => server.close());

const stands = (trust: Trust[] = ALL('referenced'), q = Q, opening = 0.36) =>
  server.live.says(heron.id, heron.model, { motors: 'standing', trust, q, opening });
const poses = () => `/arms/${heron.id}/poses`;

describe('capturing a pose', () => {
  it('takes the position from the controller, with its trust, and tells the pages', async () => {
    stands(['referenced', 'declared', 'referenced', 'referenced']);
    const made = await teacher.post(poses(), { tags: ['tray'] });
    expect(made.status).toBe(201);
    expect(made.body).toMatchObject({
      name: 'Pose 1',
      q: Q,
      gripper: 0.36,
      trust: 'declared',
      origin: 'captured',
      by: 'Teacher',
      tags: ['tray'],
      revision: 1,
      armRevision: 1,
      atMs: server.clock.ms,
    });
    expect(server.live.told).toEqual([`changed ${heron.id} poses`]);
    expect((await teacher.post(poses())).body.name).toBe('Pose 2');
  });

  it('takes no numbers from the page', async () => {
    stands();
    expect((await teacher.post(poses(), { name: 'Mine', q: [0, 0, 0, 0] })).status).toBe(400);
  });

  it.each(['resting', 'energising', 'moving', 'stopping', 'faulted'] as const)(
    'is refused while the motors are %s',
    async (motors) => {
      server.live.says(heron.id, heron.model, { motors, trust: ALL('referenced'), q: Q });
      expect((await teacher.post(poses())).body).toMatchObject({ status: 409, code: 'notStanding' });
    },
  );

  it('is refused while nobody looks at the arm, so that nothing of it is known', async () => {
    expect((await teacher.post(poses())).body).toMatchObject({ status: 409, code: 'notStanding' });
  });

  it.each(['unknown', 'doubtful'] as const)('is refused while one joint is %s', async (trust) => {
    stands(['referenced', 'referenced', trust, 'referenced']);
    expect((await teacher.post(poses())).body).toMatchObject({ status: 409, code: 'positionUnknown' });
    expect(server.context.poses.list(heron.id)).toEqual([]);
  });
});

describe('re-teaching', () => {
  it('adds a revision where the arm stands now, and keeps the old one', async () => {
    stands();
    const { id } = (await teacher.post(poses(), { name: 'Perch', note: 'high up' })).body;
    stands(ALL('declared'), [0.3, 1, -1, 0], 1);
    const again = await teacher.post(`${poses()}/${id}/reteach`);
    expect(again.body).toMatchObject({
      id,
      name: 'Perch',
      note: 'high up',
      revision: 2,
      q: [0.3, 1, -1, 0],
      trust: 'declared',
    });
    const revisions = (await teacher.get(`${poses()}/${id}/revisions`)).body;
    expect(revisions.map((r: { revision: number; q: number[] }) => [r.revision, r.q])).toEqual([
      [2, [0.3, 1, -1, 0]],
      [1, Q],
    ]);
    server.live.says(heron.id, heron.model, { motors: 'moving', trust: ALL('declared'), q: Q });
    expect((await teacher.post(`${poses()}/${id}/reteach`)).body.code).toBe('notStanding');
  });
});

describe('a pose', () => {
  it('of another arm is not there', async () => {
    stands();
    const { id } = (await teacher.post(poses())).body;
    const other = server.context.arms.add({ ...heron.model, name: 'Egret' }, 'Moss', '');
    for (const [method, path, body] of [
      ['get', 'revisions', undefined],
      ['post', 'reteach', {}],
      ['post', 'undelete', {}],
      ['post', 'restore', { revision: 1 }],
    ] as const)
      expect((await teacher.send(method, `/arms/${other.id}/poses/${id}/${path}`, body)).status, path).toBe(
        path === 'reteach' ? 409 : 404,
      );
    expect((await teacher.delete(`/arms/${other.id}/poses/${id}`)).status).toBe(404);
    expect((await teacher.patch(`/arms/${other.id}/poses/${id}`, { name: 'Stolen' })).status).toBe(404);
    expect(server.context.poses.get(heron.id, id)).toMatchObject({
      name: 'Pose 1',
      deleted: false,
      revision: 1,
    });
  });

  it('is typed inside the soft limits only; the answer names the joint', async () => {
    const { limits, name } = heron.model.joints[2]!;
    const at = (value: number) => teacher.post(`${poses()}/typed`, { name: 'Edge', q: [0, 1, value, 0] });
    expect((await at(limits.lower)).status).toBe(201);
    const beyond = await at(limits.lower - 0.01);
    expect(beyond.body).toMatchObject({ status: 400, code: 'beyondLimit', errors: [{ path: 'q.2' }] });
    expect(beyond.body.detail).toContain(name);
    expect((await teacher.post(`${poses()}/typed`, { name: 'Short', q: [0, 1, -1] })).body.code).toBe(
      'wrongLength',
    );
  });

  it('keeps markup, bidi controls and emoji in its name as they are', async () => {
    const name = '<b onclick="x">‮gnirts</b> 🦆';
    expect((await teacher.post(`${poses()}/typed`, { name, q: [0, 1, -1, 0] })).body.name).toBe(name);
    expect((await teacher.get(poses())).body[0].name).toBe(name);
  });
});

describe('an arm', () => {
  const change = (baseRevision = 1) => ({
    model: { ...heron.model, note: 'longer forearm' },
    baseRevision,
    note: 'measured again',
  });

  it.each(['energising', 'standing', 'moving', 'stopping', 'faulted'] as const)(
    'is neither changed nor deleted while its motors are %s',
    async (motors) => {
      server.live.says(heron.id, heron.model, { motors, trust: ALL('referenced'), q: Q });
      const put = await server.as(team.builder).put(`/arms/${heron.id}/model`, change());
      expect(put.body).toMatchObject({ status: 409, code: 'notResting' });
      expect((await server.as(team.owner).delete(`/arms/${heron.id}`)).body.code).toBe('notResting');
      expect(server.live.told).toEqual([]);
    },
  );

  it('changed by two people at once keeps one change, tells the other, and starts afresh', async () => {
    server.live.says(heron.id, heron.model, { motors: 'resting', trust: ALL('unknown'), q: Q });
    const answers = await Promise.all(
      [team.builder, team.owner].map((who) => server.as(who).put(`/arms/${heron.id}/model`, change())),
    );
    expect(answers.map((a) => a.status).sort()).toEqual([200, 409]);
    expect(answers.find((a) => a.status === 409)!.body.code).toBe('changedMeanwhile');
    expect(server.live.told).toEqual([`model changed ${heron.id}`]);
    const revisions = (await teacher.get(`/arms/${heron.id}/revisions`)).body;
    expect(revisions).toHaveLength(2);
    expect(revisions[0]).toMatchObject({ revision: 2, note: 'measured again' });
  });

  it('deleted is gone from every address, and its running process is told', async () => {
    const boss = server.as(team.owner);
    expect((await boss.delete(`/arms/${heron.id}`)).status).toBe(204);
    expect(server.live.told).toEqual([`removed ${heron.id}`]);
    for (const path of ['', '/poses', '/sequences', '/runs', '/revisions', '/poses/export'])
      expect((await boss.get(`/arms/${heron.id}${path}`)).status, path).toBe(404);
    expect((await boss.get('/arms')).body).toEqual([]);
  });

  it('is stopped by an observer, with the name of who did it', async () => {
    expect((await server.as(team.observer).post(`/arms/${heron.id}/stop`)).status).toBe(204);
    expect(server.live.told).toEqual([`stop ${heron.id} by Observer`]);
  });
});

describe('runs', () => {
  it('are shown and exported with every cycle; one that the server left open is closed at the next start', async () => {
    const { runs } = server.context;
    const started = {
      kind: 'runStarted',
      sequenceId: 's',
      sequenceName: '=Weigh',
      version: 2,
      userId: 'u',
      who: 'Juno',
      trust: 'referenced',
      cyclesAsked: 3,
      fingerprint: 'f',
    } as const;
    runs.start(heron.id, 1, { ...started, runId: 'r1', startedAtMs: 1000 });
    runs.cycle({ kind: 'runCycle', runId: 'r1', cycle: 1, seconds: 12.3456, held: true, endedAtMs: 13_346 });
    runs.cycle({ kind: 'runCycle', runId: 'r1', cycle: 2, seconds: 9.5, held: false, endedAtMs: 22_846 });
    runs.end({
      kind: 'runEnded',
      runId: 'r1',
      how: 'stopped',
      detail: 'Otis pressed Stop.',
      cyclesDone: 2,
      endedAtMs: 25_000,
    });
    runs.start(heron.id, 1, { ...started, runId: 'r2', startedAtMs: 30_000 });
    runs.closeOpen();
    runs.end({
      kind: 'runEnded',
      runId: 'r2',
      how: 'finished',
      detail: '',
      cyclesDone: 3,
      endedAtMs: 40_000,
    });
    const observer = server.as(team.observer);
    const list = (await observer.get(`/arms/${heron.id}/runs`)).body;
    expect(
      list.map((r: { id: string; how: string; cyclesDone: number }) => [r.id, r.how, r.cyclesDone]),
    ).toEqual([
      ['r2', 'server restarted', 0],
      ['r1', 'stopped', 2],
    ]);
    const run = (await observer.get(`/arms/${heron.id}/runs/r1`)).body;
    expect(run.cycles).toEqual([
      { cycle: 1, seconds: 12.3456, held: true, endedAtMs: 13_346 },
      { cycle: 2, seconds: 9.5, held: false, endedAtMs: 22_846 },
    ]);
    const csv = (await observer.get(`/arms/${heron.id}/runs/export?format=csv`)).text.split('\r\n');
    expect(csv[1]).toBe("1970-01-01T00:00:01.000Z,'=Weigh,2,Juno,referenced,stopped,1,12.346,yes");
    const file = await observer.get(`/arms/${heron.id}/runs/export?format=json`);
    expect(file.headers['content-disposition']).toMatch(/^attachment; filename="?Heron-runs\.json/);
    expect(file.body[1]).toEqual(run);
    expect(server.context.audit.page().filter((e) => e.act === 'run.export')).toHaveLength(2);
  });
});
