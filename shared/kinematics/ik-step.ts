import type { Chain } from './chain';
import type { IkMemory } from './ik-memory';
import { AXIS, POSITION, TILT } from './ik-task';

/**
 * One step of bounded, damped least squares (Levenberg–Marquardt) for inverse kinematics, in scaled units.
 * @see Siciliano et al., Robotics, §3.5 (damped inverse); Nocedal & Wright, Numerical Optimization, §10.3, §16.7
 */

/** Weight of a radian against a length as long as the arm. */
export const ROTATION_WEIGHT = 0.35;

/** Scaled Jacobian columns, JᵀJ and Jᵀe at the configuration of `chain.frames` and `memory.error`. */
export function normalEquations(chain: Chain, memory: IkMemory): void {
  const { n, frames, prismatic } = chain;
  const { columns, normal, gradient, error, unit, perLength, task } = memory;
  const t = 12 * n + 9;
  const tx = frames[t]!;
  const ty = frames[t + 1]!;
  const tz = frames[t + 2]!;
  const turning = task.kind === POSITION ? 0 : ROTATION_WEIGHT;
  // An axis task leaves turns about the axis free: they are taken out of every column.
  let bx = 0;
  let by = 0;
  let bz = 0;
  if (task.kind === AXIS) {
    const a = task.toolAxis;
    const o = 12 * n;
    bx = frames[o]! * a[0]! + frames[o + 1]! * a[1]! + frames[o + 2]! * a[2]!;
    by = frames[o + 3]! * a[0]! + frames[o + 4]! * a[1]! + frames[o + 5]! * a[2]!;
    bz = frames[o + 6]! * a[0]! + frames[o + 7]! * a[1]! + frames[o + 8]! * a[2]!;
  }
  // A tilt task counts turns about one axis only.
  const tilting = task.kind === TILT;
  if (tilting) {
    const j = 12 * task.tiltJoint;
    bx = frames[j + 2]!;
    by = frames[j + 5]!;
    bz = frames[j + 8]!;
  }
  const e0 = error[0]! * perLength;
  const e1 = error[1]! * perLength;
  const e2 = error[2]! * perLength;
  const e3 = error[3]! * turning;
  const e4 = error[4]! * turning;
  const e5 = error[5]! * turning;
  for (let i = 0; i < n; i++) {
    const o = 12 * i;
    const c = 6 * i;
    let ax = frames[o + 2]!;
    let ay = frames[o + 5]!;
    let az = frames[o + 8]!;
    if (prismatic[i] === 1) {
      const scale = unit[i]! * perLength;
      columns[c] = ax * scale;
      columns[c + 1] = ay * scale;
      columns[c + 2] = az * scale;
      columns[c + 3] = 0;
      columns[c + 4] = 0;
      columns[c + 5] = 0;
    } else {
      const dx = (tx - frames[o + 9]!) * perLength;
      const dy = (ty - frames[o + 10]!) * perLength;
      const dz = (tz - frames[o + 11]!) * perLength;
      columns[c] = ay * dz - az * dy;
      columns[c + 1] = az * dx - ax * dz;
      columns[c + 2] = ax * dy - ay * dx;
      const along = ax * bx + ay * by + az * bz;
      ax = tilting ? along * bx : ax - along * bx;
      ay = tilting ? along * by : ay - along * by;
      az = tilting ? along * bz : az - along * bz;
      columns[c + 3] = ax * turning;
      columns[c + 4] = ay * turning;
      columns[c + 5] = az * turning;
    }
    const c0 = columns[c]!;
    const c1 = columns[c + 1]!;
    const c2 = columns[c + 2]!;
    const c3 = columns[c + 3]!;
    const c4 = columns[c + 4]!;
    const c5 = columns[c + 5]!;
    gradient[i] = c0 * e0 + c1 * e1 + c2 * e2 + c3 * e3 + c4 * e4 + c5 * e5;
    for (let j = 0; j <= i; j++) {
      const d = 6 * j;
      normal[i * n + j] =
        c0 * columns[d]! +
        c1 * columns[d + 1]! +
        c2 * columns[d + 2]! +
        c3 * columns[d + 3]! +
        c4 * columns[d + 4]! +
        c5 * columns[d + 5]!;
    }
  }
}

/** Half the squared scaled error: what an attempt brings down. */
export function cost(memory: IkMemory, error: Float64Array): number {
  const p = memory.perLength * memory.perLength;
  const r = ROTATION_WEIGHT * ROTATION_WEIGHT;
  return (
    0.5 *
    (p * (error[0]! * error[0]! + error[1]! * error[1]! + error[2]! * error[2]!) +
      r * (error[3]! * error[3]! + error[4]! * error[4]! + error[5]! * error[5]!))
  );
}

