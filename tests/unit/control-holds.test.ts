import { describe, expect, it } from 'vitest';
import { heron } from '../../shared/arm/demo/heron';
import {
  deg,
  energisedRig,
  hold,
  isStill,
  jog,
  juno,
  keep,
  keepFor,
  letGo,
  MIDDLE,
  middleRig,
  moss,
  offBy,
  press,
  readyRig,
  setCeiling,
} from '../support/ready-arm';
import { actor, Rig, TICK_S } from '../support/rig';

/** Rule of motion 2: a hold dies by itself 250 ms after its last keep-alive. */
const EXPIRY_TICKS = 25;

describe('a hold', () => {
  it('moves the joint while it is kept, and the right way', () => {
    const rig = middleRig();
    const before = rig.telemetry.q[0]!;
    press(rig, jog(0, 1));
    keepFor(rig, 'h', 100);
    expect(rig.telemetry.q[0]).toBeGreaterThan(before);
    expect(rig.telemetry.q[1]).toBe(MIDDLE[1]);
  });

  it('is on its ramp to rest 250 ms after its last keep', () => {
    const rig = middleRig();
    press(rig, jog(0));
    keepFor(rig, 'h', 96);
    // The last keep went out with tick 96; what follows is silence.
    rig.tick(EXPIRY_TICKS - 2);
    expect(rig.state.motors).toBe('moving');
    rig.tick(2);
    expect(rig.state.motors).toBe('stopping');
    expect(rig.state.hold).toBeNull();
  });

  it('comes to rest when the hand lets go, exactly where the stopping shadow was', () => {
    const rig = middleRig();
    press(rig, jog(0));
    keepFor(rig, 'h', 120);
    const shadow = rig.telemetry.stopAt;
    letGo(rig);
    rig.settle();
    // Equal within 0.2°; nothing but rounding separates them here.
    for (const [i, q] of rig.telemetry.q.entries()) expect(q).toBeCloseTo(shadow[i]!, 9);
  });

  it('never resumes: keeps that come after its end move nothing', () => {
    const rig = middleRig();
    press(rig, jog(0));
    keepFor(rig, 'h', 50);
    rig.tick(40);
    rig.settle();
    const { q } = rig.telemetry;
    keepFor(rig, 'h', 100, 1000);
    expect(rig.telemetry.q).toEqual(q);
  });

  it.each([
    ['a number that does not rise', (rig: Rig, k: number) => keep(rig, 'h', k === 0 ? 7 : 3)],
    ['telemetry older than 300 ms', (rig: Rig, k: number) => keep(rig, 'h', k, juno, rig.nowS - 0.31)],
    ['telemetry from the future', (rig: Rig, k: number) => keep(rig, 'h', k, juno, rig.nowS + 1000)],
    [
      'another socket of the same person',
      (rig: Rig, k: number) => keep(rig, 'h', k, actor('Juno', 'operator', 'Juno-2')),
    ],
    ['another hold', (rig: Rig, k: number) => keep(rig, 'other', k)],
  ])('is not kept by a keep with %s', (_, send) => {
    const rig = middleRig();
    press(rig, jog(0));
    for (let k = 0; k < 40; k++) {
      send(rig, k);
      rig.tick();
    }
    expect(rig.state.hold).toBeNull();
  });

  it('dies at once with its socket', () => {
    const rig = middleRig();
    press(rig, jog(0));
    keepFor(rig, 'h', 60);
    rig.queue({ kind: 'socketClosed', socketId: juno.socketId });
    rig.tick();
    expect(rig.state.hold).toBeNull();
    expect(rig.state.motors).toBe('stopping');
  });

  it('is not ended by somebody else’s socket', () => {
    const rig = middleRig();
    press(rig, jog(0));
    letGo(rig, 'h', moss);
    expect(rig.state.hold).not.toBeNull();
  });

  it('does not start when its order was 300 ms under way: a burst after a stall moves nothing', () => {
    const rig = middleRig();
    const seenT = rig.nowS - 0.31;
    const refused = rig.send(juno, {
      type: 'hold.start',
      turn: rig.state.turn,
      holdId: 'h',
      motion: jog(0),
      seenT,
    });
    expect(refused?.code).toBe('tooLate');
    expect(isStill(rig)).toBe(true);
  });

  it('brakes ahead of the soft limit, stops on it and ends there', () => {
    const rig = middleRig();
    hold(rig, jog(1, 1));
    expect(rig.telemetry.q[1]).toBeCloseTo(heron.joints[1]!.limits.upper, 9);
    expect(rig.telemetry.blocked).toEqual({ joint: 1, reason: 'at its soft limit' });
    const worst = Math.max(...rig.setpoints.map(({ q }) => q[1]!));
    expect(worst).toBeLessThanOrEqual(heron.joints[1]!.limits.upper + 1e-12);
  });

  it('to typed values arrives there with all joints at the same moment', () => {
    const rig = readyRig();
    setCeiling(rig, 0.25);
    const from = rig.setpoints.length;
    hold(rig, { kind: 'joints', q: MIDDLE });
    expect(offBy(rig, MIDDLE)).toBeLessThan(1e-12);
    const path = rig.setpoints.slice(from).map(({ q }) => q);
    const arrived = [0, 1, 2, 3].map((i) => path.findIndex((q) => q[i] === path.at(-1)![i]));
    expect(Math.max(...arrived) - Math.min(...arrived)).toBeLessThanOrEqual(1);
  });

  it('to a pose goes where the server says the pose is', () => {
    const rig = middleRig();
    const q = [deg(20), deg(50), deg(-70), deg(-30)];
    hold(rig, { kind: 'pose', poseId: 'p' }, juno, {
      pose: { id: 'p', name: 'Over tray', q, gripper: null },
    });
    expect(offBy(rig, q)).toBeLessThan(1e-12);
  });
});

