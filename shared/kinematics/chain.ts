import {
  alignZ,
  multiply3,
  rotateBack,
  rotateTensorBack,
  rotationFromRpy,
  transposeMultiply3,
} from './rotation';

export type Vec3 = [number, number, number];
/** Three numbers, checked when compiled; JSON and the arm model's tuples both fit. */
type ReadonlyVec3 = readonly number[];

/** Gravity where the model names none: standard gravity straight down in the base frame, m/s². */
export const STANDARD_GRAVITY: ReadonlyVec3 = [0, 0, -9.80665];

/** Pose of one frame in another: m, and fixed-axis roll, pitch, yaw in rad, R = Rz(yaw)·Ry(pitch)·Rx(roll). */
export interface ChainOrigin {
  readonly xyz: ReadonlyVec3;
  readonly rpy: ReadonlyVec3;
}

/** Mass (kg), centre of mass (m) and inertia about it (kg·m², tensor's signs: ixy = −∫xy dm) in the frame a body is fixed to. */
export interface RigidBody {
  readonly mass: number;
  readonly com: ReadonlyVec3;
  readonly inertia: {
    readonly ixx: number;
    readonly iyy: number;
    readonly izz: number;
    readonly ixy: number;
    readonly ixz: number;
    readonly iyz: number;
  };
}

export interface ChainJoint {
  readonly name: string;
  readonly type: 'revolute' | 'prismatic';
  /** Joint frame in the frame of the link before it (the first: in the base frame) at joint value 0. */
  readonly origin: ChainOrigin;
  /** Direction of the axis in the joint frame; any length but zero. */
  readonly axis: ReadonlyVec3;
  /** rad, rad/s, rad/s², rad/s³; sliding joints m, m/s … What is left out counts as unlimited. */
  readonly limits: {
    readonly lower: number;
    readonly upper: number;
    readonly velocity?: number;
    readonly acceleration?: number;
    readonly jerk?: number;
  };
  /** The mechanical range, where it is known; `worstReach` counts a sliding joint's whole mechanical travel. */
  readonly hardRange?: { readonly lower: number; readonly upper: number };
  /** The body this joint moves; `end` is its far end in the link frame, m, where that is not the next joint. */
  readonly link: RigidBody & { readonly end?: ReadonlyVec3 };
}

/** The joint description: what the arm model says about moving bodies. An arm model can be given as it is. */
export interface ChainModel {
  readonly joints: readonly ChainJoint[];
  /** Tool frame in the last link's frame. */
  readonly tool: ChainOrigin;
  /** m/s² in the base frame. */
  readonly gravity?: ReadonlyVec3;
}

/**
 * An arm compiled for computing. Every joint frame is turned once, here, so that its axis is its own z: a
 * joint then costs one sine and one cosine and no general rotation. Those inner frames never leave the maths;
 * `alignment` turns them back into the frames of the model.
 *
 * A chain holds the working memory of its functions. It is for one thread, and results that were not given an
 * `out` are fresh.
 */
export interface Chain {
  /** Number of joints. */
  readonly n: number;
  readonly names: readonly string[];
  /** 1 for a sliding joint, 0 for a turning one. */
  readonly prismatic: Uint8Array;
  /** Soft limits, rad or m. */
  readonly lower: Float64Array;
  readonly upper: Float64Array;
  /** Largest speed, acceleration and jerk of each joint; Infinity where the model names none. */
  readonly velocity: Float64Array;
  readonly acceleration: Float64Array;
  readonly jerk: Float64Array;
  /** m/s², base frame. */
  readonly gravity: Float64Array;
  /** Per joint 12 numbers: rotation (row-major) and position in the frame before, at joint value 0. */
  readonly fixed: Float64Array;
  /** Tool frame in the last inner frame, 12 numbers. */
  readonly tool: Float64Array;
  /** Per joint 9 numbers: rotation from the inner frame to the model's joint frame. */
  readonly alignment: Float64Array;
  /** Per joint 10 numbers about the inner frame's origin: mass, mass·com (3), inertia xx yy zz xy xz yz. */
  readonly bodies: Float64Array;
  /** Modelled points: 3 coordinates each, in the inner frame of link `pointLinks[k]`, link by link. */
  readonly points: Float64Array;
  readonly pointLinks: Uint8Array;
  /** Largest distance from 0 that a sliding joint can be at, m; 0 for turning joints. */
  readonly travel: Float64Array;
  /** Working memory: 12 numbers per joint frame in the base frame, then the tool frame. */
  readonly frames: Float64Array;
  /** Working memory of other modules, made when first used. */
  readonly memory: Map<string, unknown>;
}

/**
 * Compiles a joint description.
 *
 * @throws RangeError naming the joint if a number is not finite (limits may be infinite), an axis is zero,
 *   limits are crossed or there is no joint. Bodies are not judged: textbook tables have unphysical ones.
 */