/**
 * Step from q with damping, kept inside the joint limits: joints that the step would push out are pinned at
 * their limit and the others solved again with that, so a limit costs only what it must. Writes
 * `memory.trial`.
 *
 * @param longest - a step that moves a joint farther is shortened as a whole
 * @returns the largest scaled move of a joint
 */
export function boundedStep(chain: Chain, memory: IkMemory, damping: number, longest: number): number {
  const { n, lower, upper } = chain;
  const { q, gradient, step, pinned, unit, trial } = memory;
  for (let i = 0; i < n; i++) {
    const outward = gradient[i]! > 0 ? q[i]! >= upper[i]! : q[i]! <= lower[i]!;
    pinned[i] = outward ? 1 : 0;
    step[i] = 0;
  }
  for (let round = 0; round < n; round++) {
    solveFree(n, memory, damping);
    let again = false;
    for (let i = 0; i < n; i++) {
      if (pinned[i] === 1) continue;
      const value = q[i]! + step[i]! * unit[i]!;
      if (value < lower[i]!) step[i] = (lower[i]! - q[i]!) / unit[i]!;
      else if (value > upper[i]!) step[i] = (upper[i]! - q[i]!) / unit[i]!;
      else continue;
      pinned[i] = 1;
      again = true;
    }
    if (!again) break;
  }
  let largest = 0;
  for (let i = 0; i < n; i++) {
    const moved = step[i]! < 0 ? -step[i]! : step[i]!;
    if (moved > largest) largest = moved;
  }
  const scale = largest > longest ? longest / largest : 1;
  for (let i = 0; i < n; i++) {
    const value = q[i]! + scale * step[i]! * unit[i]!;
    // Exactly at the limit where rounding would leave it a hair outside.
    trial[i] = Math.min(Math.max(value, lower[i]!), upper[i]!);
  }
  return largest;
}

/**
 * Joint rates (scaled) for the twist in `memory.error`, into `memory.step`: the least-squares answer that
 * leaves joints alone that stand at a limit and would leave it.
 */
export function freeStep(chain: Chain, memory: IkMemory, damping: number): void {
  const { n, lower, upper } = chain;
  const { q, step, pinned } = memory;
  pinned.fill(0);
  for (let round = 0; round <= n; round++) {
    solveFree(n, memory, damping);
    let again = false;
    for (let i = 0; i < n; i++) {
      if (pinned[i] === 1 || !(step[i]! > 0 ? q[i]! >= upper[i]! : step[i]! < 0 && q[i]! <= lower[i]!))
        continue;
      pinned[i] = 1;
      step[i] = 0;
      again = true;
    }
    if (!again) return;
  }
}

/** Solves (JᵀJ + damping·1)·step = Jᵀe over the joints that are not pinned, given the steps of the pinned ones. */
function solveFree(n: number, memory: IkMemory, damping: number): void {
  const { normal, factor, gradient, step, pinned, free } = memory;
  let count = 0;
  for (let i = 0; i < n; i++) if (pinned[i] === 0) free[count++] = i;
  for (let a = 0; a < count; a++) {
    const i = free[a]!;
    let right = gradient[i]!;
    if (count < n)
      for (let k = 0; k < n; k++)
        if (pinned[k] === 1) right -= (k <= i ? normal[i * n + k]! : normal[k * n + i]!) * step[k]!;
    // Cholesky row by row, the forward substitution along with it.
    const row = a * n;
    for (let b = 0; b < a; b++) {
      let value = normal[i * n + free[b]!]!;
      const other = b * n;
      for (let k = 0; k < b; k++) value -= factor[row + k]! * factor[other + k]!;
      value *= factor[other + b]!;
      factor[row + b] = value;
    }
    let pivot = normal[i * n + i]! + damping;
    for (let k = 0; k < a; k++) {
      const value = factor[row + k]!;
      pivot -= value * value;
      right -= value * step[free[k]!]!;
    }
    // The diagonal keeps the inverse root: one division instead of n.
    const inverse = pivot > 1e-300 ? 1 / Math.sqrt(pivot) : 0;
    factor[row + a] = inverse;
    step[i] = right * inverse;
  }
  for (let a = count - 1; a >= 0; a--) {
    const i = free[a]!;
    let value = step[i]!;
    for (let b = a + 1; b < count; b++) value -= factor[b * n + a]! * step[free[b]!]!;
    step[i] = value * factor[a * n + a]!;
  }
}
