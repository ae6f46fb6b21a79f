import { describe, expect, it } from 'vitest';
import { dipper } from '../../shared/arm/demo/dipper';
import { heron } from '../../shared/arm/demo/heron';
import { wren } from '../../shared/arm/demo/wren';
import type { ArmModel } from '../../shared/arm/model';
import { compileChain, forwardKinematics, jacobian, toolAxisOffer } from '../../shared/kinematics';
import { rehearse } from '../../shared/sequence/rehearse';
import { goTo, programOf } from '../support/programs';
import {
  deg,
  energisedRig,
  hold,
  isStill,
  juno,
  keepFor,
  letGo,
  MIDDLE,
  type Motion,
  middleRig,
  press,
  setCeiling,
} from '../support/ready-arm';
import { Rig, TICK_S } from '../support/rig';

/** Bent at every joint, with room around. */
const BENT: Record<string, number[]> = {
  Heron: MIDDLE,
  Wren: [0.2, deg(95), deg(-110), 0.3, deg(-50), 0.2],
  Dipper: [0.3, deg(-60), -0.05, 0.2],
};

function bent(model: ArmModel, q = BENT[model.name]!): Rig {
  const rig = new Rig(model);
  rig.energise(juno);
  rig.declare(juno);
  setCeiling(rig, 0.25);
  hold(rig, { kind: 'joints', q });
  rig.settle(60);
  return rig;
}

const tool = (frame: 'base' | 'tool', axis: 'x' | 'y' | 'z' | 'rx' | 'ry' | 'rz', direction: 1 | -1 = 1) =>
  ({ kind: 'jog', frame, axis, direction }) satisfies Motion;

type Place = [number, number, number];
const placesOf = (model: ArmModel, path: readonly (readonly number[])[]): Place[] => {
  const chain = compileChain(model);
  return path.map((q) => [...forwardKinematics(chain, q).position] as Place);
};
const sent = (rig: Rig, from: number) => rig.setpoints.slice(from).map(({ q }) => q);
const distance = (a: Place, b: Place) => Math.hypot(a[0] - b[0], a[1] - b[1], a[2] - b[2]);

/** Farthest of the places from the straight line between two of them, m. */
function offLine(places: readonly Place[], from: Place, to: Place): number {
  const length = distance(from, to);
  const way = to.map((value, k) => (value - from[k]!) / length);
  return Math.max(
    ...places.map((p) => {
      const d = p.map((value, k) => value - from[k]!);
      const along = d.reduce((sum, value, k) => sum + value * way[k]!, 0);
      return Math.sqrt(Math.max(0, d.reduce((sum, value) => sum + value * value, 0) - along * along));
    }),
  );
}

/** Largest share of each joint's limits in what was sent, by differences between ticks. */
function used(model: ArmModel, path: readonly (readonly number[])[], ceiling: number) {
  const worst = { velocity: 0, acceleration: 0, jerk: 0 };
  for (let k = 3; k < path.length; k++)
    for (const [i, { limits }] of model.joints.entries()) {
      const [d, c, b, a] = [0, 1, 2, 3].map((back) => path[k - back]![i]!) as [
        number,
        number,
        number,
        number,
      ];
      worst.velocity = Math.max(worst.velocity, Math.abs(d - c) / TICK_S / (ceiling * limits.velocity));
      worst.acceleration = Math.max(
        worst.acceleration,
        Math.abs(d - 2 * c + b) / TICK_S ** 2 / limits.acceleration,
      );
      worst.jerk = Math.max(worst.jerk, Math.abs(d - 3 * c + 3 * b - a) / TICK_S ** 3 / limits.jerk);
    }
  return worst;
}

/** Holds until the tool has gone `metres`, then lets go and waits for rest. */
function holdFor(rig: Rig, motion: Motion, metres: number): void {
  const before = rig.telemetry.tool.position as unknown as Place;
  expect(press(rig, motion)).toBeNull();
  for (let k = 0; k < 4000; k += 5) {
    keepFor(rig, 'h', 5, k);
    if (distance(rig.telemetry.tool.position as unknown as Place, before) > metres || rig.state.hold === null)
      break;
  }
  letGo(rig);
  rig.settle(5);
}

