import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { toCsv } from '../../server/routes/csv';
import { DEMO_ARMS } from '../../shared/arm/demo-arms';
import { TestServer } from '../support/test-server';

/** Poses, sequences and arms: what is on paper. */
let server: TestServer;
let teacher: string;
let builder: string;
let heron: string;
beforeAll(async () => {
  server = await TestServer.start();
  teacher = await server.signIn('teacher');
  builder = await server.signIn('builder');
  heron = server.arm('Heron');
});
afterAll(() => server.close());

type Any = Record<string, never> & { [field: string]: unknown };
const call = async (method: string, path: string, body?: unknown, cookie = teacher) => {
  const reply = await server.call(method, path, { cookie, body });
  return { status: reply.status, body: reply.body as Any };
};

describe('poses', () => {
  it('keep every revision, restore one as a new one, and come back after deletion', async () => {
    const made = await call('POST', `/arms/${heron}/poses/typed`, {
      name: 'Nook',
      q: [0.1, 1, -1, 0],
      gripper: 0.5,
      tags: ['a'],
    });
    expect(made.status).toBe(201);
    const { poses, arms } = server.server.context;
    const id = String(made.body.id);
    poses.reteach(heron, id, {
      q: [0.2, 1, -1, 0],
      gripper: 0.5,
      trust: 'referenced',
      origin: 'captured',
      by: 'Ines',
      armRevision: arms.get(heron).revision,
    });
    const restored = await call('POST', `/arms/${heron}/poses/${id}/restore`, { revision: 1 });
    expect(restored.body).toMatchObject({ revision: 3, q: [0.1, 1, -1, 0] });
    const revisions = await call('GET', `/arms/${heron}/poses/${id}/revisions`);
    expect((revisions.body as unknown as { revision: number }[]).map((r) => r.revision)).toEqual([3, 2, 1]);
    expect((await call('DELETE', `/arms/${heron}/poses/${id}`)).status).toBe(204);
    const list = (await call('GET', `/arms/${heron}/poses`)).body as unknown as { id: string }[];
    expect(list.some((pose) => pose.id === id)).toBe(false);
    expect((await call('POST', `/arms/${heron}/poses/${id}/undelete`, {})).status).toBe(200);
  });

  it('travel in a file and come back the same; all or none', async () => {
    const file = (await call('GET', `/arms/${heron}/poses/export?format=json`)).body;
    const count = server.server.context.poses.list(heron).length;
    expect((await call('POST', `/arms/${heron}/poses/import`, file)).status).toBe(201);
    expect(server.server.context.poses.list(heron).length).toBe(2 * count);
    const bad = structuredClone(file) as unknown as { poses: { q: number[] }[] };
    bad.poses[1]!.q[0] = 99;
    expect((await call('POST', `/arms/${heron}/poses/import`, bad)).status).toBe(400);
    expect(server.server.context.poses.list(heron).length).toBe(2 * count);
  });

  it('are written as CSV in degrees, with formulas made harmless and negative numbers left alone', async () => {
    await call('POST', `/arms/${heron}/poses/typed`, {
      name: '=cmd|1',
      q: [-0.5, 1, -1, 0],
      note: 'say "hi", then go',
    });
    const text = String((await call('GET', `/arms/${heron}/poses/export?format=csv`)).body);
    const line = text.split('\r\n').find((l) => l.startsWith("'=cmd|1"))!;
    // −0.5 rad is −28.647890° (180/π).
    expect(line).toContain(',-28.64789,');
    expect(line).toContain('"say ""hi"", then go"');
    expect(toCsv(['a'], [['+1'], [-1], ['@x'], ['plain']])).toBe("a\r\n'+1\r\n-1\r\n'@x\r\nplain\r\n");
  });
});

