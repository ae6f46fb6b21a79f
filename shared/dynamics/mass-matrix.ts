import type { Chain, RigidBody } from '../kinematics';
import { checkLength, sweepFrames } from '../kinematics/frames';
import { dynamicsMemory, lastBodyWithPayload } from './body';

/**
 * Joint-space inertia matrix M(q): kinetic energy = ½·qdᵀ·M·qd.
 *
 * @param q - joint values, rad (m)
 * @param out - n·n numbers, filled and returned when given
 * @param payload - a body fixed to the tool, in the tool frame
 * @returns n×n, row-major, symmetric; kg·m² between turning joints, kg·m and kg where sliding ones are
 * @see Featherstone, Rigid Body Dynamics Algorithms (2008), §6.2 (composite rigid bodies). Here all bodies
 *   are counted about the base frame's origin, where composing them is adding them.
 */
export function massMatrix(
  chain: Chain,
  q: ArrayLike<number>,
  out?: Float64Array,
  payload?: RigidBody | null,
): Float64Array {
  checkLength(chain, q, 'q');
  sweepFrames(chain, q);
  const { n, frames, prismatic, bodies } = chain;
  const { bodiesInBase, lastBody } = dynamicsMemory(chain);
  lastBodyWithPayload(chain, payload, lastBody);
  for (let i = 0; i < n; i++)
    moveBodyToBase(
      frames,
      12 * i,
      i === n - 1 ? lastBody : bodies,
      i === n - 1 ? 0 : 10 * i,
      bodiesInBase,
      10 * i,
    );
  const to = out ?? new Float64Array(n * n);
  const sum = lastBody.fill(0);
  for (let j = n - 1; j >= 0; j--) {
    for (let k = 0; k < 10; k++) sum[k] = sum[k]! + bodiesInBase[10 * j + k]!;
    fillColumn(chain, j, sum, to, prismatic[j] === 1);
  }
  return to;
}

/** Column j up to the diagonal: what joints 0 … j feel when joint j alone accelerates by one. */
function fillColumn(chain: Chain, j: number, body: Float64Array, to: Float64Array, sliding: boolean): void {
  const { n, frames, prismatic } = chain;
  const o = 12 * j;
  const zx = frames[o + 2]!;
  const zy = frames[o + 5]!;
  const zz = frames[o + 8]!;
  const m = body[0]!;
  const hx = body[1]!;
  const hy = body[2]!;
  const hz = body[3]!;
  // Rate of momentum p and of angular momentum l about the base frame's origin.
  let px: number;
  let py: number;
  let pz: number;
  let lx: number;
  let ly: number;
  let lz: number;
  if (sliding) {
    px = m * zx;
    py = m * zy;
    pz = m * zz;
    lx = hy * zz - hz * zy;
    ly = hz * zx - hx * zz;
    lz = hx * zy - hy * zx;
  } else {
    const x = frames[o + 9]!;
    const y = frames[o + 10]!;
    const z = frames[o + 11]!;
    // The body point at the base frame's origin moves with o×z.
    const vx = y * zz - z * zy;
    const vy = z * zx - x * zz;
    const vz = x * zy - y * zx;
    px = m * vx + zy * hz - zz * hy;
    py = m * vy + zz * hx - zx * hz;
    pz = m * vz + zx * hy - zy * hx;
    lx = body[4]! * zx + body[7]! * zy + body[8]! * zz + hy * vz - hz * vy;
    ly = body[7]! * zx + body[5]! * zy + body[9]! * zz + hz * vx - hx * vz;
    lz = body[8]! * zx + body[9]! * zy + body[6]! * zz + hx * vy - hy * vx;
  }
  for (let i = 0; i <= j; i++) {
    const k = 12 * i;
    const ax = frames[k + 2]!;
    const ay = frames[k + 5]!;
    const az = frames[k + 8]!;
    let value: number;
    if (prismatic[i] === 1) value = ax * px + ay * py + az * pz;
    else {
      const x = frames[k + 9]!;
      const y = frames[k + 10]!;
      const z = frames[k + 11]!;
      value = ax * (lx - y * pz + z * py) + ay * (ly - z * px + x * pz) + az * (lz - x * py + y * px);
    }
    to[i * n + j] = value;
    to[j * n + i] = value;
  }
}

/** The ten inertial numbers of a body, from its inner frame to the base frame's axes and origin. */
function moveBodyToBase(
  frames: Float64Array,
  o: number,
  body: Float64Array,
  b: number,
  to: Float64Array,
  t: number,
): void {
  const m = body[b]!;
  const ixx = body[b + 4]!;
  const iyy = body[b + 5]!;
  const izz = body[b + 6]!;
  const ixy = body[b + 7]!;
  const ixz = body[b + 8]!;
  const iyz = body[b + 9]!;
  const r0 = frames[o]!;
  const r1 = frames[o + 1]!;
  const r2 = frames[o + 2]!;
  const r3 = frames[o + 3]!;
  const r4 = frames[o + 4]!;
  const r5 = frames[o + 5]!;
  const r6 = frames[o + 6]!;
  const r7 = frames[o + 7]!;
  const r8 = frames[o + 8]!;
  const x = frames[o + 9]!;
  const y = frames[o + 10]!;
  const z = frames[o + 11]!;
  // First moment about the frame's origin, in base axes.
  const hx = r0 * body[b + 1]! + r1 * body[b + 2]! + r2 * body[b + 3]!;
  const hy = r3 * body[b + 1]! + r4 * body[b + 2]! + r5 * body[b + 3]!;
  const hz = r6 * body[b + 1]! + r7 * body[b + 2]! + r8 * body[b + 3]!;
  // R·I, row by row, then times Rᵀ.
  const s0 = r0 * ixx + r1 * ixy + r2 * ixz;
  const s1 = r0 * ixy + r1 * iyy + r2 * iyz;
  const s2 = r0 * ixz + r1 * iyz + r2 * izz;
  const s3 = r3 * ixx + r4 * ixy + r5 * ixz;
  const s4 = r3 * ixy + r4 * iyy + r5 * iyz;
  const s5 = r3 * ixz + r4 * iyz + r5 * izz;
  const s6 = r6 * ixx + r7 * ixy + r8 * ixz;
  const s7 = r6 * ixy + r7 * iyy + r8 * iyz;
  const s8 = r6 * ixz + r7 * iyz + r8 * izz;
  to[t] = m;
  to[t + 1] = hx + m * x;
  to[t + 2] = hy + m * y;
  to[t + 3] = hz + m * z;
  // Moving the reference point by d: I + (2·h·d + m·d²)·1 − h⊗d − d⊗h − m·d⊗d.
  to[t + 4] = s0 * r0 + s1 * r1 + s2 * r2 + 2 * (hy * y + hz * z) + m * (y * y + z * z);
  to[t + 5] = s3 * r3 + s4 * r4 + s5 * r5 + 2 * (hx * x + hz * z) + m * (x * x + z * z);
  to[t + 6] = s6 * r6 + s7 * r7 + s8 * r8 + 2 * (hx * x + hy * y) + m * (x * x + y * y);
  to[t + 7] = s0 * r3 + s1 * r4 + s2 * r5 - hx * y - hy * x - m * x * y;
  to[t + 8] = s0 * r6 + s1 * r7 + s2 * r8 - hx * z - hz * x - m * x * z;
  to[t + 9] = s3 * r6 + s4 * r7 + s5 * r8 - hy * z - hz * y - m * y * z;
}
