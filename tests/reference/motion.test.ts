import { describe, expect, it } from 'vitest';
import {
  type AxisLimits,
  type AxisState,
  type Profile,
  planPosition,
  planSynchronised,
  planVelocity,
  sampleProfile,
} from '../../shared/motion';
import doubleS from './double-s-examples.json';
import positions from './traj-position-1.json';
import synchronised from './traj-sync.json';
import velocities from './traj-velocity-1.json';

// Source of the traj-* files: see README.md in this folder.
const DURATION_TOLERANCE_S = 1e-6;
const LIMIT_SLACK = 1e-9;

/** Largest speed, acceleration and jerk at 400 samples, as shares of the limits. */
function worstShares(
  profile: Profile,
  limits: AxisLimits,
): { velocity: number; acceleration: number; jerk: number } {
  const out: AxisState = { position: 0, velocity: 0, acceleration: 0 };
  const worst = { velocity: 0, acceleration: 0, jerk: 0 };
  for (let k = 0; k <= 400; k++) {
    sampleProfile(profile, (profile.duration * k) / 400, out);
    worst.velocity = Math.max(worst.velocity, Math.abs(out.velocity) / limits.velocity);
    worst.acceleration = Math.max(worst.acceleration, Math.abs(out.acceleration) / limits.acceleration);
  }
  for (const phase of profile.phases) worst.jerk = Math.max(worst.jerk, Math.abs(phase.jerk) / limits.jerk);
  return worst;
}

/** The last state by walking the phases, so that the pinned end cannot hide an error. */
function walked(profile: Profile, start: AxisState): AxisState {
  let { position: p, velocity: v, acceleration: a } = start;
  for (const { duration: t, jerk: j } of profile.phases) {
    p += t * (v + t * (a / 2 + (t * j) / 6));
    v += t * (a + (t * j) / 2);
    a += t * j;
  }
  return { position: p, velocity: v, acceleration: a };
}

describe('planPosition against an independent time-optimal solver', () => {
  for (const category of ['rest', 'moving', 'state', 'overshoot'] as const) {
    const cases = positions.cases.filter((c) => c.cat === category);
    it(`takes the shortest time in all ${cases.length} cases of “${category}” and ends at rest at the target`, () => {
      expect(cases.length).toBeGreaterThanOrEqual(20);
      for (const c of cases) {
        const start = { position: c.p0, velocity: c.v0, acceleration: c.a0 };
        const limits = { velocity: c.vmax, acceleration: c.amax, jerk: c.jmax };
        const profile = planPosition(start, c.pT, limits);
        const tolerance = category === 'overshoot' ? 0.01 * c.T : DURATION_TOLERANCE_S * Math.max(1, c.T);
        expect(Math.abs(profile.duration - c.T)).toBeLessThanOrEqual(tolerance);
        const end = walked(profile, start);
        expect(Math.abs(end.position - c.pT)).toBeLessThan(1e-9);
        expect(Math.abs(end.velocity)).toBeLessThan(1e-9);
        expect(Math.abs(end.acceleration)).toBeLessThan(1e-7);
        const worst = worstShares(profile, limits);
        expect(worst.jerk).toBeLessThanOrEqual(1 + LIMIT_SLACK);
        expect(worst.acceleration).toBeLessThanOrEqual(Math.max(1, Math.abs(c.a0) / c.amax) + LIMIT_SLACK);
        // The unavoidable excess: letting the start acceleration off at full jerk.
        const unavoidable =
          Math.abs(c.v0) + (c.a0 * c.v0 > 0 || category === 'overshoot' ? c.a0 ** 2 / (2 * c.jmax) : 0);
        expect(worst.velocity).toBeLessThanOrEqual(Math.max(1, unavoidable / c.vmax) + LIMIT_SLACK);
      }
    });
  }
});

describe('planVelocity against an independent time-optimal solver', () => {
  it('takes the shortest time and covers the same distance', () => {
    expect(velocities.cases.length).toBe(200);
    for (const c of velocities.cases) {
      const start = { position: 0, velocity: c.v0, acceleration: c.a0 };
      const limits = { velocity: 1e6, acceleration: c.amax, jerk: c.jmax };
      const profile = planVelocity(start, c.vT, limits);
      expect(Math.abs(profile.duration - c.T)).toBeLessThanOrEqual(DURATION_TOLERANCE_S);
      expect(Math.abs(walked(profile, start).position - c.dp)).toBeLessThanOrEqual(
        1e-6 * Math.max(1, Math.abs(c.dp)),
      );
    }
  });
});

describe('planSynchronised', () => {
  it('brings all axes to rest at their targets at the largest of their own shortest times', () => {
    expect(synchronised.cases.length).toBe(50);
    for (const c of synchronised.cases) {
      const starts = c.p0.map((position, i) => ({ position, velocity: c.v0[i]!, acceleration: c.a0[i]! }));
      const limits = c.p0.map((_, i) => ({
        velocity: c.vmax[i]!,
        acceleration: c.amax[i]!,
        jerk: c.jmax[i]!,
      }));
      const profiles = planSynchronised(starts, c.pT, limits);
      for (const [i, profile] of profiles.entries()) {
        expect(Math.abs(profile.duration - c.T)).toBeLessThanOrEqual(DURATION_TOLERANCE_S);
        expect(Math.abs(walked(profile, starts[i]!).position - c.pT[i]!)).toBeLessThan(1e-9);
        const total = profile.phases.reduce((sum, phase) => sum + phase.duration, 0);
        if (profile.phases.length > 0)
          expect(Math.abs(total - c.T)).toBeLessThanOrEqual(DURATION_TOLERANCE_S);
      }
    }
  });
});

// L. Biagiotti, C. Melchiorri, Trajectory Planning for Automatic Machines and Robots, Springer 2008, ch. 3.
describe('worked double-S examples', () => {
  for (const example of doubleS.examples.filter((e) => e.v1 === 0))
    it(`example ${example.name}: T = ${example.T_shortest} s`, () => {
      const profile = planPosition({ position: 0, velocity: example.v0, acceleration: 0 }, example.q1, {
        velocity: example.vmax,
        acceleration: example.amax,
        jerk: example.jmax,
      });
      expect(profile.duration).toBeCloseTo(example.T_shortest, 6);
    });

  it('rest to rest with both limits reached lasts h/v + v/a + a/j', () => {
    const [h, v, a, j] = [10, 5, 10, 30];
    const profile = planPosition({ position: 0, velocity: 0, acceleration: 0 }, h, {
      velocity: v,
      acceleration: a,
      jerk: j,
    });
    expect(profile.duration).toBeCloseTo(h / v + v / a + a / j, 12);
  });
});
