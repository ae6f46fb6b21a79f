import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  type AxisLimits,
  type AxisState,
  type Profile,
  planPosition,
  planSynchronised,
  planVelocity,
  restPosition,
  sampleProfile,
} from '../../shared/motion';

const SAMPLES = 60;
/** Rounding of a sum of about ten phases, as a share of the numbers at hand. */
const ROUNDING = 1e-9;

const share = (min = -1, max = 1) => fc.double({ min, max, noNaN: true });
const limitsOf = fc
  .record({
    velocity: share(0.05, 5),
    acceleration: share(0.1, 20),
    jerk: share(0.5, 200),
    slower: share(0.1, 1),
  })
  .map(({ slower, ...limits }) => ({ ...limits, velocityMin: -limits.velocity * slower }));

/** An axis that can still be kept inside its limits: at full jerk its velocity turns before either limit. */
const insideCase = fc
  .record({ limits: limitsOf, v: share(), a: share(), from: share(-3, 3), target: share(-3, 3) })
  .map(({ limits, v, a, from, target }) => {
    const velocity = v >= 0 ? v * limits.velocity : -v * limits.velocityMin;
    const room = Math.sqrt(
      2 * limits.jerk * (a > 0 ? limits.velocity - velocity : velocity - limits.velocityMin),
    );
    const acceleration = a * Math.min(limits.acceleration, room);
    return { limits, start: { position: from, velocity, acceleration }, target };
  });

/** Any axis at all: up to three times too fast and braking or gaining up to three times too hard. */
const anyCase = fc
  .record({
    limits: limitsOf,
    v: share(-3, 3),
    a: share(-3, 3),
    from: share(-3, 3),
    target: share(-300, 300),
  })
  .map(({ limits, v, a, from, target }) => ({
    limits,
    start: { position: from, velocity: v * limits.velocity, acceleration: a * limits.acceleration },
    target,
  }));

function expectInside(profile: Profile, limits: AxisLimits): void {
  const out: AxisState = { position: 0, velocity: 0, acceleration: 0 };
  const slack = 1 + ROUNDING;
  for (let k = 0; k <= SAMPLES; k++) {
    sampleProfile(profile, (profile.duration * k) / SAMPLES, out);
    expect(out.velocity).toBeLessThanOrEqual(limits.velocity * slack);
    expect(out.velocity).toBeGreaterThanOrEqual((limits.velocityMin ?? -limits.velocity) * slack);
    expect(Math.abs(out.acceleration)).toBeLessThanOrEqual(limits.acceleration * slack);
  }
  for (const phase of profile.phases) expect(Math.abs(phase.jerk)).toBeLessThanOrEqual(limits.jerk * slack);
}

/** What a junction may jump by, as a share of the largest term that is summed up to reach it. */
const JUMP = 1e-9;

/**
 * Each phase must begin where the one before it ended, the first at the start and the end after the last,
 * so that nothing a planner pins can hide an error. Phase by phase: over one sum of all, the rounding of an
 * acceleration would grow with the square of the time (1e-16 over an hour's cruise is 1e-9 of position).
 */
function expectContinuous(profile: Profile, start: AxisState): void {
  let before: AxisState = start;
  // Not zero: a first phase shorter than rounding (1e-13 s) is left out of a profile.
  let tolerance = { position: JUMP, velocity: JUMP, acceleration: JUMP };
  const expectMet = (now: AxisState) => {
    for (const of of ['position', 'velocity', 'acceleration'] as const)
      expect(Math.abs(now[of] - before[of])).toBeLessThanOrEqual(tolerance[of]);
  };
  for (const phase of profile.phases) {
    expectMet(phase);
    const { duration: t, jerk: j, position: p, velocity: v, acceleration: a } = phase;
    before = {
      position: p + t * (v + t * (a / 2 + (t * j) / 6)),
      velocity: v + t * (a + (t * j) / 2),
      acceleration: a + t * j,
    };
    const largest = (...terms: number[]) => JUMP * Math.max(1, ...terms.map(Math.abs));
    tolerance = {
      position: largest(p, t * v, (t * t * a) / 2, (t * t * t * j) / 6),
      velocity: largest(v, t * a, (t * t * j) / 2),
      acceleration: largest(a, t * j),
    };
  }
  expectMet(profile.end);
  expect(profile.phases.reduce((sum, phase) => sum + phase.duration, 0)).toBeCloseTo(profile.duration, 8);
}