describe('the tool, jogged', () => {
  it('goes 100 mm straight along base x on Wren: within 0.1 mm of the line, evenly within 2 %', () => {
    const rig = bent(wren);
    const from = rig.setpoints.length;
    holdFor(rig, tool('base', 'x'), 0.1);
    const path = sent(rig, from);
    const places = placesOf(wren, path);
    const start = places[0]!;
    const end = places.at(-1)!;
    expect(distance(start, end)).toBeGreaterThan(0.1);
    expect(Math.abs(end[1] - start[1])).toBeLessThan(1e-4);
    expect(Math.abs(end[2] - start[2])).toBeLessThan(1e-4);
    expect(offLine(places, start, [start[0] + 1, start[1], start[2]])).toBeLessThan(1e-4);
    const speeds = places.slice(1).map((p, k) => distance(p, places[k]!) / TICK_S);
    const top = Math.max(...speeds);
    // 250 mm/s at full ceiling, a quarter of it at easy.
    expect(top).toBeLessThan(0.0626);
    expect(top).toBeGreaterThan(0.05);
    const first = speeds.findIndex((v) => v > 0.999 * top);
    const last = speeds.findLastIndex((v) => v > 0.999 * top);
    for (const v of speeds.slice(first, last)) expect(v / top).toBeGreaterThan(0.98);
    expect((last - first) * TICK_S).toBeGreaterThan(0.5);
    const { velocity, acceleration, jerk } = used(wren, path, 0.25);
    expect(Math.max(velocity, acceleration, jerk)).toBeLessThan(1.0001);
  });

  it.each([
    ['Wren', wren, 'base', 'rz'],
    ['Wren', wren, 'tool', 'rx'],
    ['Wren', wren, 'tool', 'z'],
    ['Heron', heron, 'base', 'x'],
    ['Heron', heron, 'base', 'y'],
    ['Heron', heron, 'tool', 'x'],
    ['Heron', heron, 'tool', 'ry'],
    ['Dipper', dipper, 'base', 'y'],
    ['Dipper', dipper, 'base', 'rz'],
  ] as const)(
    '$0 keeps every limit along or about $2 $3, until it can go no farther',
    (_, model, frame, axis) => {
      for (const direction of [1, -1] as const) {
        const rig = bent(model);
        const from = rig.setpoints.length;
        hold(rig, tool(frame, axis, direction));
        const path = sent(rig, from);
        const { velocity, acceleration, jerk } = used(model, path, 0.25);
        expect(Math.max(velocity, acceleration, jerk)).toBeLessThan(1.0001);
        const places = placesOf(model, path);
        const [start] = places;
        if (axis.length === 2) for (const p of places) expect(distance(p, start!)).toBeLessThan(1e-4);
        else expect(offLine(places, start!, places.at(-1)!)).toBeLessThan(1e-4);
        // Only what stands in the way ends a hold by itself, and it is named.
        if (axis.length === 1) expect(rig.telemetry.blocked?.reason).toMatch(/soft limit|faster than it can/);
      }
    },
  );

  it('comes to a singular place without a jump and says which joint is in the way', () => {
    // Towards the stretched arm, nearly there.
    const rig = bent(wren, [0, deg(40), deg(-25), 0, deg(-20), 0]);
    const from = rig.setpoints.length;
    hold(rig, tool('base', 'x', 1));
    const path = sent(rig, from);
    const { velocity, acceleration, jerk } = used(wren, path, 0.25);
    expect(Math.max(velocity, acceleration, jerk)).toBeLessThan(1.0001);
    expect(rig.telemetry.blocked?.reason).toMatch(/faster than it can|soft limit/);
    const again = press(rig, tool('base', 'x', 1), 'again');
    expect(again?.code).toBe('atLimit');
    expect(again?.message).toContain(wren.joints[rig.telemetry.blocked!.joint]!.name);
  });

  it('lets go like every hold: at rest where the shadow said', () => {
    const rig = bent(wren);
    press(rig, tool('base', 'y'));
    keepFor(rig, 'h', 60);
    letGo(rig);
    const promise = rig.telemetry.stopAt;
    rig.settle(5);
    for (const [i, q] of rig.telemetry.q.entries()) expect(q).toBeCloseTo(promise[i]!, 9);
  });

  it('is refused while the position is not known', () => {
    const rig = energisedRig();
    expect(press(rig, tool('base', 'x'))?.code).toBe('positionUnknown');
  });

  it('is nudged by 1 and 5 mm and by 1°, and not by what takes any point farther than 20 mm', () => {
    const rig = bent(wren);
    const nudge = (axis: 'x' | 'rz', amount: number) => {
      const refused = rig.send(juno, { type: 'nudge', turn: rig.state.turn, frame: 'base', axis, amount });
      rig.settle(5);
      return refused;
    };
    const at = () => [...rig.telemetry.tool.position];
    const before = at();
    expect(nudge('x', 0.005)).toBeNull();
    expect(at()[0]! - before[0]!).toBeCloseTo(0.005, 5);
    expect(nudge('x', -0.001)).toBeNull();
    expect(at()[0]! - before[0]!).toBeCloseTo(0.004, 5);
    expect(nudge('x', 0.03)?.code).toBe('notANudge');
    expect(nudge('rz', deg(1))).toBeNull();
    expect(at()[0]! - before[0]!).toBeCloseTo(0.004, 4);
  });
});

