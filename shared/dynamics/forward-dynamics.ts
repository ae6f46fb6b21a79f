import type { Chain } from '../kinematics';
import { checkLength } from '../kinematics/frames';
import { dynamicsMemory } from './body';
import { type DynamicsOptions, newtonEuler } from './inverse-dynamics';
import { massMatrix } from './mass-matrix';

/**
 * Accelerations (rad/s², m/s²) that torques tau give the arm: M(q)·qdd = tau − what the arm needs at qdd = 0.
 *
 * @param q - joint values, rad (m)
 * @param qd - speeds, rad/s (m/s)
 * @param tau - torques, N·m (forces, N)
 * @throws RangeError naming the joint if nothing with mass moves with it (its acceleration has no answer)
 * @see Featherstone, Rigid Body Dynamics Algorithms (2008), §6.1
 */
export function forwardDynamics(
  chain: Chain,
  q: ArrayLike<number>,
  qd: ArrayLike<number>,
  tau: ArrayLike<number>,
  options?: DynamicsOptions,
): Float64Array {
  checkLength(chain, q, 'q');
  checkLength(chain, qd, 'qd');
  checkLength(chain, tau, 'tau');
  const { n } = chain;
  const memory = dynamicsMemory(chain);
  const { matrix, vector } = memory;
  const out = options?.out ?? new Float64Array(n);
  // tau may be the very array that the answer goes to.
  for (let i = 0; i < n; i++) {
    vector[i] = tau[i]!;
    memory.q[i] = q[i]!;
    memory.qd[i] = qd[i]!;
    memory.qdd[i] = 0;
  }
  newtonEuler(chain, options?.gravity ?? chain.gravity, options?.payload, out);
  for (let i = 0; i < n; i++) vector[i] = vector[i]! - out[i]!;
  massMatrix(chain, q, matrix, options?.payload);
  factor(chain, matrix);
  for (let i = 0; i < n; i++) {
    let value = vector[i]!;
    for (let k = 0; k < i; k++) value -= matrix[i * n + k]! * out[k]!;
    out[i] = value / matrix[i * n + i]!;
  }
  for (let i = n - 1; i >= 0; i--) {
    let value = out[i]!;
    for (let k = i + 1; k < n; k++) value -= matrix[k * n + i]! * out[k]!;
    out[i] = value / matrix[i * n + i]!;
  }
  return out;
}

/** Cholesky factor in the lower triangle. */
function factor(chain: Chain, a: Float64Array): void {
  const { n } = chain;
  for (let j = 0; j < n; j++) {
    const before = a[j * n + j]!;
    let pivot = before;
    for (let k = 0; k < j; k++) pivot -= a[j * n + k]! ** 2;
    // What is left of the diagonal is rounding when the joint alone has no inertia of its own.
    if (!(pivot > 1e-14 * Math.max(before, Number.MIN_VALUE)))
      throw new RangeError(
        `joint ${j + 1} (${chain.names[j]}) moves no mass: its acceleration has no answer`,
      );
    const root = Math.sqrt(pivot);
    a[j * n + j] = root;
    for (let i = j + 1; i < n; i++) {
      let value = a[i * n + j]!;
      for (let k = 0; k < j; k++) value -= a[i * n + k]! * a[j * n + k]!;
      a[i * n + j] = value / root;
    }
  }
}
