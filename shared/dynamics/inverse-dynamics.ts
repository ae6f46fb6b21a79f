import type { Chain, RigidBody } from '../kinematics';
import { checkLength } from '../kinematics/frames';
import { dynamicsMemory, lastBodyWithPayload } from './body';

export interface DynamicsOptions {
  /** m/s² in the base frame; the chain's own unless given. */
  gravity?: ArrayLike<number>;
  /** A body fixed to the tool, in the tool frame. */
  payload?: RigidBody | null;
  /** Filled and returned when given. */
  out?: Float64Array;
}

/**
 * Torques (N·m; sliding joints: forces, N) that make the arm move with qdd, by recursive Newton–Euler.
 * Links only: no friction, no rotors.
 *
 * @param q - joint values, rad (m)
 * @param qd - speeds, rad/s (m/s)
 * @param qdd - accelerations, rad/s² (m/s²)
 * @returns one value per joint, gravity included
 * @throws RangeError if q, qd or qdd is too short
 * @see Luh, Walker, Paul, "On-line computational scheme for mechanical manipulators" (1980);
 *   Featherstone, Rigid Body Dynamics Algorithms (2008), §5.3
 */
export function inverseDynamics(
  chain: Chain,
  q: ArrayLike<number>,
  qd: ArrayLike<number>,
  qdd: ArrayLike<number>,
  options?: DynamicsOptions,
): Float64Array {
  checkLength(chain, q, 'q');
  checkLength(chain, qd, 'qd');
  checkLength(chain, qdd, 'qdd');
  const memory = dynamicsMemory(chain);
  for (let i = 0; i < chain.n; i++) {
    memory.q[i] = q[i]!;
    memory.qd[i] = qd[i]!;
    memory.qdd[i] = qdd[i]!;
  }
  const out = options?.out ?? new Float64Array(chain.n);
  newtonEuler(chain, options?.gravity ?? chain.gravity, options?.payload, out);
  return out;
}

/** Torques (N·m, N) that hold the arm still in configuration q. */
export function gravityTorques(chain: Chain, q: ArrayLike<number>, options?: DynamicsOptions): Float64Array {
  checkLength(chain, q, 'q');
  const memory = dynamicsMemory(chain);
  for (let i = 0; i < chain.n; i++) memory.q[i] = q[i]!;
  memory.qd.fill(0);
  memory.qdd.fill(0);
  const out = options?.out ?? new Float64Array(chain.n);
  newtonEuler(chain, options?.gravity ?? chain.gravity, options?.payload, out);
  return out;
}

/**
 * The recursion on the q, qd, qdd in the chain's dynamics memory. Outwards: motion of every link in its own
 * inner frame (where the joint axis is z), and the force and moment its body needs; inwards: what each joint
 * passes on. Gravity enters as an upward acceleration of the base.
 */
