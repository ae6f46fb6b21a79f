import type { Chain, RigidBody } from '../kinematics';

/** Working memory of the dynamics of one chain. */
export interface DynamicsMemory {
  /** Joint values, speeds and accelerations as given, copied so that the loops see one kind of array. */
  q: Float64Array;
  qd: Float64Array;
  qdd: Float64Array;
  /** Per joint: rotation (9) and place (3) of its inner frame in the one before. */
  steps: Float64Array;
  /** Per joint: force (3) and moment (3) on its body, then on all that hangs on it. */
  wrenches: Float64Array;
  /** The ten inertial numbers of the last body with its payload. */
  lastBody: Float64Array;
  /** Per joint ten inertial numbers about the base frame's origin (mass matrix). */
  bodiesInBase: Float64Array;
  /** Square matrix and vector for the equations of motion. */
  matrix: Float64Array;
  vector: Float64Array;
}

export function dynamicsMemory(chain: Chain): DynamicsMemory {
  const known = chain.memory.get('dynamics') as DynamicsMemory | undefined;
  if (known) return known;
  const { n } = chain;
  const made: DynamicsMemory = {
    q: new Float64Array(n),
    qd: new Float64Array(n),
    qdd: new Float64Array(n),
    steps: new Float64Array(12 * n),
    wrenches: new Float64Array(6 * n),
    lastBody: new Float64Array(10),
    bodiesInBase: new Float64Array(10 * n),
    matrix: new Float64Array(n * n),
    vector: new Float64Array(n),
  };
  chain.memory.set('dynamics', made);
  return made;
}

/**
 * Writes the ten inertial numbers of the last link together with what the tool carries. A payload's centre
 * and tensor are in the tool frame; about the last inner frame's origin they add to the link's.
 */
export function lastBodyWithPayload(
  chain: Chain,
  payload: RigidBody | null | undefined,
  to: Float64Array,
): void {
  const { bodies, tool, n } = chain;
  for (let k = 0; k < 10; k++) to[k] = bodies[10 * (n - 1) + k]!;
  if (!payload) return;
  const m = payload.mass;
  const cx = payload.com[0]!;
  const cy = payload.com[1]!;
  const cz = payload.com[2]!;
  const t = tool;
  const x = t[0]! * cx + t[1]! * cy + t[2]! * cz + t[9]!;
  const y = t[3]! * cx + t[4]! * cy + t[5]! * cz + t[10]!;
  const z = t[6]! * cx + t[7]! * cy + t[8]! * cz + t[11]!;
  to[0] = to[0]! + m;
  to[1] = to[1]! + m * x;
  to[2] = to[2]! + m * y;
  to[3] = to[3]! + m * z;
  to[4] = to[4]! + m * (y * y + z * z) + turned(t, payload.inertia, 0, 0);
  to[5] = to[5]! + m * (x * x + z * z) + turned(t, payload.inertia, 3, 3);
  to[6] = to[6]! + m * (x * x + y * y) + turned(t, payload.inertia, 6, 6);
  to[7] = to[7]! - m * x * y + turned(t, payload.inertia, 0, 3);
  to[8] = to[8]! - m * x * z + turned(t, payload.inertia, 0, 6);
  to[9] = to[9]! - m * y * z + turned(t, payload.inertia, 3, 6);
}

/** One entry of R·I·Rᵀ: row a of R, then I, then row b of R (a and b are offsets of rows). */
function turned(r: Float64Array, i: RigidBody['inertia'], a: number, b: number): number {
  const x = r[b]!;
  const y = r[b + 1]!;
  const z = r[b + 2]!;
  return (
    r[a]! * (i.ixx * x + i.ixy * y + i.ixz * z) +
    r[a + 1]! * (i.ixy * x + i.iyy * y + i.iyz * z) +
    r[a + 2]! * (i.ixz * x + i.iyz * y + i.izz * z)
  );
}
