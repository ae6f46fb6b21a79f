import { describe, expect, it } from 'vitest';
import { dipper } from '../../shared/arm/demo/dipper';
import { heron } from '../../shared/arm/demo/heron';
import { GRIPPER_PACE } from '../../shared/arm/motion-rules';
import { compileChain, forwardKinematics } from '../../shared/kinematics';
import { programOf, wait } from '../support/programs';
import { deg, energisedRig, hold, jog, juno, MIDDLE, middleRig, press } from '../support/ready-arm';
import { Rig, TICK_S } from '../support/rig';

const nudge = (rig: Rig, axis: number, amount: number) =>
  rig.send(juno, { type: 'nudge', turn: rig.state.turn, frame: 'joint', axis, amount });

describe('a nudge', () => {
  it.each([0.5, 1, -1])('of %f° makes exactly that step and stands', (size) => {
    const rig = middleRig();
    expect(nudge(rig, 0, deg(size))).toBeNull();
    rig.settle();
    expect(rig.telemetry.q[0]).toBeCloseTo(deg(size), 12);
  });

  it('needs no keeping: it finishes by itself', () => {
    const rig = middleRig();
    nudge(rig, 1, deg(1));
    rig.tick(300);
    expect(rig.telemetry.q[1]).toBeCloseTo(MIDDLE[1]! + deg(1), 12);
    expect(rig.state.hold).toBeNull();
  });

  it('moves no point of the arm more than 20 mm, and says that it was made shorter', () => {
    const rig = middleRig();
    // Stretched out, 5° at the shoulder would be 48 mm at the tool.
    hold(rig, { kind: 'joints', q: [0, deg(30), deg(-25), 0] });
    const before = rig.telemetry.tool.position;
    nudge(rig, 0, deg(5));
    rig.settle();
    const after = rig.telemetry.tool.position;
    const moved = Math.hypot(after[0] - before[0], after[1] - before[1], after[2] - before[2]);
    expect(moved).toBeLessThanOrEqual(0.02);
    expect(moved).toBeGreaterThan(0.019);
    expect(rig.events.at(-1)?.event.code).toBe('nudgeShortened');
  });

  it('slides a sliding joint by millimetres', () => {
    const rig = new Rig(dipper);
    rig.energise(juno);
    rig.declare(juno);
    const before = rig.telemetry.q[2]!;
    nudge(rig, 2, 0.001);
    rig.settle();
    expect(rig.telemetry.q[2]! - before).toBeCloseTo(0.001, 12);
  });

  it('works while the position is unknown', () => {
    const rig = energisedRig();
    const before = rig.telemetry.q[0]!;
    expect(nudge(rig, 0, deg(0.5))).toBeNull();
    rig.settle();
    expect(rig.telemetry.q[0]! - before).toBeCloseTo(deg(0.5), 12);
  });

  const refused: [string, string, (rig: Rig) => ReturnType<typeof nudge>][] = [
    ['of a size that is not offered', 'notANudge', (rig) => nudge(rig, 0, deg(3))],
    ['of millimetres on a turning joint', 'notANudge', (rig) => nudge(rig, 0, 0.001)],
    ['of a joint that is not there', 'noSuchJoint', (rig) => nudge(rig, 7, deg(1))],
    [
      'about an axis that it has not the joints for',
      'notEnoughJoints',
      (rig) =>
        rig.send(juno, { type: 'nudge', turn: rig.state.turn, frame: 'tool', axis: 'rz', amount: deg(1) }),
    ],
    [
      'that was 300 ms under way',
      'tooLate',
      (rig) =>
        rig.send(juno, {
          type: 'nudge',
          turn: rig.state.turn,
          frame: 'joint',
          axis: 0,
          amount: deg(1),
          seenT: rig.nowS - 0.31,
        }),
    ],
    [
      'while a hold moves the arm',
      'moving',
      (rig) => {
        press(rig, jog(1));
        return nudge(rig, 0, deg(1));
      },
    ],
    [
      'during a run',
      'running',
      (rig) => {
        rig.send(
          juno,
          { type: 'run.start', turn: rig.state.turn, sequenceId: 's', cycles: 1 },
          programOf([wait('1', 60)]),
        );
        return nudge(rig, 0, deg(1));
      },
    ],
    [
      'that would cross a soft limit',
      'atLimit',
      (rig) => {
        hold(rig, jog(0, 1));
        return nudge(rig, 0, deg(1));
      },
    ],
  ];
  it.each(refused)('is refused %s', (_, code, act) => {
    const rig = middleRig();
    const no = act(rig);
    expect(no?.code).toBe(code);
    expect(no?.message).toMatch(/\.$/);
  });
});

describe('the gripper', () => {
  const set = (rig: Rig, opening: number) =>
    rig.send(juno, { type: 'gripper.set', turn: rig.state.turn, opening });

  it('goes where it is set, slower than its servo could, and stops there by itself', () => {
    const rig = middleRig();
    set(rig, 0.25);
    let ticks = 1;
    while (rig.state.gripper!.moving) {
      rig.tick();
      ticks++;
    }
    expect(rig.state.gripper!.opening).toBe(0.25);
    // 0.6 s from closed to open, at its pace: 0.75 of the way.
    expect(ticks * TICK_S).toBeCloseTo((0.75 * heron.gripper!.travelTime) / GRIPPER_PACE, 1);
  });

  it('is stopped by Stop', () => {
    const rig = middleRig();
    set(rig, 0);
    rig.tick(20);
    rig.send(juno, { type: 'stop' });
    const { opening } = rig.state.gripper!;
    rig.tick(50);
    expect(rig.state.gripper!.opening).toBe(opening);
    expect(opening).toBeGreaterThan(0.5);
  });

  it('is refused while it is not energised', () => {
    const rig = new Rig(heron);
    rig.send(juno, { type: 'control.take' });
    expect(set(rig, 0)?.code).toBe('resting');
  });

  it('belongs to the run during a run', () => {
    const rig = middleRig();
    rig.send(
      juno,
      { type: 'run.start', turn: rig.state.turn, sequenceId: 's', cycles: 1 },
      programOf([wait('1', 60)]),
    );
    expect(set(rig, 0)?.code).toBe('running');
  });

  it('is refused on an arm without one', () => {
    const rig = new Rig({ ...heron, gripper: null });
    rig.energise(juno);
    expect(set(rig, 0)?.code).toBe('noGripper');
  });
});

describe('telemetry', () => {
  it('shows the tool where forward kinematics puts it', () => {
    const rig = middleRig();
    const { position } = forwardKinematics(compileChain(heron), MIDDLE);
    for (const [k, x] of rig.telemetry.tool.position.entries()) expect(x).toBeCloseTo(position[k]!, 9);
  });

  it('shows no target while jogging, and the target while going somewhere', () => {
    const rig = middleRig();
    press(rig, jog(0));
    expect(rig.telemetry.target).toBeUndefined();
    rig.tick(200);
    const q = MIDDLE.map((x) => x - 0.2);
    press(rig, { kind: 'joints', q }, 'go');
    expect(rig.telemetry.target).toEqual(q);
  });
});