describe('while the position is not known', () => {
  it('one press moves a turning joint 10° at most', () => {
    const rig = energisedRig();
    const before = rig.telemetry.q[0]!;
    hold(rig, jog(0));
    expect(rig.telemetry.q[0]! - before).toBeCloseTo(deg(10), 9);
    expect(rig.telemetry.blocked?.reason).toContain('position is not known');
  });

  it('a joint that is known is bound to 10° and its soft limit as well, since the arm is not', () => {
    const rig = energisedRig();
    rig.send(juno, {
      type: 'trust.declare',
      turn: rig.state.turn,
      q: [deg(120), deg(60), deg(-80), 0],
      joints: [0],
    });
    hold(rig, jog(0, 1));
    expect(rig.telemetry.q[0]).toBeCloseTo(deg(125), 9);
    hold(rig, jog(0, -1));
    expect(rig.telemetry.q[0]).toBeCloseTo(deg(115), 9);
  });

  it('no press moves the farthest point of the stretched arm faster than 50 mm/s', () => {
    const rig = energisedRig();
    const before = rig.setpoints.length;
    hold(rig, jog(1));
    const path = rig.setpoints.slice(before).map(({ q }) => q[1]!);
    const fastest = Math.max(...path.slice(1).map((q, k) => Math.abs(q - path[k]!) / TICK_S));
    // Shoulder to tool point with everything in line: 0.30 + 0.28 + 0.09 m.
    expect(fastest * (0.3 + 0.28 + 0.09)).toBeLessThanOrEqual(0.05 + 1e-9);
    expect(fastest).toBeGreaterThan(0);
  });

  it.each([[{ kind: 'joints', q: MIDDLE } as const], [{ kind: 'pose', poseId: 'p' } as const]])(
    'there is no going to %j',
    (motion) => {
      const rig = energisedRig();
      const refused = press(rig, motion, 'h', juno, {
        pose: { id: 'p', name: 'Over tray', q: MIDDLE, gripper: null },
      });
      expect(refused?.code).toBe('positionUnknown');
      expect(isStill(rig)).toBe(true);
    },
  );
});

describe('a hold is refused, and nothing moves,', () => {
  const cases: [string, string, (rig: Rig) => ReturnType<Rig['send']>][] = [
    [
      'about an axis that it has not the joints for',
      'notEnoughJoints',
      (rig) => press(rig, { kind: 'jog', frame: 'base', axis: 'rx', direction: 1 }),
    ],
    [
      'of the tool by the number of a joint',
      'wrongAxis',
      (rig) => press(rig, { kind: 'jog', frame: 'tool', axis: 0, direction: 1 }),
    ],
    ['of a joint that is not there', 'noSuchJoint', (rig) => press(rig, jog(6))],
    [
      'to values beyond a soft limit',
      'beyondLimit',
      (rig) => press(rig, { kind: 'joints', q: [deg(126), ...MIDDLE.slice(1)] }),
    ],
    ['to too few values', 'wrongLength', (rig) => press(rig, { kind: 'joints', q: [0, 0] })],
    ['to a pose that is gone', 'noSuchPose', (rig) => press(rig, { kind: 'pose', poseId: 'x' })],
    ['to carry a run that is not there', 'notHeld', (rig) => press(rig, { kind: 'run' })],
    [
      'from an old turn',
      'oldTurn',
      (rig) => rig.send(juno, { type: 'hold.start', turn: rig.state.turn - 1, holdId: 'h', motion: jog(0) }),
    ],
    ['by somebody who has not got control', 'notInControl', (rig) => press(rig, jog(0), 'h', moss)],
  ];
  it.each(cases)('%s', (_, code, act) => {
    const rig = middleRig();
    const refused = act(rig);
    expect(refused?.code).toBe(code);
    expect(refused?.message).toMatch(/\.$/);
    rig.tick(20);
    expect(isStill(rig)).toBe(true);
    expect(offBy(rig, MIDDLE)).toBeLessThan(1e-12);
  });

  it('while another one is held', () => {
    const rig = middleRig();
    press(rig, jog(0));
    expect(press(rig, jog(1), 'second')?.code).toBe('moving');
  });

  it('at the soft limit', () => {
    const rig = middleRig();
    hold(rig, jog(1, 1));
    expect(press(rig, jog(1, 1))?.code).toBe('atLimit');
  });

  it('while the arm is resting', () => {
    const rig = new Rig(heron);
    rig.send(juno, { type: 'control.take' });
    expect(press(rig, jog(0))?.code).toBe('resting');
  });

  it('while nobody has control', () => {
    const rig = new Rig(heron);
    expect(press(rig, jog(0))?.code).toBe('noControl');
  });
});
