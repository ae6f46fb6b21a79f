import { describe, expect, it } from 'vitest';
import {
  type Chain,
  compileChain,
  forwardKinematics,
  type IkTask,
  listInverseKinematics,
  seededRandom,
  solveInverseKinematics,
} from '../../shared/kinematics';
import { type ArmDescription, modelOf } from './arm-data';
import scara from './ik-axis-scara-4.json';
import puma from './ik-puma-560.json';

/** Straight from the README of this folder. */
const POSITION_TOLERANCE_M = 1e-5;
const ROTATION_TOLERANCE_RAD = 1e-4;

interface Target {
  q: number[];
  seed: number[];
  seed_near: number[];
  p: number[];
  R: number[][];
  dir?: number[];
}

/** Judges with the pose alone, not with what the solver says about itself. */
function expectReached(chain: Chain, q: ArrayLike<number>, target: Target): void {
  const tool = forwardKinematics(chain, q);
  const off = Math.hypot(...tool.position.map((value, k) => value - target.p[k]!));
  expect(off).toBeLessThan(POSITION_TOLERANCE_M);
  expect(angleOff(tool.rotation, target)).toBeLessThan(ROTATION_TOLERANCE_RAD);
  for (let i = 0; i < chain.n; i++) {
    expect(q[i]).toBeGreaterThanOrEqual(chain.lower[i]!);
    expect(q[i]).toBeLessThanOrEqual(chain.upper[i]!);
  }
}

/** For small angles: |R − R'| (Frobenius) = √2·angle; |z − z'| = angle. */
function angleOff(rotation: Float64Array, { R, dir }: Target): number {
  if (dir) return Math.hypot(...dir.map((value, k) => rotation[3 * k + 2]! - value));
  return Math.hypot(...R.flat().map((value, k) => rotation[k]! - value)) / Math.SQRT2;
}

describe.each([
  ['PUMA 560, full pose', puma as unknown as ArmDescription, puma.targets as Target[]],
  ['SCARA, position and tool axis', scara as unknown as ArmDescription, scara.targets as Target[]],
])('%s', (_, file, targets) => {
  const chain = compileChain(modelOf(file));
  const taskOf = ({ p, R, dir }: Target): IkTask =>
    dir ? { position: p, axis: { tool: [0, 0, 1], base: dir } } : { position: p, rotation: R.flat() };

  it.each(['seed', 'seed_near'] as const)('reaches every target from `%s`', (from) => {
    for (const target of targets) {
      const found = solveInverseKinematics(chain, taskOf(target), target[from]);
      expect(found.converged).toBe(true);
      expectReached(chain, found.q, target);
    }
  });

  it('stays with the known solution when it starts beside it', () => {
    // Beside a singular configuration two solutions meet, and either may be the nearer one: one in twenty.
    const strayed = targets.filter((target) => {
      const { q } = solveInverseKinematics(chain, taskOf(target), target.seed_near);
      const distance = (a: ArrayLike<number>) =>
        Math.hypot(...target.seed_near.map((value, i) => value - a[i]!));
      return distance(q) > distance(target.q) + 1e-3;
    });
    expect(strayed.length).toBeLessThanOrEqual(targets.length / 20);
  });

  it('lists solutions that all reach the target, differ, and come nearest first', () => {
    for (const target of targets.slice(0, 20)) {
      const list = listInverseKinematics(chain, taskOf(target), { seed: target.q });
      // The known solution is the first: nothing is nearer to it than itself.
      expect(target.dir ? 0 : Math.max(...difference(list[0]!, target.q))).toBeLessThan(1e-6);
      for (const q of list) expectReached(chain, q, target);
      const distances = list.map((q) => Math.hypot(...difference(q, target.q)));
      expect(distances).toEqual([...distances].sort((a, b) => a - b));
      for (const [k, a] of list.entries())
        for (const b of list.slice(k + 1)) expect(Math.max(...difference(a, b))).toBeGreaterThan(1e-3);
    }
  });
});

// The PUMA's wrist is spherical: its list comes from a closed form, and is complete. The slow way finds no more.
it('lists every solution of the PUMA that random starts find', () => {
  const chain = compileChain(modelOf(puma as unknown as ArmDescription));
  const random = seededRandom(3);
  for (const target of (puma.targets as Target[]).slice(0, 10)) {
    const task = { position: target.p, rotation: target.R.flat() };
    const list = listInverseKinematics(chain, task);
    let found = 0;
    for (let start = 0; start < 100; start++) {
      const seed = Array.from(chain.lower, (lower, i) => lower + random() * (chain.upper[i]! - lower));
      const { converged, q } = solveInverseKinematics(chain, task, seed, { restarts: 0 });
      if (!converged) continue;
      found++;
      // Angles that differ by whole turns are the same solution.
      const known = list.some((other) =>
        q.every((value, i) => Math.abs(Math.sin((value - other[i]!) / 2)) < 1e-5),
      );
      expect(known).toBe(true);
    }
    expect(found).toBeGreaterThan(0);
  }
});

const difference = (a: ArrayLike<number>, b: ArrayLike<number>) =>
  Array.from(a, (value, i) => Math.abs(value - b[i]!));
