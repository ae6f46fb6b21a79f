import { cpSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { seedDemo } from '../../server/demo';
import { CEILINGS } from '../../shared/arm/trust';
import { type Browser, type PlayedServer, startPlayedServer } from '../support/played-server';

let server: PlayedServer;
let teacher: Browser;
let heronId: string;
const at = (path = '') => `/arms/${heronId}/sequences${path}`;

/** The demo workshop, seeded once (its passwords are slow to hash) and copied for each test. */
const seeded = mkdtempSync(join(tmpdir(), 'elbowroom-seeded-'));
let folder: string;
beforeAll(async () => {
  const seeding = await startPlayedServer({ folder: seeded });
  await seedDemo(seeding.context, seeded);
  await seeding.close();
});
afterAll(() => rmSync(seeded, { recursive: true, force: true }));

beforeEach(async () => {
  folder = mkdtempSync(join(tmpdir(), 'elbowroom-approval-'));
  cpSync(seeded, folder, { recursive: true });
  server = await startPlayedServer({ folder });
  teacher = server.as(server.context.people.list().find((p) => p.role === 'teacher')!);
  heronId = server.context.arms.list().find((arm) => arm.name === 'Heron')!.id;
});
afterEach(async () => {
  await server.close();
  rmSync(folder, { recursive: true, force: true });
});

const weigh = async () => (await teacher.get(at())).body[0];

describe('the demo’s sequence', () => {
  it('is approved, and rehearses without a problem at every ceiling, slower ones taking longer', async () => {
    const { id, name, approval } = await weigh();
    expect(name).toBe('Weigh one vial');
    expect(approval).toMatchObject({ by: 'Ines', holds: true, why: null });
    const durations: number[] = [];
    for (const ceiling of [CEILINGS.full, CEILINGS.easy, CEILINGS.creep]) {
      const { body } = await teacher.post(at(`/${id}/rehearse`), { ceiling });
      expect(body.problems.filter((p: { severity: string }) => p.severity === 'blocks')).toEqual([]);
      expect(body.nearestLimit.margin).toBeGreaterThan(0);
      durations.push(body.duration);
    }
    expect(durations).toEqual([...durations].sort((a, b) => a - b));
    expect(durations[2]).toBeGreaterThan(2 * durations[0]!);
  });
});

describe('an approval', () => {
  const approvalNow = async () => (await weigh()).approval;

  it('falls when the arm is changed, and holds again when the change is taken back', async () => {
    const { arms } = server.context;
    const { model } = arms.get(heronId);
    const heavier = structuredClone(model);
    heavier.joints[1]!.link.mass *= 2;
    arms.change(heronId, heavier, 1, 'Moss', '');
    expect(await approvalNow()).toMatchObject({
      holds: false,
      why: expect.stringMatching(/arm was changed/),
    });
    arms.change(heronId, model, 2, 'Moss', '');
    expect(await approvalNow()).toMatchObject({ holds: true });
  });

  it('does not fall when only words are changed', async () => {
    const { arms, poses } = server.context;
    const { model } = arms.get(heronId);
    arms.change(heronId, { ...model, note: 'Repainted.' }, 1, 'Moss', '');
    poses.relabel(heronId, poses.list(heronId)[0]!.id, { tags: ['new'] });
    expect(await approvalNow()).toMatchObject({ holds: true });
  });

  it('falls when a pose of the sequence is deleted, and comes back with it', async () => {
    const pose = server.context.poses.list(heronId).find((p) => p.name === 'On scale')!;
    await teacher.delete(`/arms/${heronId}/poses/${pose.id}`);
    expect(await approvalNow()).toMatchObject({ holds: false });
    await teacher.post(`/arms/${heronId}/poses/${pose.id}/undelete`);
    expect(await approvalNow()).toMatchObject({ holds: true });
  });

  it('stays with its version when a new one is saved, and moves when another one is approved', async () => {
    const { id } = await weigh();
    const { name, note, steps } = (await teacher.get(at(`/${id}`))).body;
    const saved = await teacher.put(at(`/${id}`), { name, note, steps: steps.slice(0, 4), baseVersion: 1 });
    expect(saved.body).toMatchObject({ version: 2, approvedVersion: 1, shownVersion: 2 });
    await teacher.post(at(`/${id}/approve`), { version: 2 });
    const versions = (await teacher.get(at(`/${id}/versions`))).body;
    expect(
      versions.map((v: { version: number; approval: unknown }) => [v.version, v.approval !== null]),
    ).toEqual([
      [2, true],
      [1, false],
    ]);
    expect((await teacher.post(at(`/${id}/withdraw`))).body).toMatchObject({
      approvedVersion: null,
      approval: null,
    });
    expect((await teacher.post(at(`/${id}/approve`), { version: 9 })).status).toBe(404);
  });

  it('is about one arm: the sequence is not there on another', async () => {
    const { id } = await weigh();
    const wren = server.context.arms.list().find((arm) => arm.name === 'Wren')!.id;
    for (const [method, path] of [
      ['get', ''],
      ['get', '/versions'],
      ['post', '/withdraw'],
      ['post', '/rehearse'],
      ['delete', ''],
    ] as const)
      expect(
        (
          await teacher.send(
            method,
            `/arms/${wren}/sequences/${id}${path}`,
            method === 'post' ? {} : undefined,
          )
        ).status,
        path,
      ).toBe(404);
    expect((await weigh()).approval.holds).toBe(true);
  });

  it('and the held first cycle are remembered by what was seen, not by the version number', async () => {
    const { id } = await weigh();
    const { steps, proven } = (await teacher.get(at(`/${id}`))).body;
    expect(proven).toBe(false);
    const approved = server.context.sequences.approved(id)!;
    server.context.sequences.setProven(heronId, approved.approval!.fingerprint, 'Juno');
    expect((await teacher.get(at(`/${id}`))).body.proven).toBe(true);
    const copy = await teacher.post(at(), { name: 'The same steps', steps });
    expect(copy.body.proven).toBe(true);
    const slower = steps.map((s: { kind: string }) => (s.kind === 'goTo' ? { ...s, speed: 'creep' } : s));
    expect((await teacher.post(at(), { name: 'Slower', steps: slower })).body.proven).toBe(false);
  });
});

describe('rehearsing', () => {
  it('a long cycle does not keep Stop waiting', async () => {
    const { poses } = server.context;
    const [one, two] = poses.list(heronId);
    const goTo = (id: string, poseId: string) => ({ id, kind: 'goTo', poseId, speed: 'creep', settle: 0 });
    const { body } = await teacher.post(at(), {
      name: 'Long',
      steps: [{ id: 'a', kind: 'again', times: 300, steps: [goTo('b', one!.id), goTo('c', two!.id)] }],
    });
    // Looking up the poses is the first thing a rehearsal does.
    const begun = new Promise<void>((resolve) => {
      const list = poses.list.bind(poses);
      poses.list = (...of) => {
        resolve();
        return list(...of);
      };
    });
    const answered: string[] = [];
    const rehearsal = teacher.post(at(`/${body.id}/rehearse`), { ceiling: CEILINGS.creep });
    await begun;
    const stop = teacher.post('/stop');
    await Promise.all([
      rehearsal.then(({ status }) => answered.push(`rehearsal ${status}`)),
      stop.then(({ status }) => answered.push(`stop ${status}`)),
    ]);
    expect(answered).toEqual(['stop 204', 'rehearsal 200']);
  });
});