describe('sequences', () => {
  const steps = (poseId: string) => [{ id: 's1', kind: 'goTo', poseId, speed: 'easy', settle: 0 }];
  it('are approved for what they were: re-teaching a pose makes the approval fall', async () => {
    const pose = server.server.context.poses.add(
      heron,
      { name: 'Spot', note: '', tags: [] },
      { q: [0, 1, -1, 0], gripper: null, trust: 'declared', origin: 'typed', by: 'Ines', armRevision: 1 },
    );
    const made = await call('POST', `/arms/${heron}/sequences`, { name: 'Visit', steps: steps(pose.id) });
    const id = String(made.body.id);
    const approved = await call('POST', `/arms/${heron}/sequences/${id}/approve`, { version: 1 });
    expect(approved.body).toMatchObject({ approvedVersion: 1, approval: { by: 'Ines', holds: true } });
    server.server.context.poses.reteach(heron, pose.id, {
      q: [0.3, 1, -1, 0],
      gripper: null,
      trust: 'declared',
      origin: 'typed',
      by: 'Ines',
      armRevision: 1,
    });
    const after = await call('GET', `/arms/${heron}/sequences/${id}`);
    expect(after.body).toMatchObject({ approval: { holds: false, why: expect.stringContaining('changed') } });
  });

  it('refuse a save on top of a version the writer has not seen, and lose nothing', async () => {
    const pose = server.server.context.poses.list(heron)[0]!;
    const made = await call('POST', `/arms/${heron}/sequences`, { name: 'Two hands', steps: [] });
    const id = String(made.body.id);
    const save = (name: string, baseVersion: number) =>
      call('PUT', `/arms/${heron}/sequences/${id}`, { name, steps: steps(pose.id), baseVersion });
    expect((await save('First', 1)).status).toBe(200);
    const late = await save('Second', 1);
    expect(late).toMatchObject({ status: 409, body: { code: 'changedMeanwhile' } });
    expect((await save('Second', 2)).body).toMatchObject({ version: 3, name: 'Second' });
    expect((await call('GET', `/arms/${heron}/sequences/${id}?version=2`)).body).toMatchObject({
      name: 'First',
      shownVersion: 2,
    });
  });

  it('cannot be approved while a pose is missing', async () => {
    const made = await call('POST', `/arms/${heron}/sequences`, {
      name: 'Broken',
      steps: steps('no-such-pose'),
    });
    const id = String(made.body.id);
    expect(await call('POST', `/arms/${heron}/sequences/${id}/approve`, { version: 1 })).toMatchObject({
      status: 409,
      body: { code: 'doesNotRehearse' },
    });
    const rehearsal = await call('POST', `/arms/${heron}/sequences/${id}/rehearse`, {});
    expect(rehearsal.body.problems).toMatchObject([
      { stepId: 's1', code: 'poseMissing', severity: 'blocks' },
    ]);
  });

  it('are for operators only where they are approved', async () => {
    const operator = await server.signIn('operator');
    const socket = await server.open(heron, operator);
    const made = await call('POST', `/arms/${heron}/sequences`, {
      name: 'Not yet',
      steps: steps(server.server.context.poses.list(heron)[0]!.id),
    });
    const run = {
      type: 'run.start',
      turn: socket.turn,
      sequenceId: String(made.body.id),
      version: 1,
      cycles: 1,
    };
    expect(await socket.command(run)).toMatchObject({ code: 'notApproved' });
    socket.close();
  });
});

describe('arms', () => {
  it('are changed by revisions, never over somebody else’s', async () => {
    const made = await call('POST', '/arms', { name: 'Plover', startFrom: 'heron' }, builder);
    expect(made.status).toBe(201);
    const id = String(made.body.id);
    const model = { ...structuredClone(DEMO_ARMS.heron), name: 'Plover', note: 'changed' };
    expect((await call('PUT', `/arms/${id}/model`, { model, baseRevision: 1 }, builder)).body).toMatchObject({
      revision: 2,
    });
    expect((await call('PUT', `/arms/${id}/model`, { model, baseRevision: 1 }, builder)).status).toBe(409);
    model.joints[1]!.limits.lower = 3;
    const bad = await call('PUT', `/arms/${id}/model`, { model, baseRevision: 2 }, builder);
    expect(bad.status).toBe(400);
    expect(JSON.stringify(bad.body)).toContain('model.joints.1');
    expect((await call('GET', `/arms/${id}/revisions/1`)).body).toMatchObject({
      revision: 1,
      model: { note: DEMO_ARMS.heron.note },
    });
  });

  it('describe themselves in OpenAPI 3.1, every route of them', async () => {
    const { body } = await call('GET', '/openapi.json');
    expect(body.openapi).toBe('3.1.0');
    expect(Object.keys(body.paths as unknown as object)).toContain(
      '/api/arms/{armId}/poses/{poseId}/reteach',
    );
  });
});
