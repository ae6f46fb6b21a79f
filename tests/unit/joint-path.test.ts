import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { DEMO_ARMS } from '../../shared/arm/demo-arms';
import { compileChain, forwardKinematics, linkFrames, worstReach } from '../../shared/kinematics';
import { alongPath, jointPath, pathLimits, planPosition, sampleProfile } from '../../shared/motion';

const { heron, wren } = DEMO_ARMS;

/** Somewhere inside an arm's soft limits. */
function place(model: typeof heron): fc.Arbitrary<number[]> {
  return fc.tuple(
    ...model.joints.map(({ limits }) => fc.double({ min: limits.lower, max: limits.upper, noNaN: true })),
  );
}

describe('a joint path', () => {
  it('starts and ends where it was asked to', () => {
    fc.assert(
      fc.property(place(heron), place(heron), (from, to) => {
        const path = jointPath(compileChain(heron), from, to);
        for (const [i, q] of alongPath(path, 0, []).entries()) expect(q).toBeCloseTo(from[i]!, 12);
        for (const [i, q] of alongPath(path, path.length, []).entries()) expect(q).toBeCloseTo(to[i]!, 12);
      }),
    );
  });

  it('has the length of its longest joint’s way, along which no joint goes faster than the path', () => {
    const path = jointPath(compileChain(heron), [0, 1, -1, 0], [0.4, 1.1, -1.8, 0]);
    expect(path.length).toBeCloseTo(0.8, 12);
    expect(path.direction[0]).toBeCloseTo(0.5, 12);
    expect(path.direction[2]).toBeCloseTo(-1, 12);
  });

  it('of no length is over at once', () => {
    const chain = compileChain(heron);
    const path = jointPath(chain, [0, 1, -1, 0], [0, 1, -1, 0]);
    const limits = pathLimits(chain, path, { fraction: 0.05, pointSpeed: 0.05 });
    expect(planPosition({ position: 0, velocity: 0, acceleration: 0 }, path.length, limits).duration).toBe(0);
  });
});

describe('limits along a path', () => {
  it('are the tightest joint’s, by its share of the way', () => {
    const chain = compileChain(heron);
    const path = jointPath(chain, [0, 1, -1, 0], [0.4, 1.1, -1.8, 0]);
    const { velocity, acceleration, jerk } = pathLimits(chain, path, {
      fraction: 0.25,
      pointSpeed: Infinity,
    });
    const shares = [0.5, 0.125, 1];
    const tightest = (of: 'velocity' | 'acceleration' | 'jerk', factor: number) =>
      Math.min(...shares.map((share, i) => (heron.joints[i]!.limits[of] * factor) / share));
    expect(velocity).toBeCloseTo(tightest('velocity', 0.25), 12);
    // The ceiling scales velocity only.
    expect(acceleration).toBeCloseTo(tightest('acceleration', 1), 12);
    expect(jerk).toBeCloseTo(tightest('jerk', 1), 12);
  });

  it.each([[heron.name, heron] as const, [wren.name, wren] as const])(
    'keep every point of %s at or below the speed asked, measured by differences',
    (_, model) => {
      const chain = compileChain(model);
      const DT = 1e-3;
      fc.assert(
        fc.property(place(model), place(model), fc.constantFrom(0.05, 0.25), (from, to, cap) => {
          const path = jointPath(chain, from, to);
          const limits = pathLimits(chain, path, { fraction: 1, pointSpeed: cap });
          const profile = planPosition({ position: 0, velocity: 0, acceleration: 0 }, path.length, limits);
          const at = (t: number) => {
            const q = alongPath(path, sampleProfile(profile, t).position, []);
            return [...linkFrames(chain, q).map((f) => f.position), forwardKinematics(chain, q).position];
          };
          for (let k = 0; k < 40; k++) {
            const t = (profile.duration * k) / 40;
            const [a, b] = [at(t), at(t + DT)];
            for (const [p, now] of b.entries()) {
              const was = a[p]!;
              const speed = Math.hypot(now[0] - was[0], now[1] - was[1], now[2] - was[2]) / DT;
              expect(speed).toBeLessThanOrEqual(cap * (1 + 1e-9));
            }
          }
        }),
        { numRuns: 30, seed: 7 },
      );
    },
  );

  it('use the worst reach where the configuration is not known, which is never faster', () => {
    const chain = compileChain(heron);
    const reach = worstReach(chain);
    fc.assert(
      fc.property(place(heron), place(heron), (from, to) => {
        const seen = jointPath(chain, from, to);
        const blind = jointPath(chain, from, to, reach);
        const caps = { fraction: 1, pointSpeed: 0.05 };
        // The path that looks carries a margin of 2 %.
        expect(pathLimits(chain, blind, caps).velocity).toBeLessThanOrEqual(
          pathLimits(chain, seen, caps).velocity * 1.021,
        );
      }),
      { numRuns: 50, seed: 8 },
    );
  });
});
