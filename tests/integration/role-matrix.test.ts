import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { routes } from '../../server/routes';
import { MESSAGE_NEEDS } from '../../shared/live/client-messages';
import { PERMISSIONS, ROLES, type Role, roleIncludes } from '../../shared/team/roles';
import { TestServer } from '../support/test-server';

/**
 * Who may use which route, written by hand: the least role, "anyone", or "signedIn". A route that is not
 * named here fails the test, whatever its own declaration says.
 */
const ROUTES: Record<string, Role | 'anyone' | 'signedIn'> = {
  'get /health': 'anyone',
  'get /openapi.json': 'anyone',
  'get /session': 'anyone',
  'post /session': 'anyone',
  'delete /session': 'signedIn',
  'post /setup': 'anyone',
  'post /invitations/accept': 'anyone',
  'get /people': 'observer',
  'patch /people/:personId': 'owner',
  'get /invitations': 'owner',
  'post /invitations': 'owner',
  'delete /invitations/:invitationId': 'owner',
  'get /outbox': 'owner',
  'get /audit': 'owner',
  'get /workshop': 'observer',
  'patch /workshop': 'owner',
  'post /stop': 'observer',
  'get /arms': 'observer',
  'get /arms/starting-points': 'builder',
  'post /arms': 'builder',
  'get /arms/:armId': 'observer',
  'put /arms/:armId/model': 'builder',
  'get /arms/:armId/revisions': 'observer',
  'get /arms/:armId/revisions/:revision': 'observer',
  'patch /arms/:armId/settings': 'owner',
  'delete /arms/:armId': 'owner',
  'post /arms/:armId/stop': 'observer',
  'get /arms/:armId/poses': 'observer',
  'post /arms/:armId/poses': 'teacher',
  'post /arms/:armId/poses/typed': 'teacher',
  'get /arms/:armId/poses/export': 'observer',
  'post /arms/:armId/poses/import': 'teacher',
  'patch /arms/:armId/poses/:poseId': 'teacher',
  'post /arms/:armId/poses/:poseId/reteach': 'teacher',
  'get /arms/:armId/poses/:poseId/revisions': 'observer',
  'post /arms/:armId/poses/:poseId/restore': 'teacher',
  'delete /arms/:armId/poses/:poseId': 'teacher',
  'post /arms/:armId/poses/:poseId/undelete': 'teacher',
  'get /arms/:armId/sequences': 'observer',
  'post /arms/:armId/sequences': 'teacher',
  'get /arms/:armId/sequences/:sequenceId': 'observer',
  'put /arms/:armId/sequences/:sequenceId': 'teacher',
  'delete /arms/:armId/sequences/:sequenceId': 'teacher',
  'get /arms/:armId/sequences/:sequenceId/versions': 'observer',
  'post /arms/:armId/sequences/:sequenceId/approve': 'teacher',
  'post /arms/:armId/sequences/:sequenceId/withdraw': 'teacher',
  'post /arms/:armId/sequences/:sequenceId/rehearse': 'observer',
  'get /arms/:armId/runs': 'observer',
  'get /arms/:armId/runs/export': 'observer',
  'get /arms/:armId/runs/:runId': 'observer',
};

/** The same for socket messages. */
const MESSAGES: Record<string, Role> = {
  'control.take': 'operator',
  'control.answer': 'operator',
  'control.handBack': 'operator',
  'control.handOver': 'operator',
  'motors.energise': 'operator',
  'motors.off': 'operator',
  stop: 'observer',
  'fault.acknowledge': 'operator',
  'ceiling.set': 'operator',
  'trust.declare': 'operator',
  'trust.doubt': 'operator',
  'hold.start': 'operator',
  'hold.keep': 'operator',
  'hold.end': 'operator',
  nudge: 'operator',
  'gripper.set': 'operator',
  'run.start': 'operator',
  'run.pause': 'operator',
  'run.resume': 'operator',
  'run.step': 'operator',
  'run.end': 'operator',
};

/** A well-formed message of each type that does nothing harmful. */
const EXAMPLES: Record<string, object> = {
  'control.take': {},
  'control.answer': { accept: false },
  'control.handBack': { turn: 0 },
  'control.handOver': { turn: 0, toUserId: 'nobody' },
  'motors.energise': { turn: 0, servoAngles: [], cautionsRead: true },
  'motors.off': { turn: 0, dropsAccepted: [] },
  stop: {},
  'fault.acknowledge': { turn: 0 },
  'ceiling.set': { turn: 0, fraction: 0.05 },
  'trust.declare': { turn: 0, q: [0] },
  'trust.doubt': { joints: [] },
  'hold.start': { turn: 0, holdId: 'h', motion: { kind: 'jog', frame: 'joint', axis: 0, direction: 1 } },
  'hold.keep': { holdId: 'h', seq: 1, seenT: 0 },
  'hold.end': { holdId: 'h' },
  nudge: { turn: 0, frame: 'joint', axis: 0, amount: 0.1 },
  'gripper.set': { turn: 0, opening: 0.5 },
  'run.start': { turn: 0, sequenceId: 'none', cycles: 1 },
  'run.pause': { turn: 0 },
  'run.resume': { turn: 0 },
  'run.step': { turn: 0 },
  'run.end': { turn: 0 },
};
const WITHOUT_ID = new Set(['hold.keep', 'hold.end']);