describe('what an arm offers of its tool', () => {
  const offers = (model: ArmModel, frame: 'base' | 'tool') =>
    (['x', 'y', 'z', 'rx', 'ry', 'rz'] as const).map((axis) =>
      toolAxisOffer(compileChain(model), frame, axis),
    );

  it('six joints move and turn it freely', () => {
    expect(offers(wren, 'base')).toEqual(new Array(6).fill('rotation'));
    expect(offers(wren, 'tool')).toEqual(new Array(6).fill('rotation'));
  });

  it('four joints in an upright plane keep its tilt and turn it about the wrist only', () => {
    expect(offers(heron, 'base')).toEqual(['tilt', 'tilt', 'rotation', null, null, null]);
    expect(offers(heron, 'tool')).toEqual(['rotation', 'tilt', 'rotation', null, 'rotation', null]);
  });

  it('a SCARA turns it about the upright only', () => {
    expect(offers(dipper, 'base')).toEqual(['rotation', 'rotation', 'rotation', null, null, 'rotation']);
  });
});

describe('a step straight to a pose', () => {
  const chain = compileChain(heron);
  const A = [deg(-20), deg(60), deg(-90), deg(-40)];
  const B = [deg(25), deg(70), deg(-95), deg(-30)];
  const straight = (id: string, q: number[]) => ({ ...goTo(id, q), straight: true });
  const begin = (steps = [straight('b', B)]): Rig => {
    const rig = middleRig();
    hold(rig, { kind: 'joints', q: A });
    rig.send(
      juno,
      { type: 'run.start', turn: rig.state.turn, sequenceId: 'seq-1', cycles: 1 },
      programOf(steps),
    );
    rig.tick(330);
    return rig;
  };
  const lineOf = (rig: Rig, from: number) =>
    offLine(
      placesOf(heron, sent(rig, from)),
      [...forwardKinematics(chain, A).position] as Place,
      [...forwardKinematics(chain, B).position] as Place,
    );

  it('stays within 0.1 mm of its line through a pause, a lower ceiling and a stop', () => {
    const rig = begin();
    const from = rig.setpoints.length;
    rig.tick(40);
    rig.send(juno, { type: 'run.pause', turn: rig.state.turn });
    rig.settle(5);
    rig.send(juno, { type: 'run.resume', turn: rig.state.turn });
    rig.tick(360);
    setCeiling(rig, 0.05);
    rig.tick(50);
    rig.send(juno, { type: 'stop' });
    rig.settle(5);
    expect(isStill(rig)).toBe(true);
    expect(lineOf(rig, from)).toBeLessThan(1e-4);
    expect(used(heron, sent(rig, from), 0.25).jerk).toBeLessThan(1.0001);
  });

  it('arrives at the pose itself', () => {
    const rig = begin();
    const from = rig.setpoints.length;
    for (let k = 0; k < 3000 && rig.state.run; k++) rig.tick();
    expect(rig.records.find((r) => r.kind === 'runEnded')).toMatchObject({ how: 'finished' });
    for (const [i, q] of rig.telemetry.q.entries()) expect(q).toBeCloseTo(B[i]!, 4);
    expect(lineOf(rig, from)).toBeLessThan(1e-4);
  });

  it('waits and says why where no straight way leads there', () => {
    // Through the arm's own base.
    const rig = begin([straight('b', [deg(120), deg(60), deg(-90), deg(-40)])]);
    rig.tick(50);
    expect(rig.state.run?.phase).toBe('paused');
    expect(rig.state.run?.reason).toMatch(/^No straight way to “pose b” from here: .*\.$/);
    expect(isStill(rig)).toBe(true);
  });
});

