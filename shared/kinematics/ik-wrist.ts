import type { Chain } from './chain';
import { sweepFrames } from './frames';
import type { CompiledTask } from './ik-task';
import { rotateBack } from './rotation';

/**
 * Closed form for the commonest six-joint arm: axes 2 and 3 parallel, axes 4, 5 and 6 through one point (a
 * spherical wrist). The wrist's centre then depends on the first three joints alone.
 * @see Pieper, "The kinematics of manipulators under computer control" (1968); Siciliano et al., Robotics, §2.12.4
 */

/** What of such an arm does not change with q, and room to work in. */
export interface SphericalWrist {
  /** The wrist's centre in the inner frame of joint 3, and in the tool frame, m. */
  centreInElbow: Float64Array;
  centreInTool: Float64Array;
  /** Rotation and place of each joint's frame at 0 in the one before, from `Chain.fixed`. */
  rotations: Float64Array[];
  places: Float64Array[];
  /** Rotation from the last inner frame to the tool, transposed. */
  toolBack: Float64Array;
  work: Float64Array[];
}

/** Distance, m per m of arm, and sine of an angle below which axes count as meeting or parallel. */
const SAME = 1e-9;
/** Sine of the least angle between axes 1 and 2; below it, q1 says nothing about where the centre is. */
const LEAST_SLANT = 1e-3;
/** A cosine may be this much beyond 1: rounding of a stretched elbow or of a target exactly at a limit of reach. */
const BEYOND = 1e-9;

/** Recognises the structure; null for every other arm. `size` = length of the arm, m. */
export function sphericalWristOf(chain: Chain, size: number): SphericalWrist | null {
  if (chain.n !== 6 || chain.prismatic.includes(1)) return null;
  sweepFrames(chain, new Float64Array(6));
  const axis = (i: number) => [2, 5, 8].map((k) => chain.frames[12 * i + k]!);
  const origin = (i: number) => [9, 10, 11].map((k) => chain.frames[12 * i + k]!);
  if (length(cross(axis(1), axis(2))) > SAME || length(cross(axis(0), axis(1))) < LEAST_SLANT) return null;
  const centre = meetingPoint(origin(3), axis(3), origin(4), axis(4), size);
  const other = meetingPoint(origin(4), axis(4), origin(5), axis(5), size);
  if (!centre || !other || length(minus(centre, other)) > SAME * size) return null;
  const inFrame = (i: number) =>
    Float64Array.from(rotateBack(chain.frames.slice(12 * i, 12 * i + 9), minus(centre, origin(i))));
  return {
    centreInElbow: inFrame(2),
    centreInTool: inFrame(6),
    rotations: Array.from({ length: 6 }, (_, i) => chain.fixed.slice(12 * i, 12 * i + 9)),
    places: Array.from({ length: 6 }, (_, i) => chain.fixed.slice(12 * i + 9, 12 * i + 12)),
    toolBack: Float64Array.from([0, 3, 6, 1, 4, 7, 2, 5, 8], (k) => chain.tool[k]!),
    work: Array.from({ length: 5 }, () => new Float64Array(9)),
  };
}

/**
 * All solutions of a full pose, limits left aside: up to eight (shoulder, elbow and wrist each two ways).
 * Angles that a singular configuration leaves open are taken from the seed.
 *
 * @param out - up to 8·6 joint values, rad
 * @returns how many solutions were written
 */