let server: TestServer;
const cookies = new Map<Role, string>();
let disabledCookie = '';

beforeAll(async () => {
  server = await TestServer.start();
  for (const role of ROLES) cookies.set(role, await server.signIn(role));
  // A person who was let in and then disabled: the cookie is all that is left.
  const { context } = server.server;
  const gone = context.people.add({
    name: 'Gone',
    email: 'gone@tidemill.example',
    role: 'owner',
    passwordHash: 'none that fits',
  });
  disabledCookie = context.sessions.begin(gone.id, '').split(';')[0]!;
  const before = await server.call('GET', '/people', { cookie: disabledCookie });
  expect(before.status, 'the cookie was good once').toBe(200);
  context.people.change(gone.id, { disabled: true });
});
afterAll(() => server.close());

describe('every HTTP route × every role', () => {
  it('names every route of the table, and no other', () => {
    const actual = routes.map((route) => `${route.method} ${route.path}`).sort();
    expect(actual).toEqual(Object.keys(ROUTES).sort());
  });

  const who: (Role | 'signed-out' | 'disabled')[] = ['signed-out', 'disabled', ...ROLES];
  for (const route of routes) {
    const name = `${route.method} ${route.path}`;
    it(`${name}: from ${ROUTES[name]} up`, async () => {
      const needs = ROUTES[name]!;
      for (const person of who) {
        // Ids that do not exist: whoever is let in hears 404 or 400, never 401 or 403.
        const path = route.path.replace(/:revision/, '1').replace(/:\w+/g, 'nothing-here');
        if (name === 'delete /session' || name === 'post /stop') continue;
        const cookie =
          person === 'signed-out' ? undefined : person === 'disabled' ? disabledCookie : cookies.get(person);
        const reply = await server.call(route.method.toUpperCase(), path, {
          cookie,
          body: route.method === 'get' || route.method === 'delete' ? undefined : {},
        });
        const signedIn = person !== 'signed-out' && person !== 'disabled';
        const allowed =
          needs === 'anyone' ||
          (signedIn && (needs === 'signedIn' || roleIncludes(person as Role, needs as Role)));
        if (allowed)
          expect([200, 201, 204, 400, 404, 409], `${person}: ${reply.status}`).toContain(reply.status);
        else expect(reply.status, person).toBe(signedIn ? 403 : 401);
      }
    });
  }

  it('lets an observer stop every arm, and a signed-out person not', async () => {
    expect((await server.call('POST', '/stop', { cookie: cookies.get('observer'), body: {} })).status).toBe(
      204,
    );
    expect((await server.call('POST', '/stop', { body: {} })).status).toBe(401);
  });
});

describe('every socket message × every role', () => {
  it('names every message, and no other', () => {
    expect(Object.keys(MESSAGE_NEEDS).sort()).toEqual(Object.keys(MESSAGES).sort());
    for (const [type, permission] of Object.entries(MESSAGE_NEEDS))
      expect(PERMISSIONS[permission], type).toBe(MESSAGES[type]);
  });

  for (const role of ROLES)
    it(`${role}: is refused what the role does not allow, and nothing else for that reason`, async () => {
      const socket = await server.open(server.arm('Wren'), cookies.get(role)!);
      for (const [type, needs] of Object.entries(MESSAGES)) {
        if (WITHOUT_ID.has(type)) continue;
        // A fresh second for the rate limit is not slept for: the limit is wide enough for one of each.
        const refused = await socket.command({ type, ...EXAMPLES[type] });
        const forRole = refused?.code === 'notAllowed';
        expect(forRole, `${type}: ${refused?.code}`).toBe(!roleIncludes(role, needs));
      }
      socket.close();
    });

  it('opens no socket for a signed-out or disabled person', async () => {
    const strangers: Record<string, string>[] = [{}, { Cookie: disabledCookie }];
    for (const cookie of strangers) {
      const headers: Record<string, string> = { Origin: server.url, ...cookie };
      const socket = server.socket(server.arm('Wren'), headers);
      await socket.when(() => socket.refusedWith !== null);
      expect(socket.refusedWith).toBe(401);
    }
  });
});
