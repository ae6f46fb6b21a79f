import { describe, expect, it } from 'vitest';
import { heron } from '../../shared/arm/demo/heron';
import { planPosition } from '../../shared/motion';
import { goTo, programOf } from '../support/programs';
import {
  deg,
  energisedRig,
  jog,
  juno,
  keepFor,
  MIDDLE,
  middleRig,
  press,
  setCeiling,
} from '../support/ready-arm';
import type { Rig } from '../support/rig';

/** The last word before the link: each planted bug has to be caught by it, before or as the rule breaks. */

/** Heron in the middle of its range, base turn jogging at the easy ceiling. */
function jogging(ticks = 80): Rig {
  const rig = middleRig();
  press(rig, jog(0));
  keepFor(rig, 'h', ticks);
  return rig;
}

/** Ticks on with the hold kept until the supervisor objects. */
function objection(rig: Rig, ticks = 100): string | null {
  for (let k = 0; k < ticks; k++) {
    const before = rig.setpoints.length;
    keepFor(rig, 'h', 1, 1000 + k);
    if (rig.state.fault?.code !== 'supervisor') continue;
    // The set-point that broke the rule did not go out, and the board was told to stop by itself.
    expect(rig.setpoints.length).toBe(before);
    expect(rig.outputs.linkStop).toBe(true);
    return rig.state.fault.message;
  }
  return null;
}

/** The joint path of the move under way. */
function jointPathOf(rig: Rig) {
  const { path } = rig.controller.state.move!;
  if (path.kind !== 'joint') throw new Error('not a joint path');
  return path;
}