export function wristSolutions(
  wrist: SphericalWrist,
  task: CompiledTask,
  seed: Float64Array,
  out: Float64Array,
): number {
  const { centreInElbow: w, centreInTool: v, rotations, places } = wrist;
  const { position, rotation: r } = task;
  const base = rotations[0]!;
  const shoulder = rotations[1]!;
  const upper = rotations[2]!;
  const foot = places[0]!;
  const root = places[1]!;
  const t = places[2]!;
  // The wrist's centre, seen from the first joint at 0.
  const dx = position[0]! + r[0]! * v[0]! + r[1]! * v[1]! + r[2]! * v[2]! - foot[0]!;
  const dy = position[1]! + r[3]! * v[0]! + r[4]! * v[1]! + r[5]! * v[2]! - foot[1]!;
  const dz = position[2]! + r[6]! * v[0]! + r[7]! * v[1]! + r[8]! * v[2]! - foot[2]!;
  const px = base[0]! * dx + base[3]! * dy + base[6]! * dz;
  const py = base[1]! * dx + base[4]! * dy + base[7]! * dz;
  const pz = base[2]! * dx + base[5]! * dy + base[8]! * dz;
  // Along axis 2 the centre stands at a height that q2 and q3 do not change: that fixes q1.
  const zx = shoulder[2]!;
  const zy = shoulder[5]!;
  const zz = shoulder[8]!;
  const height = t[2]! + upper[8]! * w[2]! + zx * root[0]! + zy * root[1]! + zz * root[2]!;
  // In the plane across axes 2 and 3, u = turn(q2)·(t + cos(q3)·(a, b) + sin(q3)·(c, d)): |u| fixes q3.
  const a = upper[0]! * w[0]! + upper[1]! * w[1]!;
  const b = upper[3]! * w[0]! + upper[4]! * w[1]!;
  const c = upper[1]! * w[0]! - upper[0]! * w[1]!;
  const d = upper[4]! * w[0]! - upper[3]! * w[1]!;
  const lengths = t[0]! * t[0]! + t[1]! * t[1]! + w[0]! * w[0]! + w[1]! * w[1]!;
  let count = 0;
  for (const q1 of anglesOf(zx * px + zy * py, zx * py - zy * px, height - zz * pz, seed[0]!)) {
    const c1 = Math.cos(q1);
    const s1 = Math.sin(q1);
    const ex = c1 * px + s1 * py - root[0]!;
    const ey = c1 * py - s1 * px - root[1]!;
    const ez = pz - root[2]!;
    const ux = shoulder[0]! * ex + shoulder[3]! * ey + shoulder[6]! * ez;
    const uy = shoulder[1]! * ex + shoulder[4]! * ey + shoulder[7]! * ez;
    const cosine = (ux * ux + uy * uy - lengths) / 2;
    for (const q3 of anglesOf(t[0]! * a + t[1]! * b, t[0]! * c + t[1]! * d, cosine, seed[2]!)) {
      const c3 = Math.cos(q3);
      const s3 = Math.sin(q3);
      const x = t[0]! + c3 * a + s3 * c;
      const y = t[1]! + c3 * b + s3 * d;
      // With the centre on axis 2 any q2 will do.
      const q2 = x * x + y * y < BEYOND * BEYOND ? seed[1]! : Math.atan2(uy, ux) - Math.atan2(y, x);
      count = addWrists(wrist, task, q1, q2, q3, seed, out, count);
    }
  }
  return count;
}

/** Both ways of the wrist for one place of the elbow. */
function addWrists(
  wrist: SphericalWrist,
  task: CompiledTask,
  q1: number,
  q2: number,
  q3: number,
  seed: Float64Array,
  out: Float64Array,
  count: number,
): number {
  const { rotations } = wrist;
  const [m, k, g, middle, rest] = wrist.work as [
    Float64Array,
    Float64Array,
    Float64Array,
    Float64Array,
    Float64Array,
  ];
  // What is left to turn after joint 3: G = turn(q4)·A·turn(q5)·B·turn(q6).
  turnZ(rotations[0]!, q1, m);
  times(m, rotations[1]!, k);
  turnZ(k, q2, k);
  times(k, rotations[2]!, m);
  turnZ(m, q3, m);
  times(m, rotations[3]!, k);
  times(task.rotation, wrist.toolBack, m);
  backTimes(k, m, g);
  const first = rotations[4]!;
  const second = rotations[5]!;
  const bx = second[2]!;
  const by = second[5]!;
  const bz = second[8]!;
  const ax = first[6]!;
  const ay = first[7]!;
  for (const q5 of anglesOf(ax * bx + ay * by, ay * bx - ax * by, g[8]! - first[8]! * bz, seed[4]!)) {
    turnZ(first, q5, m);
    times(m, second, middle);
    const x = middle[2]!;
    const y = middle[5]!;
    // Axes 4 and 6 in line: only the sum of their angles counts.
    const q4 = x * x + y * y < BEYOND * BEYOND ? seed[3]! : Math.atan2(g[5]!, g[2]!) - Math.atan2(y, x);
    turnBack(g, q4, k);
    backTimes(middle, k, rest);
    const o = 6 * count++;
    out[o] = q1;
    out[o + 1] = q2;
    out[o + 2] = q3;
    out[o + 3] = q4;
    out[o + 4] = q5;
    out[o + 5] = Math.atan2(rest[3]! - rest[1]!, rest[0]! + rest[4]!);
  }
  return count;
}

