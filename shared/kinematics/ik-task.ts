import type { Chain } from './chain';

/** What the tool shall do, in the base frame. */
export interface IkTask {
  /** Where the tool point shall be, m. */
  position: ArrayLike<number>;
  /** How the tool frame shall be turned: 3×3, row-major. */
  rotation?: ArrayLike<number>;
  /** Or only where one of its directions shall point: `tool` is fixed to the tool, `base` to the base; any lengths but 0. */
  axis?: { tool: ArrayLike<number>; base: ArrayLike<number> };
}

export const POSE = 0;
export const POSITION = 1;
export const AXIS = 2;
/** Of a line only: the tool point, and how far the tool leans from upright in the plane of the arm. */
export const TILT = 3;

/** A task in the form the inner loops read. */
export interface CompiledTask {
  kind: typeof POSE | typeof POSITION | typeof AXIS | typeof TILT;
  position: Float64Array;
  rotation: Float64Array;
  /** Unit vectors. */
  toolAxis: Float64Array;
  baseAxis: Float64Array;
  /** The joint about whose axis the lean is measured, and the lean of `toolAxis`, rad. */
  tiltJoint: number;
  tilt: number;
}

export function emptyTask(): CompiledTask {
  return {
    kind: POSE,
    position: new Float64Array(3),
    rotation: new Float64Array(9),
    toolAxis: new Float64Array(3),
    baseAxis: new Float64Array(3),
    tiltJoint: 0,
    tilt: 0,
  };
}

/** @throws RangeError if a number is not finite, an axis is zero, or both rotation and axis are asked for */
export function compileTask(task: IkTask, to: CompiledTask): void {
  copyFinite(task.position, to.position, 'position');
  if (task.rotation && task.axis)
    throw new RangeError(
      'a task has a rotation or an axis, not both: a rotation already fixes every direction',
    );
  if (task.rotation) {
    copyFinite(task.rotation, to.rotation, 'rotation');
    to.kind = POSE;
  } else if (task.axis) {
    copyUnit(task.axis.tool, to.toolAxis, 'axis.tool');
    copyUnit(task.axis.base, to.baseAxis, 'axis.base');
    to.kind = AXIS;
  } else to.kind = POSITION;
}

function copyFinite(from: ArrayLike<number>, to: Float64Array, name: string): void {
  if (from.length < to.length)
    throw new RangeError(`${name} has ${from.length} numbers, expected ${to.length}`);
  for (let k = 0; k < to.length; k++) {
    const value = from[k]!;
    if (!Number.isFinite(value)) throw new RangeError(`${name}: ${value} is not a finite number`);
    to[k] = value;
  }
}

function copyUnit(from: ArrayLike<number>, to: Float64Array, name: string): void {
  copyFinite(from, to, name);
  const length = Math.hypot(to[0]!, to[1]!, to[2]!);
  if (length === 0) throw new RangeError(`${name} is the zero vector`);
  for (let k = 0; k < 3; k++) to[k] = to[k]! / length;
}

/**
 * Errors of the tool frame in `chain.frames` against a task: what is still to go, in the base frame.
 *
 * @param to - position error (3, m), then rotation vector that would turn the tool right (3, rad); for an
 *   axis task the smallest such turn, for a position task zeros
 */
export function taskError(chain: Chain, task: CompiledTask, to: Float64Array): void {
  const { frames } = chain;
  const o = 12 * chain.n;
  const { position } = task;
  to[0] = position[0]! - frames[o + 9]!;
  to[1] = position[1]! - frames[o + 10]!;
  to[2] = position[2]! - frames[o + 11]!;
  if (task.kind === POSE) poseRotationError(frames, o, task.rotation, to);
  else if (task.kind === AXIS) axisError(frames, o, task, to);
  else if (task.kind === TILT) tiltError(chain, task, to);
  else {
    to[3] = 0;
    to[4] = 0;
    to[5] = 0;
  }
}

/** Rotation vector of target·toolᵀ, from sums over columns: its antisymmetric part is Σ toolₖ × targetₖ, its trace Σ toolₖ · targetₖ. */
function poseRotationError(frames: Float64Array, o: number, r: Float64Array, to: Float64Array): void {
  let x = 0;
  let y = 0;
  let z = 0;
  let trace = 0;
  for (let k = 0; k < 3; k++) {
    const ax = frames[o + k]!;
    const ay = frames[o + 3 + k]!;
    const az = frames[o + 6 + k]!;
    const bx = r[k]!;
    const by = r[3 + k]!;
    const bz = r[6 + k]!;
    x += ay * bz - az * by;
    y += az * bx - ax * bz;
    z += ax * by - ay * bx;
    trace += ax * bx + ay * by + az * bz;
  }
  const s = 0.5 * Math.sqrt(x * x + y * y + z * z);
  const c = 0.5 * (trace - 1);
  if (s < 1e-7 && c < 0) {
    halfTurn(frames, o, r, to);
    return;
  }
  // angle / (2·sin): the 2 because the sums are twice the antisymmetric part.
  const scale = s < 1e-7 ? 0.5 : (0.5 * Math.atan2(s, c)) / s;
  to[3] = scale * x;
  to[4] = scale * y;
  to[5] = scale * z;
}