describe('the supervisor stops the arm before a set-point', () => {
  it('that is not a number', () => {
    const rig = jogging();
    jointPathOf(rig).from[0] = Number.NaN;
    expect(objection(rig)).toContain('not a number');
  });

  it('that jumps', () => {
    const rig = jogging();
    jointPathOf(rig).from[0]! += deg(2);
    expect(objection(rig)).toContain('faster than it may');
  });

  it('that goes on too fast, though smoothly', () => {
    const rig = jogging();
    const { move } = rig.controller.state;
    const { acceleration, jerk } = heron.joints[0]!.limits;
    move!.profile = planPosition(move!.s, move!.path.length, { velocity: 9, acceleration, jerk });
    move!.t = 0;
    expect(objection(rig, 300)).toMatch(/above the ceiling|too fast|faster than it may/);
  });

  it('that speeds up too hard', () => {
    const rig = middleRig();
    press(rig, jog(0));
    const { move } = rig.controller.state;
    move!.profile = planPosition(move!.s, move!.path.length, {
      velocity: 0.25 * heron.joints[0]!.limits.velocity,
      acceleration: 3 * heron.joints[0]!.limits.acceleration,
      jerk: 3 * heron.joints[0]!.limits.jerk,
    });
    move!.t = 0;
    expect(objection(rig)).toMatch(/jerk|harder/);
  });

  it('that stops from one tick to the next: a frozen plan', () => {
    const rig = jogging();
    rig.controller.state.move = null;
    expect(objection(rig)).toContain('Base turn would change its speed harder');
  });

  it('that could not stop before a soft limit any more', () => {
    const rig = middleRig();
    press(rig, { kind: 'joints', q: [deg(124), ...MIDDLE.slice(1)] });
    keepFor(rig, 'h', 60);
    const { state } = rig.controller;
    // A plan that means to brake only beyond the limit.
    state.move!.path.length += deg(40);
    state.move!.profile = planPosition(state.move!.s, state.move!.path.length, {
      velocity: 0.25 * heron.joints[0]!.limits.velocity,
      acceleration: heron.joints[0]!.limits.acceleration,
      jerk: heron.joints[0]!.limits.jerk,
    });
    state.move!.t = 0;
    expect(objection(rig, 3000)).toMatch(/could not stop before its soft limit/);
    const farthest = Math.max(...rig.setpoints.map(({ q }) => q[0]!));
    expect(farthest).toBeLessThan(heron.joints[0]!.limits.upper);
  });

  it('with which a point of the arm goes faster than 250 mm/s', () => {
    const rig = middleRig();
    press(rig, { kind: 'joints', q: [deg(70), deg(30), deg(-30), deg(0)] });
    // A path that thinks the arm is a tenth as long.
    const { state } = rig.controller;
    state.move!.path.pointSpeed /= 10;
    state.move!.profile = planPosition(state.move!.s, state.move!.path.length, {
      velocity: 0.25 * heron.joints[0]!.limits.velocity,
      acceleration: heron.joints[0]!.limits.acceleration / 2,
      jerk: heron.joints[0]!.limits.jerk / 2,
    });
    setCeiling(rig, 0.05);
    state.move!.profile = planPosition(state.move!.s, state.move!.path.length, {
      velocity: 0.049 * heron.joints[1]!.limits.velocity * 2,
      acceleration: heron.joints[1]!.limits.acceleration / 2,
      jerk: heron.joints[1]!.limits.jerk / 2,
    });
    state.move!.t = 0;
    expect(objection(rig, 300)).toMatch(/too fast|above the ceiling/);
  });

  it('when a ceiling was lowered and the plan takes no notice', () => {
    const rig = jogging();
    rig.controller.state.personCeiling = 0.02;
    expect(objection(rig)).toMatch(/above the ceiling|too fast/);
  });

  it('when trust was lost and the plan takes no notice', () => {
    const rig = jogging();
    rig.controller.state.trust[1] = 'doubtful';
    expect(objection(rig)).toMatch(/above the ceiling|too fast|too far/);
  });

  it('when the hold is gone and the motion goes on', () => {
    const rig = jogging();
    rig.controller.state.hold = null;
    expect(objection(rig)).toContain('without anybody’s doing');
  });

  it('when keeps stopped and nobody noticed', () => {
    const rig = jogging();
    // A hold that expires into nothing: the plan is put back as if it had not been let go.
    const { state } = rig.controller;
    const plan = structuredClone(state.move!);
    for (let k = 0; k < 40 && !rig.state.fault; k++) {
      rig.onTick = () => {
        if (!state.hold) state.move = { ...plan, t: plan.t + (k + 1) * 0.01 };
      };
      rig.tick();
    }
    expect(rig.state.fault?.code).toBe('supervisor');
  });

  it('when nobody is in control', () => {
    const rig = jogging();
    rig.controller.state.control = null;
    expect(objection(rig)).toContain('without anybody’s doing');
  });

  it('of a run that is paused but moves on', () => {
    const rig = middleRig();
    rig.send(
      juno,
      { type: 'run.start', turn: rig.state.turn, sequenceId: 's', cycles: 1 },
      programOf([goTo('1', [deg(-100), ...MIDDLE.slice(1)])]),
    );
    rig.tick(420);
    rig.controller.state.run!.phase = 'paused';
    expect(objection(rig)).toContain('without anybody’s doing');
  });

  it('for a joint without power', () => {
    const rig = jogging();
    rig.controller.state.energised[0] = false;
    expect(objection(rig)).toContain('Base turn would move without power');
  });

  it('that takes a press beyond 10° while the position is not known', () => {
    const rig = energisedRig();
    press(rig, jog(0));
    const { move } = rig.controller.state;
    move!.path.length += deg(5);
    const { velocity, acceleration, jerk } = heron.joints[0]!.limits;
    move!.profile = planPosition(move!.s, move!.path.length, {
      velocity: 0.05 * velocity,
      acceleration,
      jerk,
    });
    move!.t = 0;
    expect(objection(rig, 1000)).toContain('too far for one press');
  });

  it('that jumps right after the position was declared', () => {
    const rig = middleRig();
    rig.post(juno, { type: 'trust.declare', turn: rig.state.turn, q: MIDDLE, joints: [0] });
    rig.controller.state.q[1]! += deg(1);
    rig.tick();
    expect(rig.state.fault?.code).toBe('supervisor');
    expect(rig.state.fault?.message).toContain('Upper arm');
  });

  it('with which the gripper would snap shut', () => {
    const rig = middleRig();
    const { gripper } = rig.controller.state;
    gripper!.opening = gripper!.target = 0.2;
    expect(objection(rig)).toContain('gripper');
  });
});

describe('after the supervisor stopped the arm', () => {
  it('it stands, waits for a builder, and goes on from where the board says it is', () => {
    const rig = jogging();
    jointPathOf(rig).from[0]! += deg(2);
    rig.tick(100);
    expect(rig.state.fault).toMatchObject({ code: 'supervisor', hard: true });
    expect(rig.send(juno, { type: 'fault.acknowledge', turn: rig.state.turn })?.code).toBe('needsBuilder');
    const ines = { ...juno, role: 'builder' as const };
    expect(rig.send(ines, { type: 'fault.acknowledge', turn: rig.state.turn })).toBeNull();
    rig.tick(60);
    expect(rig.state.fault).toBeNull();
    expect(rig.telemetry.q).toEqual(rig.link.board.sample().q);
    expect(press(rig, jog(0, -1), 'again')).toBeNull();
    keepFor(rig, 'again', 50);
    expect(rig.state.motors).toBe('moving');
  });
});
