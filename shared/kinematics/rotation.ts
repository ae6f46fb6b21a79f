/**
 * Small rotation algebra on row-major 3×3 matrices. Used when a chain is compiled and at the edges; the
 * inner loops write their products out.
 */

type Numbers3 = ArrayLike<number>;

/** R = Rz(yaw)·Ry(pitch)·Rx(roll), the fixed-axis convention of robot descriptions; rad. */
export function rotationFromRpy(rpy: Numbers3): Float64Array {
  const [sr, cr] = [Math.sin(rpy[0]!), Math.cos(rpy[0]!)];
  const [sp, cp] = [Math.sin(rpy[1]!), Math.cos(rpy[1]!)];
  const [sy, cy] = [Math.sin(rpy[2]!), Math.cos(rpy[2]!)];
  return Float64Array.of(
    cy * cp,
    cy * sp * sr - sy * cr,
    cy * sp * cr + sy * sr,
    sy * cp,
    sy * sp * sr + cy * cr,
    sy * sp * cr - cy * sr,
    -sp,
    cp * sr,
    cp * cr,
  );
}

/** Rotation by `angle` (rad) about a unit axis: Rodrigues' formula. */
export function rotationAbout(
  axis: Numbers3,
  angle: number,
  out: Float64Array = new Float64Array(9),
): Float64Array {
  const [x, y, z] = [axis[0]!, axis[1]!, axis[2]!];
  const c = Math.cos(angle);
  const s = Math.sin(angle);
  const k = 1 - c;
  out[0] = c + k * x * x;
  out[1] = k * x * y - s * z;
  out[2] = k * x * z + s * y;
  out[3] = k * x * y + s * z;
  out[4] = c + k * y * y;
  out[5] = k * y * z - s * x;
  out[6] = k * x * z - s * y;
  out[7] = k * y * z + s * x;
  out[8] = c + k * z * z;
  return out;
}

/**
 * A rotation whose third column is the given direction. Directions along a coordinate axis give exact
 * permutations, so a plain arm's numbers stay free of rounding.
 */
export function alignZ(direction: Numbers3): Float64Array<ArrayBuffer> {
  const length = Math.hypot(direction[0]!, direction[1]!, direction[2]!);
  const z = [direction[0]! / length, direction[1]! / length, direction[2]! / length] as const;
  // The coordinate axis least along z makes the best-conditioned first column.
  const size = z.map(Math.abs);
  const k = size.indexOf(Math.min(...size));
  const x = [0, 1, 2].map((i) => (i === k ? 1 : 0) - z[k]! * z[i]!);
  const xLength = Math.hypot(...x);
  const [x0, x1, x2] = x.map((value) => value / xLength) as [number, number, number];
  const y = [z[1] * x2 - z[2] * x1, z[2] * x0 - z[0] * x2, z[0] * x1 - z[1] * x0] as const;
  return Float64Array.of(x0, y[0], z[0], x1, y[1], z[1], x2, y[2], z[2]);
}

export function multiply3(a: Numbers3, b: Numbers3, out: Float64Array = new Float64Array(9)): Float64Array {
  for (let i = 0; i < 9; i += 3)
    for (let j = 0; j < 3; j++) out[i + j] = a[i]! * b[j]! + a[i + 1]! * b[j + 3]! + a[i + 2]! * b[j + 6]!;
  return out;
}

/** Aᵀ·B */
export function transposeMultiply3(
  a: Numbers3,
  b: Numbers3,
  out: Float64Array = new Float64Array(9),
): Float64Array {
  for (let i = 0; i < 3; i++)
    for (let j = 0; j < 3; j++)
      out[3 * i + j] = a[i]! * b[j]! + a[i + 3]! * b[j + 3]! + a[i + 6]! * b[j + 6]!;
  return out;
}

/** Aᵀ·v */
export function rotateBack(a: Numbers3, v: Numbers3): [number, number, number] {
  return [
    a[0]! * v[0]! + a[3]! * v[1]! + a[6]! * v[2]!,
    a[1]! * v[0]! + a[4]! * v[1]! + a[7]! * v[2]!,
    a[2]! * v[0]! + a[5]! * v[1]! + a[8]! * v[2]!,
  ];
}

/** Aᵀ·T·A: a tensor seen from the frame that A turns from. */
export function rotateTensorBack(a: Numbers3, tensor: Numbers3): Float64Array {
  return multiply3(transposeMultiply3(a, tensor), a);
}

/**
 * The rotation vector of R: unit axis times angle (rad, 0 … π), so that R = rotationAbout(axis, angle).
 * Good to rounding at small angles and near π, where the antisymmetric part alone fails.
 */
export function rotationVector(r: Numbers3, out: Float64Array = new Float64Array(3)): Float64Array {
  const x = 0.5 * (r[7]! - r[5]!);
  const y = 0.5 * (r[2]! - r[6]!);
  const z = 0.5 * (r[3]! - r[1]!);
  const c = 0.5 * (r[0]! + r[4]! + r[8]! - 1);
  const s = Math.sqrt(x * x + y * y + z * z);
  if (s < 1e-4 && c < 0) return nearHalfTurn(r, x, y, z, s, c, out);
  // s → 0: angle / sin(angle) → 1 + s²/6, the next term being below rounding.
  const scale = s < 1e-4 ? 1 + (s * s) / 6 : Math.atan2(s, c) / s;
  out[0] = scale * x;
  out[1] = scale * y;
  out[2] = scale * z;
  return out;
}

/** Near a half turn the axis comes from the symmetric part: R + Rᵀ = 2·(cos·I + (1 − cos)·a·aᵀ). */
function nearHalfTurn(
  r: Numbers3,
  x: number,
  y: number,
  z: number,
  s: number,
  c: number,
  out: Float64Array,
): Float64Array {
  const diagonal = [r[0]!, r[4]!, r[8]!];
  const k = diagonal.indexOf(Math.max(...diagonal));
  const column = [0, 1, 2].map((i) => 0.5 * (r[3 * i + k]! + r[3 * k + i]!) - (i === k ? c : 0));
  const length = Math.hypot(...column);
  // The antisymmetric part still knows which way round.
  const sign = column[0]! * x + column[1]! * y + column[2]! * z < 0 ? -1 : 1;
  const angle = Math.atan2(s, c);
  for (let i = 0; i < 3; i++) out[i] = (sign * angle * column[i]!) / length;
  return out;
}