/** Exactly half a turn off: any of the two senses will do; the axis is the longest column of target·toolᵀ + 1. */
function halfTurn(frames: Float64Array, o: number, r: Float64Array, to: Float64Array): void {
  let longest = 0;
  for (let c = 0; c < 3; c++) {
    let squared = 0;
    for (let row = 0; row < 3; row++) squared += halfTurnEntry(frames, o, r, row, c) ** 2;
    if (squared <= longest) continue;
    longest = squared;
    for (let row = 0; row < 3; row++)
      to[3 + row] = (Math.PI / Math.sqrt(squared)) * halfTurnEntry(frames, o, r, row, c);
  }
}

function halfTurnEntry(frames: Float64Array, o: number, r: Float64Array, row: number, c: number): number {
  let sum = row === c ? 1 : 0;
  for (let k = 0; k < 3; k++) sum += r[3 * row + k]! * frames[o + 3 * c + k]!;
  return sum;
}

function axisError(frames: Float64Array, o: number, task: CompiledTask, to: Float64Array): void {
  const { toolAxis: a, baseAxis: b } = task;
  const x = frames[o]! * a[0]! + frames[o + 1]! * a[1]! + frames[o + 2]! * a[2]!;
  const y = frames[o + 3]! * a[0]! + frames[o + 4]! * a[1]! + frames[o + 5]! * a[2]!;
  const z = frames[o + 6]! * a[0]! + frames[o + 7]! * a[1]! + frames[o + 8]! * a[2]!;
  const cx = y * b[2]! - z * b[1]!;
  const cy = z * b[0]! - x * b[2]!;
  const cz = x * b[1]! - y * b[0]!;
  const s = Math.sqrt(cx * cx + cy * cy + cz * cz);
  const c = x * b[0]! + y * b[1]! + z * b[2]!;
  if (s < 1e-7 && c < 0) {
    // Pointing the wrong way exactly: turn about any direction across it.
    const length = Math.hypot(x, y) > 0.5 ? Math.hypot(x, y) : Math.hypot(y, z);
    const flat = Math.hypot(x, y) > 0.5;
    to[3] = (Math.PI * (flat ? -y : 0)) / length;
    to[4] = (Math.PI * (flat ? x : -z)) / length;
    to[5] = (Math.PI * (flat ? 0 : y)) / length;
    return;
  }
  const scale = s < 1e-7 ? 1 : Math.atan2(s, c) / s;
  to[3] = scale * cx;
  to[4] = scale * cy;
  to[5] = scale * cz;
}

/** How far the tool leans: the angle from the base's z to `toolAxis` about the axis of `tiltJoint`, rad, in `chain.frames`. */
export function tiltOf(chain: Chain, tiltJoint: number, toolAxis: ArrayLike<number>): number {
  const { frames } = chain;
  const o = 12 * chain.n;
  const j = 12 * tiltJoint;
  const x = frames[o]! * toolAxis[0]! + frames[o + 1]! * toolAxis[1]! + frames[o + 2]! * toolAxis[2]!;
  const y = frames[o + 3]! * toolAxis[0]! + frames[o + 4]! * toolAxis[1]! + frames[o + 5]! * toolAxis[2]!;
  const z = frames[o + 6]! * toolAxis[0]! + frames[o + 7]! * toolAxis[1]! + frames[o + 8]! * toolAxis[2]!;
  // z × axis = (−y, x, 0), along the joint's axis.
  return Math.atan2(x * frames[j + 5]! - y * frames[j + 2]!, z);
}

function tiltError(chain: Chain, task: CompiledTask, to: Float64Array): void {
  const { frames } = chain;
  const j = 12 * task.tiltJoint;
  const off = task.tilt - tiltOf(chain, task.tiltJoint, task.toolAxis);
  const short = off - 2 * Math.PI * Math.round(off / (2 * Math.PI));
  to[3] = short * frames[j + 2]!;
  to[4] = short * frames[j + 5]!;
  to[5] = short * frames[j + 8]!;
}

/** Length of the position part of an error, m. */
export const positionErrorOf = (error: Float64Array): number =>
  Math.sqrt(error[0]! * error[0]! + error[1]! * error[1]! + error[2]! * error[2]!);

/** Length of the rotation part, rad. */
export const rotationErrorOf = (error: Float64Array): number =>
  Math.sqrt(error[3]! * error[3]! + error[4]! * error[4]! + error[5]! * error[5]!);
