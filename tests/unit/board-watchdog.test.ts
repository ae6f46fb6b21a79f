import { describe, expect, it } from 'vitest';
import { VirtualBoard } from '../../firmware-sim/virtual-board';
import { heron } from '../../shared/arm/demo/heron';
import { planVelocity, sampleProfile } from '../../shared/motion';

const DT = 0.01;
const START = [0, 1, -1.4, -0.7];

/** A board with every joint energised and declared at START. */
function board(truths = {}): VirtualBoard {
  const b = new VirtualBoard({ model: heron, random: () => 0.5, ...truths });
  for (const [i, q] of START.entries()) {
    b.energise(i, q);
    b.declare(i, q);
  }
  return b;
}

/** Brings joint 0 up to speed within its limits; returns the last set-point. */
function speedUp(b: VirtualBoard, ticks = 60): number[] {
  const { acceleration, jerk } = heron.joints[0]!.limits;
  const profile = planVelocity({ position: 0, velocity: 0, acceleration: 0 }, 0.6, {
    velocity: 1,
    acceleration,
    jerk,
  });
  let q = START;
  for (let k = 1; k <= ticks; k++) {
    q = [sampleProfile(profile, k * DT).position, ...START.slice(1)];
    b.setpoint(q, null);
    b.advance(DT);
  }
  return q;
}

/** The board's own speeds of joint 0, tick by tick, until it stands. */
function rampDown(b: VirtualBoard): number[] {
  const speeds: number[] = [];
  let before = b.sample().q[0]!;
  for (let k = 0; k < 200 && (b.sample().moving || k === 0); k++) {
    b.advance(DT);
    const now = b.sample().q[0]!;
    speeds.push((now - before) / DT);
    before = now;
  }
  return speeds;
}

