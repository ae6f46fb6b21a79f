import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { DEMO_ARMS } from '../../shared/arm/demo-arms';
import {
  type Chain,
  compileChain,
  forwardKinematics,
  type LineTarget,
  toolLine,
} from '../../shared/kinematics';
import {
  alongPath,
  pathLimits,
  pathRates,
  planPosition,
  sampleProfile,
  straightPath,
  toolPath,
} from '../../shared/motion';
import { splineRates, splineThrough, splineValue } from '../../shared/motion/spline';
import { anyMovingArm } from '../support/random-arms';

const arms = Object.values(DEMO_ARMS).map((model) => ({ model, chain: compileChain(model) }));
const inside = (share: number, k: number) => {
  const { model } = arms[k]!;
  return model.joints.map(({ limits }, i) => {
    // Each joint somewhere else, from one number.
    const own = (share * (7 + 3 * i)) % 1;
    return limits.lower + (0.1 + 0.8 * own) * (limits.upper - limits.lower);
  });
};
const anyPress = fc.record({
  arm: fc.constantFrom(0, 1, 2),
  share: fc.double({ min: 0, max: 1, noNaN: true }),
  frame: fc.constantFrom('base' as const, 'tool' as const),
  axis: fc.constantFrom('x', 'y', 'z', 'rx', 'ry', 'rz' as const),
  direction: fc.constantFrom(1, -1),
  ceiling: fc.constantFrom(0.05, 0.25, 0.6, 1),
});

/** Plans and plays a line, and throws where a limit is broken or the line is left; false where nothing could be planned. */
function keepsItsLimits(chain: Chain, q: readonly number[], line: LineTarget, ceiling: number): boolean {
  const { path } = toolPath(chain, q, line, { asFar: true, fraction: ceiling });
  if (!path) return false;
  const limits = pathLimits(chain, path, { fraction: ceiling, pointSpeed: ceiling <= 0.05 ? 0.05 : 0.25 });
  const profile = planPosition({ position: 0, velocity: 0, acceleration: 0 }, path.length, limits);
  const dt = 0.01;
  const sent: number[][] = [];
  for (let t = 0; t <= Math.min(30, profile.duration + dt); t += dt)
    sent.push(alongPath(path, sampleProfile(profile, t).position, new Array<number>(chain.n)));
  const start = [...forwardKinematics(chain, q).position];
  const way = Array.from(line.position).map((value, k) => value - start[k]!);
  const length = Math.hypot(...way);
  for (let k = 3; k < sent.length; k++) {
    for (let i = 0; i < chain.n; i++) {
      const [d, c, b, a] = [sent[k]![i]!, sent[k - 1]![i]!, sent[k - 2]![i]!, sent[k - 3]![i]!];
      if (Math.abs(d - c) / dt > chain.velocity[i]! * ceiling * 1.0001)
        throw new Error(`joint ${i}: velocity`);
      if (Math.abs(d - 2 * c + b) / dt ** 2 > chain.acceleration[i]! * 1.0001)
        throw new Error(`joint ${i}: acceleration`);
      if (Math.abs(d - 3 * c + 3 * b - a) / dt ** 3 > chain.jerk[i]! * 1.0001)
        throw new Error(`joint ${i}: jerk`);
    }
    const at = forwardKinematics(chain, sent[k]!).position.map((value, m) => value - start[m]!);
    const along = length > 0 ? at.reduce((sum, value, m) => sum + (value * way[m]!) / length, 0) : 0;
    const off = Math.sqrt(Math.max(0, at.reduce((sum, value) => sum + value * value, 0) - along * along));
    if (off > 1e-4) throw new Error(`${off} m off the line`);
  }
  return true;
}