export function newtonEuler(
  chain: Chain,
  gravity: ArrayLike<number>,
  payload: RigidBody | null | undefined,
  out: Float64Array,
): void {
  const { n, fixed, prismatic, bodies } = chain;
  const memory = dynamicsMemory(chain);
  const { q, qd, qdd, steps, wrenches, lastBody } = memory;
  lastBodyWithPayload(chain, payload, lastBody);
  // Angular velocity w, angular acceleration e and acceleration a of the current link's frame, in that frame.
  let wx = 0;
  let wy = 0;
  let wz = 0;
  let ex = 0;
  let ey = 0;
  let ez = 0;
  let ax = -gravity[0]!;
  let ay = -gravity[1]!;
  let az = -gravity[2]!;
  for (let i = 0; i < n; i++) {
    const o = 12 * i;
    const sliding = prismatic[i] === 1;
    const qi = q[i]!;
    const speed = qd[i]!;
    const rate = qdd[i]!;
    let r0 = fixed[o]!;
    let r1 = fixed[o + 1]!;
    const r2 = fixed[o + 2]!;
    let r3 = fixed[o + 3]!;
    let r4 = fixed[o + 4]!;
    const r5 = fixed[o + 5]!;
    let r6 = fixed[o + 6]!;
    let r7 = fixed[o + 7]!;
    const r8 = fixed[o + 8]!;
    let px = fixed[o + 9]!;
    let py = fixed[o + 10]!;
    let pz = fixed[o + 11]!;
    if (sliding) {
      px += qi * r2;
      py += qi * r5;
      pz += qi * r8;
    } else {
      const s = Math.sin(qi);
      const c = Math.cos(qi);
      let t = c * r0 + s * r1;
      r1 = c * r1 - s * r0;
      r0 = t;
      t = c * r3 + s * r4;
      r4 = c * r4 - s * r3;
      r3 = t;
      t = c * r6 + s * r7;
      r7 = c * r7 - s * r6;
      r6 = t;
    }
    steps[o] = r0;
    steps[o + 1] = r1;
    steps[o + 2] = r2;
    steps[o + 3] = r3;
    steps[o + 4] = r4;
    steps[o + 5] = r5;
    steps[o + 6] = r6;
    steps[o + 7] = r7;
    steps[o + 8] = r8;
    steps[o + 9] = px;
    steps[o + 10] = py;
    steps[o + 11] = pz;
    // Acceleration of this frame's origin, still in the frame before: a + e×p + w×(w×p).
    const ux = wy * pz - wz * py;
    const uy = wz * px - wx * pz;
    const uz = wx * py - wy * px;
    const gx = ax + ey * pz - ez * py + wy * uz - wz * uy;
    const gy = ay + ez * px - ex * pz + wz * ux - wx * uz;
    const gz = az + ex * py - ey * px + wx * uy - wy * ux;
    // Into this frame.
    const vx = r0 * wx + r3 * wy + r6 * wz;
    const vy = r1 * wx + r4 * wy + r7 * wz;
    const vz = r2 * wx + r5 * wy + r8 * wz;
    const fx = r0 * ex + r3 * ey + r6 * ez;
    const fy = r1 * ex + r4 * ey + r7 * ez;
    const fz = r2 * ex + r5 * ey + r8 * ez;
    ax = r0 * gx + r3 * gy + r6 * gz;
    ay = r1 * gx + r4 * gy + r7 * gz;
    az = r2 * gx + r5 * gy + r8 * gz;
    wx = vx;
    wy = vy;
    if (sliding) {
      // Coriolis 2·w×(speed·z) and the sliding itself.
      ax += 2 * speed * vy;
      ay -= 2 * speed * vx;
      az += rate;
      wz = vz;
      ex = fx;
      ey = fy;
      ez = fz;
    } else {
      wz = vz + speed;
      ex = fx + speed * vy;
      ey = fy - speed * vx;
      ez = fz + rate;
    }
    // Newton and Euler about the frame's origin, with first moment h = mass·com.
    const body = i === n - 1 ? lastBody : bodies;
    const b = i === n - 1 ? 0 : 10 * i;
    const m = body[b]!;
    const hx = body[b + 1]!;
    const hy = body[b + 2]!;
    const hz = body[b + 3]!;
    const ixx = body[b + 4]!;
    const iyy = body[b + 5]!;
    const izz = body[b + 6]!;
    const ixy = body[b + 7]!;
    const ixz = body[b + 8]!;
    const iyz = body[b + 9]!;
    const kx = wy * hz - wz * hy;
    const ky = wz * hx - wx * hz;
    const kz = wx * hy - wy * hx;
    const lx = ixx * wx + ixy * wy + ixz * wz;
    const ly = ixy * wx + iyy * wy + iyz * wz;
    const lz = ixz * wx + iyz * wy + izz * wz;
    const k = 6 * i;
    wrenches[k] = m * ax + ey * hz - ez * hy + wy * kz - wz * ky;
    wrenches[k + 1] = m * ay + ez * hx - ex * hz + wz * kx - wx * kz;
    wrenches[k + 2] = m * az + ex * hy - ey * hx + wx * ky - wy * kx;
    wrenches[k + 3] = ixx * ex + ixy * ey + ixz * ez + wy * lz - wz * ly + hy * az - hz * ay;
    wrenches[k + 4] = ixy * ex + iyy * ey + iyz * ez + wz * lx - wx * lz + hz * ax - hx * az;
    wrenches[k + 5] = ixz * ex + iyz * ey + izz * ez + wx * ly - wy * lx + hx * ay - hy * ax;
  }
  // Inwards: a joint bears its own body and what the next joint passed on.
  let fx = 0;
  let fy = 0;
  let fz = 0;
  let mx = 0;
  let my = 0;
  let mz = 0;
  for (let i = n - 1; i >= 0; i--) {
    const k = 6 * i;
    fx += wrenches[k]!;
    fy += wrenches[k + 1]!;
    fz += wrenches[k + 2]!;
    mx += wrenches[k + 3]!;
    my += wrenches[k + 4]!;
    mz += wrenches[k + 5]!;
    out[i] = prismatic[i] === 1 ? fz : mz;
    const o = 12 * i;
    const r0 = steps[o]!;
    const r1 = steps[o + 1]!;
    const r2 = steps[o + 2]!;
    const r3 = steps[o + 3]!;
    const r4 = steps[o + 4]!;
    const r5 = steps[o + 5]!;
    const r6 = steps[o + 6]!;
    const r7 = steps[o + 7]!;
    const r8 = steps[o + 8]!;
    const px = steps[o + 9]!;
    const py = steps[o + 10]!;
    const pz = steps[o + 11]!;
    const gx = r0 * fx + r1 * fy + r2 * fz;
    const gy = r3 * fx + r4 * fy + r5 * fz;
    const gz = r6 * fx + r7 * fy + r8 * fz;
    const nx = r0 * mx + r1 * my + r2 * mz + py * gz - pz * gy;
    const ny = r3 * mx + r4 * my + r5 * mz + pz * gx - px * gz;
    const nz = r6 * mx + r7 * my + r8 * mz + px * gy - py * gx;
    fx = gx;
    fy = gy;
    fz = gz;
    mx = nx;
    my = ny;
    mz = nz;
  }
}