describe('the simulated board', () => {
  it('starts with everything off and counts at zero, wherever the arm really is', () => {
    const b = new VirtualBoard({ model: heron, random: () => 0.5 });
    const { energised, q, truth, faults, latched } = b.sample();
    expect({ energised, q, faults, latched }).toEqual({
      energised: [false, false, false, false],
      q: [0, 0, 0, 0],
      faults: [],
      latched: false,
    });
    for (const [i, { limits }] of heron.joints.entries()) {
      expect(truth[i]).toBeGreaterThan(limits.lower);
      expect(truth[i]).toBeLessThan(limits.upper);
    }
  });

  it('counts to each set-point in one tick', () => {
    const b = board();
    const q = speedUp(b, 10);
    expect(b.sample().q).toEqual(q);
  });

  it('ramps down by itself when no set-point comes, no harder than the joint may, and latches', () => {
    const b = board();
    speedUp(b);
    const speeds = rampDown(b);
    expect(b.sample()).toMatchObject({ moving: false, latched: true, faults: ['underrun'] });
    const { acceleration } = heron.joints[0]!.limits;
    for (let k = 1; k < speeds.length; k++)
      expect(speeds[k - 1]! - speeds[k]!).toBeLessThanOrEqual(acceleration * DT * (1 + 1e-9));
    // v/a at constant deceleration.
    expect(speeds.length * DT).toBeCloseTo(0.6 / acceleration, 1);
  });

  it('latches its watchdog after 250 ms of silence while it stands, and not before', () => {
    const b = board();
    b.setpoint(START, null);
    for (let k = 0; k < 24; k++) b.advance(DT);
    expect(b.sample().latched).toBe(false);
    for (let k = 0; k < 2; k++) b.advance(DT);
    expect(b.sample()).toMatchObject({ latched: true, faults: ['watchdog'] });
  });

  it('has no watchdog to trip while it rests', () => {
    const b = new VirtualBoard({ model: heron, random: () => 0.5 });
    for (let k = 0; k < 500; k++) b.advance(DT);
    expect(b.sample().latched).toBe(false);
  });

  it('stops at once when told to, past what is buffered, and takes no set-point until it is cleared', () => {
    const b = board();
    const q = speedUp(b);
    b.setpoint([q[0]! + 0.006, ...START.slice(1)], null);
    b.stop();
    const speeds = rampDown(b);
    expect(speeds[0]).toBeLessThan(0.6);
    const rest = b.sample().q;
    b.setpoint(START, null);
    b.advance(DT);
    expect(b.sample().q).toEqual(rest);
    b.clear();
    b.setpoint(rest, null);
    b.advance(DT);
    expect(b.sample()).toMatchObject({ latched: false, moving: false });
  });

  it('is not cleared while it still moves', () => {
    const b = board();
    speedUp(b);
    b.stop();
    b.advance(DT);
    b.clear();
    expect(b.sample().latched).toBe(true);
  });

  it.each([
    ['a jump', [0.2, 1, -1.4, -0.7]],
    ['not a number', [Number.NaN, 1, -1.4, -0.7]],
    ['an acceleration beyond the joint’s', [0.001, 1, -1.4, -0.7]],
  ])('refuses %s', (_, q) => {
    const b = board();
    b.setpoint(q, null);
    b.advance(DT);
    expect(b.sample()).toMatchObject({ latched: true, faults: ['limit'] });
    expect(b.sample().q).toEqual(START);
  });

  it('refuses to count beyond the mechanics of a declared joint', () => {
    const b = board();
    const { upper } = heron.joints[0]!.hardRange;
    b.declare(0, upper - 0.0001);
    let q = upper - 0.0001;
    for (let k = 1; k <= 10; k++) {
      q += 0.00003 * k;
      b.setpoint([q, ...START.slice(1)], null);
      b.advance(DT);
    }
    expect(b.sample().faults).toEqual(['limit']);
    expect(b.sample().q[0]).toBeLessThanOrEqual(upper + 0.0002);
  });

  it('ramps all axes down together', () => {
    const b = board();
    const { acceleration, jerk } = heron.joints[0]!.limits;
    const profile = planVelocity({ position: 0, velocity: 0, acceleration: 0 }, 0.4, {
      velocity: 1,
      acceleration: acceleration / 2,
      jerk: jerk / 2,
    });
    for (let k = 1; k <= 60; k++) {
      const s = sampleProfile(profile, k * DT).position;
      b.setpoint([s, START[1]! - s / 2, START[2]!, START[3]!], null);
      b.advance(DT);
    }
    b.stop();
    let before = b.sample().q;
    while (b.sample().moving) {
      b.advance(DT);
      const now = b.sample().q;
      const v0 = now[0]! - before[0]!;
      const v1 = now[1]! - before[1]!;
      if (Math.abs(v0) > 1e-9) expect(v1 / v0).toBeCloseTo(-0.5, 6);
      before = now;
    }
  });

  it('forgets its counts and drops the arm when it restarts', () => {
    const b = board();
    const before = b.sample();
    b.restart();
    const after = b.sample();
    expect(after.bootId).toBe(before.bootId + 1);
    expect(after.q).toEqual([0, 0, 0, 0]);
    expect(after.energised).toEqual([false, false, false, false]);
    expect(after.truth[0]).toBeCloseTo(before.truth[0]!, 12);
    for (let k = 0; k < 300; k++) b.advance(DT);
    expect(b.sample().truth[1]).toBeLessThan(before.truth[1]! - 0.1);
  });
});

describe('a reference switch', () => {
  it('latches the count at the edge between two ticks', () => {
    const at = -2.129301687433082; // Heron's base switch: −122°.
    const b = board();
    // Count what is true, then go slowly past the switch.
    const { truth } = b.sample();
    b.declare(0, truth[0]!);
    let q = truth[0]!;
    b.watchSwitch(0);
    expect(b.sample().referenceEdge[0]).toBeNull();
    const { velocity, acceleration, jerk } = heron.joints[0]!.limits;
    const profile = planVelocity({ position: q, velocity: 0, acceleration: 0 }, -0.2, {
      velocity,
      acceleration,
      jerk,
    });
    for (let k = 1; q > at - 0.05; k++) {
      q = sampleProfile(profile, k * DT).position;
      b.setpoint([q, ...START.slice(1)], null);
      b.advance(DT);
    }
    // Count and truth agree here, so the edge is the switch itself; ticks are 0.002 rad apart.
    expect(b.sample().referenceEdge[0]).toBeCloseTo(at, 9);
    expect(b.sample().switches[0]).toBe(true);
  });

  it('is not there on a servo', () => {
    expect(board().sample().switches[3]).toBeNull();
  });
});