describe('a straight move of the tool', () => {
  it('keeps every limit of every joint at every sample, at any ceiling, and stays on its line', () => {
    let planned = 0;
    fc.assert(
      fc.property(anyPress, ({ arm, share, frame, axis, direction, ceiling }) => {
        const { chain } = arms[arm]!;
        const line = toolLine(
          chain,
          inside(share, arm),
          frame,
          axis,
          direction * (axis.length === 2 ? 2 : 0.4),
        );
        if (line && keepsItsLimits(chain, inside(share, arm), line, ceiling)) planned++;
      }),
      { numRuns: 150 },
    );
    expect(planned).toBeGreaterThan(50);
  });

  it('does so on arms nobody would build, of four to seven joints', () => {
    let planned = 0;
    fc.assert(
      fc.property(anyMovingArm(4, 7), anyPress, ({ model, q }, { frame, axis, ceiling }) => {
        const limits = { velocity: 1.2, acceleration: 3, jerk: 20 };
        const chain = compileChain({
          ...model,
          joints: model.joints.map((joint) => ({ ...joint, limits: { ...joint.limits, ...limits } })),
        });
        const line = toolLine(chain, q, frame, axis, axis.length === 2 ? 1 : 0.2);
        if (line && keepsItsLimits(chain, q, line, ceiling)) planned++;
      }),
      { numRuns: 300 },
    );
    expect(planned).toBeGreaterThan(30);
  });

  it('is refused with the joint and the fraction of the way when a limit is in the way', () => {
    const { chain, model } = arms[1]!;
    const from = [0.2, 1.66, -1.92, 0.3, -0.87, 0.2];
    const { path, refusal } = toolPath(chain, from, toolLine(chain, from, 'base', 'x', 0.5)!);
    expect(path).toBeNull();
    // The forearm unfolds to its limit first: stretched that far it stands at its upper one.
    expect(model.joints[refusal!.joint]!.name).toBe('Forearm');
    expect(refusal!.reason).toBe('limit');
    expect(refusal!.fraction).toBeGreaterThan(0.1);
    expect(refusal!.fraction).toBeLessThan(1);
    // Up to there it can be followed.
    const { path: part } = toolPath(
      chain,
      from,
      toolLine(chain, from, 'base', 'x', 0.5 * (refusal!.fraction - 0.01))!,
    );
    expect(part).not.toBeNull();
  });

  it('says that it arrives in another posture rather than taking it', () => {
    const { chain } = arms[1]!;
    const from = [0.2, 1.66, -1.92, 0.3, -0.87, 0.2];
    // The same place of the tool with the wrist the other way round.
    const flipped = [0.2, 1.66, -1.92, 0.3 - Math.PI, 0.87, 0.2 + Math.PI - 0.0001];
    const { path, refusal } = straightPath(chain, from, flipped);
    expect(path).toBeNull();
    expect(refusal!.reason).toBe('posture');
  });

  it('gives speeds and accelerations that are those of its places', () => {
    const { chain } = arms[0]!;
    const q = inside(0.37, 0);
    const { path } = toolPath(chain, q, toolLine(chain, q, 'base', 'z', 0.05)!, { asFar: true });
    const n = chain.n;
    const [before, at, after, qd, qdd] = [0, 1, 2, 3, 4].map(() => new Float64Array(n)) as Float64Array[];
    const s = path!.length / 2;
    const h = 1e-4;
    alongPath(path!, s - h, before!);
    alongPath(path!, s, at!);
    alongPath(path!, s + h, after!);
    pathRates(path!, { position: s, velocity: 1, acceleration: 0 }, qd!, qdd!);
    for (let i = 0; i < n; i++) {
      expect(qd![i]).toBeCloseTo((after![i]! - before![i]!) / (2 * h), 6);
      expect(qdd![i]).toBeCloseTo((after![i]! - 2 * at![i]! + before![i]!) / h ** 2, 3);
    }
  });
});

describe('the spline', () => {
  it('goes through its knots, with the end slopes asked for, and takes a cubic as it is', () => {
    // s³ − 2s² + s over 0 … 1, a curve the spline can draw exactly.
    const f = (s: number) => s ** 3 - 2 * s ** 2 + s;
    const q = Float64Array.from({ length: 11 }, (_, k) => f(k / 10));
    const spline = splineThrough(1, q, 0.1, [1], [0]);
    const [value, first, second] = [new Float64Array(1), new Float64Array(1), new Float64Array(1)];
    for (let k = 0; k <= 100; k++) {
      const s = k / 100;
      splineValue(spline, s, value);
      splineRates(spline, s, first, second);
      expect(value[0]).toBeCloseTo(f(s), 12);
      expect(first[0]).toBeCloseTo(3 * s ** 2 - 4 * s + 1, 10);
      expect(second[0]).toBeCloseTo(6 * s - 4, 9);
    }
  });
});
