import { describe, expect, it } from 'vitest';
import { heron } from '../../shared/arm/demo/heron';
import { goTo, programOf } from '../support/programs';
import {
  deg,
  energisedRig,
  hold,
  jog,
  juno,
  keepFor,
  letGo,
  MIDDLE,
  middleRig,
  moss,
  press,
  readyRig,
  setCeiling,
} from '../support/ready-arm';
import type { Rig } from '../support/rig';

const declare = (rig: Rig, q: number[], joints?: number[]) =>
  rig.send(juno, { type: 'trust.declare', turn: rig.state.turn, q, joints });

describe('declaring', () => {
  it('makes steppers declared and moves the count, not the arm', () => {
    const rig = energisedRig();
    const truth = rig.telemetry.truth!;
    expect(declare(rig, MIDDLE)).toBeNull();
    rig.tick(2);
    expect(rig.state.trust).toEqual(['declared', 'declared', 'declared', 'referenced']);
    expect(rig.telemetry.q.slice(0, 3)).toEqual(MIDDLE.slice(0, 3));
    expect(rig.telemetry.truth).toEqual(truth);
  });

  it('is limited to the joints it names', () => {
    const rig = energisedRig();
    declare(rig, MIDDLE, [1]);
    expect(rig.state.trust).toEqual(['unknown', 'declared', 'unknown', 'referenced']);
  });

  it.each([
    ['values beyond the mechanics', 'outOfRange', [deg(136), ...MIDDLE.slice(1)]],
    ['too few values', 'wrongLength', [0]],
  ])('is refused for %s', (_, code, q) => {
    const rig = energisedRig();
    expect(declare(rig, q)?.code).toBe(code);
    expect(rig.state.trust[0]).toBe('unknown');
  });

  it('is refused while the arm moves', () => {
    const rig = readyRig();
    press(rig, jog(0));
    expect(declare(rig, MIDDLE)?.code).toBe('moving');
  });

  it('is refused for a resting joint, which can still be moved by hand', () => {
    const rig = middleRig();
    rig.send(juno, { type: 'motors.off', turn: rig.state.turn, dropsAccepted: [1, 2] });
    expect(declare(rig, MIDDLE)?.code).toBe('resting');
  });
});

describe('trust sets the ceiling:', () => {
  it('unknown is creep', () => {
    const rig = energisedRig();
    setCeiling(rig, 1);
    expect(rig.state.ceiling).toMatchObject({ fraction: 0.05, lowest: 'trust', toolSpeed: 0.05 });
  });

  it('declared is easy', () => {
    const rig = readyRig();
    setCeiling(rig, 1);
    expect(rig.state.ceiling).toMatchObject({ fraction: 0.25, lowest: 'trust', toolSpeed: 0.25 });
  });

  it('referenced is full', () => {
    const rig = referencedRig();
    setCeiling(rig, 1);
    expect(rig.state.ceiling).toMatchObject({ fraction: 1, toolSpeed: 0.25 });
  });
});

/** Every stepper of Heron found its switch. */
function referencedRig(options: Parameters<typeof readyRig>[0] = {}): Rig {
  const rig = readyRig(options);
  for (const joint of heron.referenceOrder) hold(rig, { kind: 'reference', joint });
  return rig;
}

