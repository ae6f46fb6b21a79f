import { vi } from 'vitest';
import type { Arm, Pose, Sequence } from '../../shared/api/resources';
import { DEMO_ARMS } from '../../shared/arm/demo-arms';
import { CEILINGS } from '../../shared/arm/trust';
import { degToRad } from '../../shared/arm/units';
import type { StateMessage, TelemetryMessage } from '../../shared/live/server-messages';
import type { Step } from '../../shared/sequence/steps';
import type { Role } from '../../shared/team/roles';
import { connection } from '../../src/live/connection';
import { emptyLive, setTelemetry, useLiveStore } from '../../src/live/live-store';

/** A page beside Heron: what the arm says, and what the page sends to it. */
export const heron: Arm = {
  id: 'heron',
  name: 'Heron',
  note: '',
  jointCount: 4,
  revision: 1,
  updatedAtMs: 0,
  unattended: false,
  motors: 'standing',
  inControl: 'Ines',
  model: DEMO_ARMS.heron,
};
const START = [0, 100, -125, -65].map(degToRad);

type Sent = { type: string; [field: string]: unknown };

export const armState = (change: Partial<StateMessage> = {}): StateMessage => ({
  type: 'state',
  t: 1,
  link: { kind: 'builtIn', state: 'steady', answerMs: 10 },
  motors: 'standing',
  motorsSinceMs: 0,
  motorsBy: 'Ines',
  energised: [true, true, true, true],
  trust: ['referenced', 'referenced', 'referenced', 'referenced'],
  trustNote: '',
  trustSinceMs: 0,
  ceiling: {
    fraction: CEILINGS.easy,
    person: CEILINGS.easy,
    trust: 1,
    firstPower: 1,
    lowest: 'person',
    peopleClear: false,
    toolSpeed: 0.25,
  },
  turn: 3,
  control: { userId: 'me', name: 'Ines', sinceMs: 0, away: false, request: null },
  fault: null,
  stop: null,
  hold: null,
  run: null,
  wouldDrop: [],
  gripper: { opening: 1, target: 1, energised: true, moving: false },
  inputs: [],
  outputs: [],
  ...change,
});

const telemetry = (q: readonly number[]): TelemetryMessage => ({
  type: 'telemetry',
  t: 1,
  q: [...q],
  qd: q.map(() => 0),
  stopAt: [...q],
  torqueUsed: q.map(() => 0.1),
  tool: { position: [0, 0, 0], rotation: [1, 0, 0, 0, 1, 0, 0, 0, 1] },
});

/** Puts a person of this role beside a live arm; returns everything the page sends on its socket. */
export function besideHeron(role: Role, change: Partial<StateMessage> = {}, q = START): Sent[] {
  const sent: Sent[] = [];
  vi.spyOn(connection, 'isOpen', 'get').mockReturnValue(true);
  vi.spyOn(connection, 'post').mockImplementation((message) => {
    sent.push(message as Sent);
    return true;
  });
  vi.spyOn(connection, 'send').mockImplementation((command) => {
    sent.push(command as Sent);
    return Promise.resolve({ ok: true });
  });
  vi.spyOn(document, 'hasFocus').mockReturnValue(true);
  useLiveStore.setState({
    ...emptyLive,
    armId: 'heron',
    connection: 'live',
    hello: {
      type: 'hello',
      protocol: 1,
      arm: { id: 'heron', revision: 1, model: heron.model },
      you: { userId: 'me', name: 'Ines', role, mayControl: role !== 'observer' },
    },
    state: armState(change),
    telemetryAtMs: performance.now(),
  });
  setTelemetry(telemetry(q));
  return sent;
}

export const changeState = (change: Partial<StateMessage>): void =>
  useLiveStore.setState({ state: armState(change) });

export const poseOf = (id: string, name: string, degrees: number[], change: Partial<Pose> = {}): Pose => ({
  id,
  name,
  note: '',
  tags: [],
  revision: 1,
  q: degrees.map(degToRad),
  gripper: 1,
  trust: 'referenced',
  origin: 'captured',
  by: 'Ines',
  atMs: 0,
  armRevision: 1,
  deleted: false,
  ...change,
});

export const sequenceOf = (steps: Step[], change: Partial<Sequence> = {}): Sequence => ({
  id: 'seq',
  name: 'Weigh one vial',
  note: '',
  version: 4,
  shownVersion: 4,
  stepCount: steps.length,
  updatedAtMs: 0,
  by: 'Ines',
  approvedVersion: null,
  approval: null,
  proven: true,
  steps,
  ...change,
});

export const emptyRehearsal = {
  duration: 2,
  ceiling: 1,
  stepDurations: {},
  problems: [],
  nearestLimit: null,
  highestTorque: null,
  highestSpeed: 0,
  plot: { t: [], torqueUsed: [] },
};
