import { describe, expect, it } from 'vitest';
import { heron } from '../../shared/arm/demo/heron';
import { hold, jog, juno, keepFor, middleRig, press, readyRig, setCeiling } from '../support/ready-arm';
import { type Rig, TICK_S } from '../support/rig';

const BASE_SPEED = heron.joints[0]!.limits.velocity;

/** Joint 0's speed in each tick from set-points, rad/s. */
function speeds(rig: Rig, from: number): number[] {
  const path = rig.setpoints.slice(from).map(({ q }) => q[0]!);
  return path.slice(1).map((q, k) => Math.abs(q - path[k]!) / TICK_S);
}

describe('the ceiling', () => {
  it('bounds every joint’s speed to its share', () => {
    const rig = middleRig();
    setCeiling(rig, 0.1);
    const from = rig.setpoints.length;
    press(rig, jog(0));
    keepFor(rig, 'h', 150);
    expect(Math.max(...speeds(rig, from))).toBeLessThanOrEqual(0.1 * BASE_SPEED + 1e-9);
    expect(Math.max(...speeds(rig, from))).toBeGreaterThan(0.09 * BASE_SPEED);
  });

  it('may be lowered in motion, which takes a ramp and no fault', () => {
    const rig = middleRig();
    press(rig, jog(0));
    keepFor(rig, 'h', 100);
    const before = Math.abs(rig.telemetry.qd[0]!);
    expect(setCeiling(rig, 0.05)).toBeNull();
    keepFor(rig, 'h', 60, 1000);
    const after = Math.abs(rig.telemetry.qd[0]!);
    expect(before).toBeGreaterThan(0.06 * BASE_SPEED);
    expect(after).toBeLessThanOrEqual(0.05 * BASE_SPEED + 1e-9);
    expect(after).toBeGreaterThan(0);
    expect(rig.state.fault).toBeNull();
  });

  it.each([1, 2, 3, 4, 6, 8, 10, 15, 20])('may be lowered %i ticks into speeding up', (ticks) => {
    const rig = middleRig();
    press(rig, jog(0));
    keepFor(rig, 'h', ticks);
    setCeiling(rig, 0.01);
    keepFor(rig, 'h', 100, 1000);
    expect(rig.state.fault).toBeNull();
    expect(Math.abs(rig.telemetry.qd[0]!)).toBeCloseTo(0.01 * BASE_SPEED, 9);
  });

  it('is not raised while the arm moves', () => {
    const rig = readyRig();
    press(rig, jog(0));
    expect(setCeiling(rig, 0.25)?.code).toBe('moving');
    expect(rig.state.ceiling.person).toBe(0.05);
  });
});

describe('people clear', () => {
  /** Referenced by hand of the test: full speed is possible. */
  function referenced(): Rig {
    const rig = readyRig();
    for (const joint of heron.referenceOrder) hold(rig, { kind: 'reference', joint });
    return rig;
  }

  it('lifts the speed limit of the arm’s points at exactly 100 %', () => {
    const rig = referenced();
    expect(setCeiling(rig, 1, true)).toBeNull();
    expect(rig.state.ceiling).toMatchObject({ fraction: 1, peopleClear: true, toolSpeed: null });
  });

  it('is refused with anything less', () => {
    const rig = referenced();
    expect(setCeiling(rig, 0.99, true)?.code).toBe('notFull');
    expect(rig.state.ceiling.toolSpeed).toBeLessThanOrEqual(0.25);
  });

  it('changes nothing while trust holds the arm below full', () => {
    const rig = middleRig();
    setCeiling(rig, 1, true);
    expect(rig.state.ceiling.toolSpeed).toBe(0.25);
  });

  it('may be taken back in motion: the arm slows to 250 mm/s', () => {
    const rig = referenced();
    setCeiling(rig, 1, true);
    press(rig, { kind: 'joints', q: [1.5, 0.3, -0.5, 0] });
    keepFor(rig, 'h', 120);
    setCeiling(rig, 1, false);
    keepFor(rig, 'h', 60, 1000);
    const tool = rig.telemetry.tool.position;
    keepFor(rig, 'h', 1, 2000);
    const next = rig.telemetry.tool.position;
    const speed = Math.hypot(next[0] - tool[0], next[1] - tool[1], next[2] - tool[2]) / TICK_S;
    // ISO 10218-1: reduced speed is 250 mm/s.
    expect(speed).toBeLessThanOrEqual(0.25);
    expect(rig.state.fault).toBeNull();
  });

  it('ends with the turn', () => {
    const rig = referenced();
    setCeiling(rig, 1, true);
    rig.send(juno, { type: 'control.handBack', turn: rig.state.turn });
    rig.send(juno, { type: 'control.take' });
    expect(rig.state.ceiling.peopleClear).toBe(false);
  });
});