describe('referencing', () => {
  it('finds the switch and puts the count right, whatever was declared', () => {
    const rig = energisedRig();
    const { truth } = rig.telemetry;
    // A person's eye is off by 4°.
    declare(
      rig,
      truth!.map((q) => q + deg(4)),
    );
    hold(rig, { kind: 'reference', joint: 0 });
    rig.tick(2);
    expect(rig.state.trust[0]).toBe('referenced');
    expect(rig.telemetry.q[0]).toBeCloseTo(rig.telemetry.truth![0]!, 6);
  });

  it('goes at creep even under a higher ceiling', () => {
    const rig = middleRig();
    setCeiling(rig, 0.25);
    press(rig, { kind: 'reference', joint: 0 });
    keepFor(rig, 'h', 150);
    expect(Math.abs(rig.telemetry.qd[0]!)).toBeLessThanOrEqual(
      0.05 * heron.joints[0]!.limits.velocity + 1e-9,
    );
    expect(Math.abs(rig.telemetry.qd[0]!)).toBeGreaterThan(0);
  });

  it('needs a hold: letting go early stops it and changes no trust', () => {
    const rig = middleRig();
    press(rig, { kind: 'reference', joint: 0 });
    keepFor(rig, 'h', 50);
    letGo(rig);
    rig.settle();
    rig.tick();
    expect(rig.state.trust[0]).toBe('declared');
    expect(rig.state.hold).toBeNull();
  });

  it('ends unknown when the switch never closes: rule 9 claims nothing that is not known', () => {
    // The joint really goes the other way, so its switch is never reached.
    const rig = middleRig({ truths: [{ reversed: true }] });
    press(rig, { kind: 'reference', joint: 0 });
    keepFor(rig, 'h', 60_000 / 8);
    for (let k = 0; k < 5000 && rig.state.hold; k++) keepFor(rig, 'h', 10, 100_000 + 10 * k);
    expect(rig.state.trust[0]).toBe('unknown');
    expect(rig.events.map(({ event }) => event.code)).toContain('switchNotFound');
  });

  it.each([
    ['a servo', 3, 'noSwitch'],
    ['a joint that is not there', 7, 'noSuchJoint'],
  ])('is refused for %s', (_, joint, code) => {
    const rig = middleRig();
    expect(press(rig, { kind: 'reference', joint })?.code).toBe(code);
  });

  it('is refused while the switch is closed already', () => {
    const rig = referencedRig();
    expect(press(rig, { kind: 'reference', joint: 0 })?.code).toBe('switchClosed');
  });
});

describe('doubt', () => {
  const doubt = (rig: Rig, joints: number[]) =>
    rig.send(moss, { type: 'trust.doubt', joints, reason: 'pushed by hand' });

  it('lowers trust, without control', () => {
    const rig = middleRig();
    doubt(rig, [1]);
    expect(rig.state.trust[1]).toBe('doubtful');
    expect(rig.state.trustNote).toContain('Moss');
    expect(rig.state.ceiling.fraction).toBe(0.05);
  });

  it('ramps down what moves and ends its hold', () => {
    const rig = middleRig();
    press(rig, jog(0));
    keepFor(rig, 'h', 60);
    doubt(rig, [0]);
    expect(rig.state.motors).toBe('stopping');
    expect(rig.state.hold).toBeNull();
    rig.settle();
    expect(rig.state.fault).toBeNull();
  });

  it('ends a run', () => {
    const rig = middleRig();
    rig.send(
      juno,
      { type: 'run.start', turn: rig.state.turn, sequenceId: 's', cycles: 1 },
      programOf([
        goTo(
          '1',
          MIDDLE.map((x) => x - 0.3),
        ),
      ]),
    );
    rig.tick(400);
    doubt(rig, [0]);
    expect(rig.state.run).toBeNull();
    expect(rig.state.motors).toBe('stopping');
  });

  it('leaves what is unknown unknown', () => {
    const rig = energisedRig();
    doubt(rig, [0]);
    expect(rig.state.trust[0]).toBe('unknown');
  });

  it('passes for a servo, which drives back to where it is told to be', () => {
    const rig = middleRig();
    doubt(rig, [3]);
    expect(rig.state.trust[3]).toBe('doubtful');
    rig.tick(60);
    expect(rig.state.trust[3]).toBe('referenced');
  });

  it('is won back by declaring', () => {
    const rig = middleRig();
    doubt(rig, [0, 1, 2]);
    declare(rig, MIDDLE);
    expect(rig.state.trust.slice(0, 3)).toEqual(['declared', 'declared', 'declared']);
  });
});