describe('a step that goes on into the next', () => {
  const chain = compileChain(heron);
  const A = [deg(-20), deg(60), deg(-90), deg(-40)];
  const B = [deg(25), deg(70), deg(-95), deg(-30)];
  const C = [deg(25), deg(55), deg(-95), deg(-30)];
  const through = (id: string, q: number[], blend: number, straight = false) => ({
    ...goTo(id, q),
    blend,
    straight,
  });
  const run = (steps: ReturnType<typeof through>[], options: { single?: boolean } = {}): Rig => {
    const rig = middleRig();
    hold(rig, { kind: 'joints', q: A });
    rig.send(
      juno,
      { type: 'run.start', turn: rig.state.turn, sequenceId: 'seq-1', cycles: 1, ...options },
      programOf(steps),
    );
    rig.tick(300);
    return rig;
  };

  it.each([false, true])(
    'does not stand at its pose, and passes it as near as it says (straight: %s)',
    (straight) => {
      const rig = run([through('b', B, 0.02, straight), through('c', C, 0, straight)]);
      const corner = [...forwardKinematics(chain, B).position] as Place;
      const from = rig.setpoints.length;
      const paths: string[] = [];
      let nearest = Infinity;
      let slowest = Infinity;
      for (let k = 0; k < 3000 && rig.state.run; k++) {
        rig.tick();
        const step = rig.state.run?.stepPath;
        if (step && paths.at(-1) !== step) paths.push(step);
        const off = distance(rig.telemetry.tool.position as unknown as Place, corner);
        if (off > nearest) continue;
        nearest = off;
        slowest = Math.max(...rig.telemetry.qd.map(Math.abs));
      }
      expect(rig.records.find((r) => r.kind === 'runEnded')).toMatchObject({ how: 'finished' });
      expect(paths).toEqual(['b', 'c']);
      expect(nearest).toBeGreaterThan(1e-4);
      expect(nearest).toBeLessThan(0.02);
      expect(slowest).toBeGreaterThan(0.005);
      for (const [i, q] of rig.telemetry.q.entries()) expect(q).toBeCloseTo(C[i]!, 5);
      expect(Math.max(...Object.values(used(heron, sent(rig, from), 0.25)))).toBeLessThan(1.0001);
      // As long as it was rehearsed, to a tick a step.
      const seconds = rig.records.flatMap((r) => (r.kind === 'runCycle' ? [r.seconds] : []));
      const steps = [through('a', A, 0), through('b', B, 0.02, straight), through('c', C, 0, straight)];
      const { duration, stepDurations } = rehearse({ model: heron, steps, ceiling: 0.25 });
      expect(Math.abs(seconds[0]! - (duration - stepDurations.a!))).toBeLessThan(4 * TICK_S);
    },
  );

  it('stands at it when it goes one step at a time', () => {
    const rig = run([through('b', B, 0.02), through('c', C, 0)], { single: true });
    for (let k = 0; k < 2000 && rig.state.run?.phase !== 'stepWaiting'; k++) rig.tick();
    for (const [i, q] of rig.telemetry.q.entries()) expect(q).toBeCloseTo(B[i]!, 6);
  });

  it('is paused in the corner and goes on through it', () => {
    const rig = run([through('b', B, 0.03), through('c', C, 0)]);
    const corner = [...forwardKinematics(chain, B).position] as Place;
    for (let k = 0; k < 2000; k++) {
      rig.tick();
      if (distance(rig.telemetry.tool.position as unknown as Place, corner) < 0.03) break;
    }
    rig.send(juno, { type: 'run.pause', turn: rig.state.turn });
    rig.settle(5);
    rig.tick(2);
    expect(rig.state.run?.phase).toBe('paused');
    rig.send(juno, { type: 'run.resume', turn: rig.state.turn });
    for (let k = 0; k < 3000 && rig.state.run; k++) rig.tick();
    expect(rig.records.find((r) => r.kind === 'runEnded')).toMatchObject({ how: 'finished', cyclesDone: 1 });
    for (const [i, q] of rig.telemetry.q.entries()) expect(q).toBeCloseTo(C[i]!, 5);
  });
});

describe('the Jacobian that tool speeds come from', () => {
  it('agrees with the tool speed that telemetry shows', () => {
    const rig = bent(wren);
    press(rig, tool('base', 'z'));
    keepFor(rig, 'h', 80);
    const { q, qd } = rig.telemetry;
    const J = jacobian(compileChain(wren), q);
    const v = [0, 1, 2, 3, 4, 5].map((row) => qd.reduce((sum, rate, i) => sum + J[row * 6 + i]! * rate, 0));
    expect(v[2]).toBeGreaterThan(0.04);
    expect(v[2]).toBeLessThan(0.0626);
    for (const k of [0, 1, 3, 4, 5]) expect(Math.abs(v[k]!)).toBeLessThan(2e-4);
  });
});
