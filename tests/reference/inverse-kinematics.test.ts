import { describe, expect, it } from 'vitest';
import {
  type Chain,
  compileChain,
  forwardKinematics,
  type IkTask,
  listInverseKinematics,
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
      expect(list.length).toBeGreaterThan(0);
      for (const q of list) expectReached(chain, q, target);
      const distances = list.map((q) => Math.hypot(...target.q.map((value, i) => value - q[i]!)));
      expect(distances).toEqual([...distances].sort((a, b) => a - b));
      for (const [k, a] of list.entries())
        for (const b of list.slice(k + 1))
          expect(Math.max(...a.map((value, i) => Math.abs(value - b[i]!)))).toBeGreaterThan(1e-3);
    }
  });
});