describe('planPosition', () => {
  it('keeps a start inside the limits inside them, without a jump, and ends at rest at the target', () => {
    fc.assert(
      fc.property(insideCase, ({ start, target, limits }) => {
        const profile = planPosition(start, target, limits);
        expectInside(profile, limits);
        expectContinuous(profile, start);
        expect(profile.end).toEqual({ position: target, velocity: 0, acceleration: 0 });
      }),
      { numRuns: 1000 },
    );
  });

  it('ends at rest at the target from outside the limits too', () => {
    fc.assert(
      fc.property(anyCase, ({ start, target, limits }) => {
        const profile = planPosition(start, target, limits);
        expect(Number.isFinite(profile.duration)).toBe(true);
        expectContinuous(profile, start);
        expect(profile.end).toEqual({ position: target, velocity: 0, acceleration: 0 });
      }),
      { numRuns: 1000 },
    );
  });

  // Bellman's principle (Dynamic Programming, 1957): a law is shortest if and only if no first step of any
  // kind, followed by the shortest law from there, gets ahead of it.
  it('cannot be beaten by starting with any other jerk for a while', () => {
    fc.assert(
      fc.property(insideCase, share(), share(0.001, 1), ({ start, target, limits }, push, part) => {
        const whole = planPosition(start, target, limits);
        const t = part * Math.max(whole.duration, limits.acceleration / limits.jerk);
        const jerk = push * limits.jerk;
        const velocity = start.velocity + t * (start.acceleration + (t * jerk) / 2);
        const acceleration = start.acceleration + t * jerk;
        const position =
          start.position + t * (start.velocity + t * (start.acceleration / 2 + (t * jerk) / 6));
        const turns = velocity + (acceleration * Math.abs(acceleration)) / (2 * limits.jerk);
        const kept =
          Math.abs(acceleration) <= limits.acceleration &&
          Math.max(velocity, turns) <= limits.velocity &&
          Math.min(velocity, turns) >= limits.velocityMin;
        fc.pre(kept);
        const rest = planPosition({ position, velocity, acceleration }, target, limits);
        expect(t + rest.duration).toBeGreaterThanOrEqual(whole.duration - 1e-7);
      }),
      { numRuns: 2000 },
    );
  });

  it('stays the same law when planned again on the way', () => {
    fc.assert(
      fc.property(insideCase, share(0, 1), ({ start, target, limits }, part) => {
        const whole = planPosition(start, target, limits);
        const t = part * whole.duration;
        const rest = planPosition(sampleProfile(whole, t), target, limits);
        expect(Math.abs(t + rest.duration - whole.duration)).toBeLessThan(1e-4);
      }),
      { numRuns: 1000 },
    );
  });

  it('is never slower than any way over one velocity in between, tried one by one', () => {
    fc.assert(
      fc.property(insideCase, ({ start, target, limits }) => {
        const { duration } = planPosition(start, target, limits);
        for (let k = 0; k <= 40; k++) {
          const velocity = limits.velocityMin + ((limits.velocity - limits.velocityMin) * k) / 40;
          if (velocity === 0) continue;
          const change = planVelocity(start, velocity, limits);
          const stop = restPosition(change.end, limits);
          const cruise = (target - stop) / velocity;
          if (cruise < 0) continue;
          const brake = planVelocity(change.end, 0, limits);
          expect(change.duration + cruise + brake.duration).toBeGreaterThanOrEqual(duration - 1e-8);
        }
      }),
      { numRuns: 300 },
    );
  });

  it.each([
    ['start.velocity', { velocity: Number.NaN }, {}],
    ['limits.jerk', {}, { jerk: 0 }],
    ['limits.velocityMin', {}, { velocityMin: 1 }],
    ['limits.acceleration', {}, { acceleration: Infinity }],
  ])('refuses a bad %s by name', (name, start, limits) => {
    expect(() =>
      planPosition({ position: 0, velocity: 0, acceleration: 0, ...start }, 1, {
        velocity: 1,
        acceleration: 2,
        jerk: 3,
        ...limits,
      }),
    ).toThrow(new RegExp(`^${name}`));
  });
});

describe('planVelocity', () => {
  it('reaches the velocity with no acceleration, inside the limits', () => {
    fc.assert(
      fc.property(insideCase, share(0, 1), ({ start, limits }, part) => {
        const between = limits.velocityMin + (limits.velocity - limits.velocityMin) * part;
        const goal = Math.min(limits.velocity, between);
        const profile = planVelocity(start, goal, limits);
        expectInside(profile, limits);
        expectContinuous(profile, start);
        expect(profile.end.velocity).toBe(goal);
        expect(profile.end.acceleration).toBe(0);
      }),
      { numRuns: 1000 },
    );
  });

  it('comes to rest where restPosition says', () => {
    fc.assert(
      fc.property(anyCase, ({ start, limits }) => {
        const { end } = planVelocity(start, 0, limits);
        const rest = restPosition(start, limits);
        expect(Math.abs(end.position - rest)).toBeLessThan(1e-9 * Math.max(1, Math.abs(rest)));
      }),
    );
  });
});

describe('planSynchronised', () => {
  it('brings every axis to rest at its target at the same moment, inside its limits, no later than the slowest needs', () => {
    fc.assert(
      fc.property(fc.array(insideCase, { minLength: 1, maxLength: 6 }), (axes) => {
        const profiles = planSynchronised(
          axes.map((axis) => axis.start),
          axes.map((axis) => axis.target),
          axes.map((axis) => axis.limits),
        );
        const slowest = Math.max(
          ...axes.map((axis) => planPosition(axis.start, axis.target, axis.limits).duration),
        );
        for (const [i, profile] of profiles.entries()) {
          const { start, target, limits } = axes[i]!;
          expect(profile.duration).toBeCloseTo(slowest, 9);
          expectInside(profile, limits);
          expectContinuous(profile, start);
          expect(profile.end).toEqual({ position: target, velocity: 0, acceleration: 0 });
        }
      }),
      { numRuns: 300 },
    );
  });
});
