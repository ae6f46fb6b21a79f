import type { Chain, Vec3 } from './chain';
import { forwardKinematics, type Transform } from './frames';
import { AXIS, type CompiledTask, compileTask, emptyTask, POSE, POSITION, TILT, tiltOf } from './ik-task';
import { multiply3, rotationAbout, rotationVector } from './rotation';
import { tiltAxisOf } from './tilt';

/** Where a straight line ends, base frame. With only a position the tool's rotation is left free. */
export interface LineTarget {
  /** m */
  position: ArrayLike<number>;
  /** Rotation at the end, 3×3 row-major; turned to about one fixed axis the short way. */
  rotation?: ArrayLike<number>;
  /** Or a turn on the way about a fixed direction of the base frame, rad, of any size; 0 keeps the rotation. */
  turn?: { axis: ArrayLike<number>; angle: number };
  /** Or a direction of the tool frame that stays parallel to itself, turns about it being free. */
  keep?: ArrayLike<number>;
  /** Or by how much the tool's tilt changes on the way, rad, for arms that can only tilt it (`tiltAxisOf`); 0 keeps it. */
  tilt?: number;
}

/** A task that moves with the fraction of the way. */
export interface MovingTask {
  kind: CompiledTask['kind'];
  from: Transform;
  /** Way of the tool point, m. */
  way: Vec3;
  /** Unit axis in the base frame and angle, rad. */
  axis: Vec3;
  angle: number;
  /** Tool direction that is kept, and where it points. */
  toolAxis: Float64Array;
  baseAxis: Float64Array;
  /** d(tool pose)/ds: way, then axis · angle. */
  twist: Float64Array;
  tiltJoint: number;
  /** Tilt at the start and its change on the way, rad. */
  tilt: number;
  tilting: number;
  /** For `placeTask`. */
  turned: Float64Array;
}

/** @param start - where the line begins, rad (m) */
export function movingTask(chain: Chain, start: ArrayLike<number>, target: LineTarget): MovingTask {
  const { rotation: toRotation, turn, keep, tilt } = target;
  if ([toRotation, turn, keep, tilt].filter((given) => given !== undefined).length > 1)
    throw new RangeError('a line has one of rotation, turn, keep and tilt');
  const kind = toRotation || turn ? POSE : keep ? AXIS : tilt !== undefined ? TILT : POSITION;
  const tilts = kind === TILT ? tiltAxisOf(chain) : null;
  if (kind === TILT && !(tilts && Number.isFinite(tilt)))
    throw new RangeError('tilt: this arm has no joint that tilts its tool, or the angle is not finite');
  // After the tilt axis, whose search moves the chain's frames.
  const from = forwardKinematics(chain, start);
  const checked = emptyTask();
  const { position, rotation } = from;
  compileTask(
    {
      position: target.position,
      rotation: kind === POSE ? (target.rotation ?? rotation) : undefined,
      axis: target.keep ? { tool: target.keep, base: timesVector(rotation, target.keep) } : undefined,
    },
    checked,
  );
  const way = position.map((value, k) => checked.position[k]! - value) as Vec3;
  const { axis, angle } = turnOf(from, target);
  return {
    kind,
    from,
    way,
    axis,
    angle,
    toolAxis: tilts ? Float64Array.from(tilts.toolAxis) : checked.toolAxis,
    tiltJoint: tilts?.joint ?? 0,
    tilt: tilts ? tiltOf(chain, tilts.joint, tilts.toolAxis) : 0,
    tilting: tilt ?? 0,
    baseAxis: checked.baseAxis,
    twist: Float64Array.of(...way, ...axis.map((value) => value * angle)),
    turned: new Float64Array(9),
  };
}

/** Writes the task at fraction s of the way. */
export function placeTask(moving: MovingTask, s: number, to: CompiledTask): void {
  to.kind = moving.kind;
  for (let k = 0; k < 3; k++) {
    to.position[k] = moving.from.position[k]! + s * moving.way[k]!;
    to.toolAxis[k] = moving.toolAxis[k]!;
    to.baseAxis[k] = moving.baseAxis[k]!;
  }
  to.tiltJoint = moving.tiltJoint;
  to.tilt = moving.tilt + s * moving.tilting;
  if (moving.kind === POSE)
    multiply3(rotationAbout(moving.axis, s * moving.angle, moving.turned), moving.from.rotation, to.rotation);
}

function turnOf(from: Transform, target: LineTarget): { axis: Vec3; angle: number } {
  if (target.turn) {
    const { axis, angle } = target.turn;
    const length = Math.hypot(axis[0]!, axis[1]!, axis[2]!);
    if (!(length > 0) || !Number.isFinite(length) || !Number.isFinite(angle))
      throw new RangeError(
        `turn: axis of length ${length} and angle ${angle}, expected finite numbers and an axis`,
      );
    return { axis: [axis[0]! / length, axis[1]! / length, axis[2]! / length], angle };
  }
  if (!target.rotation) return { axis: [0, 0, 1], angle: 0 };
  const vector = rotationVector(multiply3(target.rotation, transposed(from.rotation)));
  const angle = Math.hypot(vector[0]!, vector[1]!, vector[2]!);
  if (angle === 0) return { axis: [0, 0, 1], angle };
  return { axis: [vector[0]! / angle, vector[1]! / angle, vector[2]! / angle], angle };
}

const transposed = (r: ArrayLike<number>): number[] => [0, 3, 6, 1, 4, 7, 2, 5, 8].map((k) => r[k]!);

const timesVector = (r: ArrayLike<number>, v: ArrayLike<number>): Vec3 =>
  [0, 3, 6].map((k) => r[k]! * v[0]! + r[k + 1]! * v[1]! + r[k + 2]! * v[2]!) as Vec3;