// The products below are here and not in rotation.ts because they see one kind of array only, which the
// compiler rewards tenfold.

/** A·turn about z. */
function turnZ(a: Float64Array, angle: number, out: Float64Array): void {
  const c = Math.cos(angle);
  const s = Math.sin(angle);
  for (let i = 0; i < 9; i += 3) {
    const x = a[i]!;
    const y = a[i + 1]!;
    out[i] = c * x + s * y;
    out[i + 1] = c * y - s * x;
    out[i + 2] = a[i + 2]!;
  }
}

/** Turn about z by −angle · A. */
function turnBack(a: Float64Array, angle: number, out: Float64Array): void {
  const c = Math.cos(angle);
  const s = Math.sin(angle);
  for (let j = 0; j < 3; j++) {
    const x = a[j]!;
    const y = a[j + 3]!;
    out[j] = c * x + s * y;
    out[j + 3] = c * y - s * x;
    out[j + 6] = a[j + 6]!;
  }
}

function times(a: Float64Array, b: Float64Array, out: Float64Array): void {
  for (let i = 0; i < 9; i += 3)
    for (let j = 0; j < 3; j++) out[i + j] = a[i]! * b[j]! + a[i + 1]! * b[j + 3]! + a[i + 2]! * b[j + 6]!;
}

/** Aᵀ·B */
function backTimes(a: Float64Array, b: Float64Array, out: Float64Array): void {
  for (let i = 0; i < 3; i++)
    for (let j = 0; j < 3; j++)
      out[3 * i + j] = a[i]! * b[j]! + a[i + 3]! * b[j + 3]! + a[i + 6]! * b[j + 6]!;
}

/** The angles with a·cos + b·sin = c: two, one where they meet, none; the seed's when every angle will do. */
function anglesOf(a: number, b: number, c: number, seed: number): number[] {
  const r = Math.hypot(a, b);
  if (r < BEYOND) return Math.abs(c) < BEYOND ? [seed] : [];
  const cosine = c / r;
  if (Math.abs(cosine) > 1 + BEYOND) return [];
  const middle = Math.atan2(b, a);
  if (Math.abs(cosine) >= 1) return [cosine > 0 ? middle : middle + Math.PI];
  const half = Math.acos(cosine);
  return [middle + half, middle - half];
}

/** Where two lines meet, or null: they pass each other or are parallel. */
function meetingPoint(p: number[], a: number[], q: number[], b: number[], size: number): number[] | null {
  const normal = cross(a, b);
  const square = dot(normal, normal);
  if (square < 1e-6) return null;
  const between = minus(q, p);
  if (Math.abs(dot(between, normal)) / Math.sqrt(square) > SAME * size) return null;
  const along = dot(cross(between, b), normal) / square;
  return p.map((value, k) => value + along * a[k]!);
}

type Numbers = ArrayLike<number>;
const minus = (a: Numbers, b: Numbers) => [a[0]! - b[0]!, a[1]! - b[1]!, a[2]! - b[2]!];
const dot = (a: Numbers, b: Numbers) => a[0]! * b[0]! + a[1]! * b[1]! + a[2]! * b[2]!;
const length = (a: Numbers) => Math.hypot(a[0]!, a[1]!, a[2]!);
const cross = (a: Numbers, b: Numbers) => [
  a[1]! * b[2]! - a[2]! * b[1]!,
  a[2]! * b[0]! - a[0]! * b[2]!,
  a[0]! * b[1]! - a[1]! * b[0]!,
];