export function compileChain(model: ChainModel): Chain {
  const n = model.joints.length;
  if (n === 0) throw new RangeError('an arm needs at least one joint');
  const chain = emptyChain(model, n);
  let alignBefore = new Float64Array([1, 0, 0, 0, 1, 0, 0, 0, 1]);
  model.joints.forEach((joint, i) => {
    checkJoint(joint, i);
    const align = alignZ(joint.axis);
    writePose(chain.fixed, 12 * i, joint.origin, alignBefore, align);
    chain.alignment.set(align, 9 * i);
    chain.bodies.set(bodyAboutOrigin(joint.link, align), 10 * i);
    if (joint.type === 'prismatic') {
      const range = joint.hardRange ?? joint.limits;
      chain.travel[i] = Math.max(Math.abs(range.lower), Math.abs(range.upper));
    }
    alignBefore = align;
  });
  checkThree(model.tool.xyz, 'the tool frame: xyz');
  checkThree(model.tool.rpy, 'the tool frame: rpy');
  checkThree(model.gravity ?? STANDARD_GRAVITY, 'gravity');
  writePose(chain.tool, 0, model.tool, alignBefore, null);
  return chain;
}

function emptyChain(model: ChainModel, n: number): Chain {
  const limit = (key: 'lower' | 'upper' | 'velocity' | 'acceleration' | 'jerk') =>
    Float64Array.from(model.joints, (joint) => joint.limits[key] ?? Number.POSITIVE_INFINITY);
  const points = modelledPoints(model);
  return {
    n,
    names: model.joints.map((joint) => joint.name),
    prismatic: Uint8Array.from(model.joints, (joint) => (joint.type === 'prismatic' ? 1 : 0)),
    lower: limit('lower'),
    upper: limit('upper'),
    velocity: limit('velocity'),
    acceleration: limit('acceleration'),
    jerk: limit('jerk'),
    gravity: Float64Array.from(model.gravity ?? STANDARD_GRAVITY),
    fixed: new Float64Array(12 * n),
    tool: new Float64Array(12),
    alignment: new Float64Array(9 * n),
    bodies: new Float64Array(10 * n),
    points: Float64Array.from(points.flatMap((point) => point.at)),
    pointLinks: Uint8Array.from(points, (point) => point.link),
    travel: new Float64Array(n),
    frames: new Float64Array(12 * (n + 1)),
    memory: new Map(),
  };
}

/**
 * The points that stand for the arm's body: each link's origin, where the next joint sits on it, its far end
 * where the model gives one, and the tool point. A straight link between two of them is nowhere faster than at them.
 */
function modelledPoints(model: ChainModel): { link: number; at: Vec3 }[] {
  return model.joints.flatMap((joint, link) => {
    const align = alignZ(joint.axis);
    const next = model.joints[link + 1]?.origin.xyz ?? model.tool.xyz;
    const places: ReadonlyVec3[] = [[0, 0, 0], next, ...(joint.link.end ? [joint.link.end] : [])];
    return places.map((place) => ({ link, at: rotateBack(align, place) }));
  });
}

function writePose(
  to: Float64Array,
  offset: number,
  origin: ChainOrigin,
  alignBefore: Float64Array,
  align: Float64Array | null,
): void {
  const turned = transposeMultiply3(alignBefore, rotationFromRpy(origin.rpy));
  to.set(align ? multiply3(turned, align) : turned, offset);
  to.set(rotateBack(alignBefore, origin.xyz), offset + 9);
}

/** A body's ten inertial numbers about the inner frame's origin (parallel-axis theorem). */
function bodyAboutOrigin(body: RigidBody, align: Float64Array): Float64Array {
  const { ixx, iyy, izz, ixy, ixz, iyz } = body.inertia;
  const [x, y, z] = rotateBack(align, body.com);
  const t = rotateTensorBack(align, Float64Array.of(ixx, ixy, ixz, ixy, iyy, iyz, ixz, iyz, izz));
  const m = body.mass;
  return Float64Array.of(
    m,
    m * x,
    m * y,
    m * z,
    t[0]! + m * (y * y + z * z),
    t[4]! + m * (x * x + z * z),
    t[8]! + m * (x * x + y * y),
    t[1]! - m * x * y,
    t[2]! - m * x * z,
    t[5]! - m * y * z,
  );
}

function checkJoint(joint: ChainJoint, index: number): void {
  const where = `joint ${index + 1} (${joint.name})`;
  const { lower, upper } = joint.limits;
  if (joint.type !== 'revolute' && joint.type !== 'prismatic')
    throw new RangeError(`${where}: the type is ${String(joint.type)}, expected revolute or prismatic`);
  checkThree(joint.origin.xyz, `${where}: origin.xyz`);
  checkThree(joint.origin.rpy, `${where}: origin.rpy`);
  checkThree(joint.axis, `${where}: axis`);
  checkThree(joint.link.com, `${where}: link.com`);
  if (joint.link.end) checkThree(joint.link.end, `${where}: link.end`);
  if (Math.hypot(...joint.axis) < 1e-9) throw new RangeError(`${where}: the axis is the zero vector`);
  if (!(lower <= upper))
    throw new RangeError(`${where}: the lower limit ${lower} is not below the upper limit ${upper}`);
  checkNumbers([joint.link.mass, ...Object.values(joint.link.inertia)], `${where}: link`);
}

function checkNumbers(values: Iterable<number>, what: string): void {
  for (const value of values)
    if (!Number.isFinite(value)) throw new RangeError(`${what}: ${value} is not a finite number`);
}

function checkThree(values: readonly number[], what: string): void {
  if (values.length !== 3) throw new RangeError(`${what} has ${values.length} numbers, expected 3`);
  checkNumbers(values, what);
}
