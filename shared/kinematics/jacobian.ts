import type { Chain } from './chain';
import { checkLength, sweepFrames } from './frames';

/**
 * Geometric Jacobian of the tool point.
 *
 * @param q - joint values, rad (sliding joints m)
 * @param out - 6·n numbers, filled and returned when given
 * @returns 6×n, row-major: rows vx vy vz (m/s) wx wy wz (rad/s) per unit of joint speed, in the base frame
 * @see Siciliano et al., Robotics: Modelling, Planning and Control, §3.1
 */
export function jacobian(chain: Chain, q: ArrayLike<number>, out?: Float64Array): Float64Array {
  checkLength(chain, q, 'q');
  sweepFrames(chain, q);
  const to = out ?? new Float64Array(6 * chain.n);
  jacobianFromFrames(chain, to);
  return to;
}

/** The same, of the configuration that `chain.frames` holds. */
export function jacobianFromFrames(chain: Chain, to: Float64Array): void {
  const { n, frames, prismatic } = chain;
  const t = 12 * n + 9;
  const tx = frames[t]!;
  const ty = frames[t + 1]!;
  const tz = frames[t + 2]!;
  for (let i = 0; i < n; i++) {
    const o = 12 * i;
    const ax = frames[o + 2]!;
    const ay = frames[o + 5]!;
    const az = frames[o + 8]!;
    if (prismatic[i] === 1) {
      to[i] = ax;
      to[n + i] = ay;
      to[2 * n + i] = az;
      to[3 * n + i] = 0;
      to[4 * n + i] = 0;
      to[5 * n + i] = 0;
    } else {
      const dx = tx - frames[o + 9]!;
      const dy = ty - frames[o + 10]!;
      const dz = tz - frames[o + 11]!;
      to[i] = ay * dz - az * dy;
      to[n + i] = az * dx - ax * dz;
      to[2 * n + i] = ax * dy - ay * dx;
      to[3 * n + i] = ax;
      to[4 * n + i] = ay;
      to[5 * n + i] = az;
    }
  }
}
