import type { Chain, Vec3 } from './chain';
import { multiply3 } from './rotation';

/** Pose of a frame in the base frame. */
export interface Transform {
  /** m */
  position: Vec3;
  /** 3×3, row-major; its columns are the frame's axes in the base frame. */
  rotation: Float64Array;
}

/**
 * Fills `chain.frames` for configuration q: per joint the inner frame after the joint's motion, then the
 * tool frame, each as rotation (9, row-major) and position (3) in the base frame.
 */
export function sweepFrames(chain: Chain, q: ArrayLike<number>): void {
  const { n, fixed, prismatic, frames } = chain;
  // The pose of the frame before, in plain numbers: the compiler keeps those in registers.
  let a0 = 1;
  let a1 = 0;
  let a2 = 0;
  let a3 = 0;
  let a4 = 1;
  let a5 = 0;
  let a6 = 0;
  let a7 = 0;
  let a8 = 1;
  let x = 0;
  let y = 0;
  let z = 0;
  for (let i = 0; i < n; i++) {
    const o = 12 * i;
    const f0 = fixed[o]!;
    const f1 = fixed[o + 1]!;
    const f2 = fixed[o + 2]!;
    const f3 = fixed[o + 3]!;
    const f4 = fixed[o + 4]!;
    const f5 = fixed[o + 5]!;
    const f6 = fixed[o + 6]!;
    const f7 = fixed[o + 7]!;
    const f8 = fixed[o + 8]!;
    const px = fixed[o + 9]!;
    const py = fixed[o + 10]!;
    const pz = fixed[o + 11]!;
    x += a0 * px + a1 * py + a2 * pz;
    y += a3 * px + a4 * py + a5 * pz;
    z += a6 * px + a7 * py + a8 * pz;
    // Before the joint's motion: columns b (x axis), c (y axis), d (z axis, the joint's own).
    const b0 = a0 * f0 + a1 * f3 + a2 * f6;
    const b1 = a3 * f0 + a4 * f3 + a5 * f6;
    const b2 = a6 * f0 + a7 * f3 + a8 * f6;
    const c0 = a0 * f1 + a1 * f4 + a2 * f7;
    const c1 = a3 * f1 + a4 * f4 + a5 * f7;
    const c2 = a6 * f1 + a7 * f4 + a8 * f7;
    const d0 = a0 * f2 + a1 * f5 + a2 * f8;
    const d1 = a3 * f2 + a4 * f5 + a5 * f8;
    const d2 = a6 * f2 + a7 * f5 + a8 * f8;
    const value = q[i]!;
    if (prismatic[i] === 1) {
      x += value * d0;
      y += value * d1;
      z += value * d2;
      a0 = b0;
      a3 = b1;
      a6 = b2;
      a1 = c0;
      a4 = c1;
      a7 = c2;
    } else {
      const s = Math.sin(value);
      const c = Math.cos(value);
      a0 = c * b0 + s * c0;
      a3 = c * b1 + s * c1;
      a6 = c * b2 + s * c2;
      a1 = c * c0 - s * b0;
      a4 = c * c1 - s * b1;
      a7 = c * c2 - s * b2;
    }
    a2 = d0;
    a5 = d1;
    a8 = d2;
    frames[o] = a0;
    frames[o + 1] = a1;
    frames[o + 2] = a2;
    frames[o + 3] = a3;
    frames[o + 4] = a4;
    frames[o + 5] = a5;
    frames[o + 6] = a6;
    frames[o + 7] = a7;
    frames[o + 8] = a8;
    frames[o + 9] = x;
    frames[o + 10] = y;
    frames[o + 11] = z;
  }
  const t = chain.tool;
  const o = 12 * n;
  for (let j = 0; j < 3; j++) {
    const u = t[j]!;
    const v = t[j + 3]!;
    const w = t[j + 6]!;
    frames[o + j] = a0 * u + a1 * v + a2 * w;
    frames[o + 3 + j] = a3 * u + a4 * v + a5 * w;
    frames[o + 6 + j] = a6 * u + a7 * v + a8 * w;
  }
  const px = t[9]!;
  const py = t[10]!;
  const pz = t[11]!;
  frames[o + 9] = x + a0 * px + a1 * py + a2 * pz;
  frames[o + 10] = y + a3 * px + a4 * py + a5 * pz;
  frames[o + 11] = z + a6 * px + a7 * py + a8 * pz;
}

/**
 * Pose of the tool point in the base frame.
 *
 * @param q - joint values, rad (sliding joints m)
 * @param out - filled and returned when given; nothing is allocated then
 * @throws RangeError if q has fewer values than the chain has joints
 * @see Siciliano et al., Robotics: Modelling, Planning and Control, §2.8 (direct kinematics)
 */
export function forwardKinematics(chain: Chain, q: ArrayLike<number>, out?: Transform): Transform {
  checkLength(chain, q, 'q');
  sweepFrames(chain, q);
  const to = out ?? emptyTransform();
  const { frames } = chain;
  const o = 12 * chain.n;
  for (let k = 0; k < 9; k++) to.rotation[k] = frames[o + k]!;
  for (let k = 0; k < 3; k++) to.position[k] = frames[o + 9 + k]!;
  return to;
}

/**
 * Poses of all link frames in the base frame: the model's joint frames after their joints' motion.
 *
 * @param out - as many transforms as joints; filled and returned when given
 */
export function linkFrames(chain: Chain, q: ArrayLike<number>, out?: Transform[]): Transform[] {
  checkLength(chain, q, 'q');
  sweepFrames(chain, q);
  const to = out ?? Array.from({ length: chain.n }, emptyTransform);
  const { frames, alignment } = chain;
  for (let i = 0; i < chain.n; i++) {
    const o = 12 * i;
    const { position, rotation } = to[i]!;
    // Inner frame = model frame · alignment, so the model's frame is inner · alignmentᵀ.
    for (let r = 0; r < 3; r++)
      for (let c = 0; c < 3; c++) {
        const a = 9 * i + 3 * c;
        rotation[3 * r + c] =
          frames[o + 3 * r]! * alignment[a]! +
          frames[o + 3 * r + 1]! * alignment[a + 1]! +
          frames[o + 3 * r + 2]! * alignment[a + 2]!;
      }
    for (let k = 0; k < 3; k++) position[k] = frames[o + 9 + k]!;
  }
  return to;
}

/** a·b: the pose that b has where its own base is a. */
export function composeTransforms(a: Transform, b: Transform): Transform {
  const [x, y, z] = b.position;
  const r = a.rotation;
  return {
    position: [
      a.position[0] + r[0]! * x + r[1]! * y + r[2]! * z,
      a.position[1] + r[3]! * x + r[4]! * y + r[5]! * z,
      a.position[2] + r[6]! * x + r[7]! * y + r[8]! * z,
    ],
    rotation: multiply3(r, b.rotation),
  };
}

export function emptyTransform(): Transform {
  // 0.5 and not 0: an array that begins as integers is rebuilt by the engine at its first fraction.
  return { position: [0.5, 0.5, 0.5], rotation: new Float64Array(9) };
}

export function checkLength(chain: Chain, values: ArrayLike<number>, name: string): void {
  if (values.length < chain.n)
    throw new RangeError(`${name} has ${values.length} values, the arm has ${chain.n} joints`);
}
