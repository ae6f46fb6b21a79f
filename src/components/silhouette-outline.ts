import type { ArmModel } from '../../shared/arm/model';
import { type Chain, compileChain, forwardKinematics, linkFrames } from '../../shared/kinematics';

/** A place in the side view: distance out from the base's axis and height, m. */
export type SidePoint = [out: number, up: number];

export interface Outline {
  /** Base, then every joint in order, then the tool point. */
  points: SidePoint[];
  /** Which of the points are joints. */
  joints: number[];
  /** How many points, from the base, stand on the base's own axis: the pedestal. */
  pedestal: number;
  /** Where the side view looks at, seen from above: rad, 0 = ahead, positive = left. */
  turn: number;
}

const chains = new WeakMap<ArmModel, Chain>();
function chainOf(model: ArmModel): Chain {
  let chain = chains.get(model);
  if (!chain) {
    chain = compileChain(model);
    chains.set(model, chain);
  }
  return chain;
}

/** Nearer to the axis than this a joint stands on it, m. */
const ON_AXIS = 1e-3;
/** Points this near to a plane (as a share of the reach) lie in it. */
const IN_PLANE = 0.02;

/** The longest the arm can be, m: one scale for all silhouettes of an arm, so that they compare. */
export function reachOf(model: ArmModel): { out: number; up: number } {
  let pedestal = 0;
  let arm = Math.hypot(...model.tool.xyz);
  let onAxis = true;
  for (const joint of model.joints) {
    const [x, y, z] = joint.origin.xyz;
    onAxis &&= Math.hypot(x, y) < ON_AXIS;
    if (onAxis) pedestal += z;
    else arm += Math.hypot(x, y, z);
    if (joint.type === 'prismatic')
      arm += Math.max(Math.abs(joint.limits.lower), Math.abs(joint.limits.upper));
  }
  return { out: arm, up: pedestal + arm };
}

/** The arm seen from the side it bends in. A sliding joint shows where it slid from, too. */
export function outline(model: ArmModel, q: readonly number[]): Outline {
  const chain = chainOf(model);
  const tool = forwardKinematics(chain, q).position;
  const places: (readonly [number, number, number])[] = [[0, 0, 0]];
  const joints: number[] = [];
  const frames = linkFrames(chain, q);
  for (const [i, joint] of model.joints.entries()) {
    if (joint.type === 'prismatic') {
      const unslid = q.map((value, k) => (k === i ? 0 : value));
      places.push(linkFrames(chain, unslid)[i]!.position);
    } else joints.push(places.length);
    places.push(frames[i]!.position);
  }
  places.push(tool);
  const turn = planeOf(model, q, places, tool);
  const points = places.map(([x, y, z]): SidePoint => [x * Math.cos(turn) + y * Math.sin(turn), z]);
  const off = places.findIndex(([x, y]) => Math.hypot(x, y) >= ON_AXIS);
  return { points, joints, pedestal: off < 0 ? places.length : off, turn };
}

/**
 * The vertical plane the arm lies in, as the base turns; for arms that do not lie in one (a SCARA), the plane
 * of the tool. The first keeps "ahead" ahead when the arm reaches over its own back.
 */
function planeOf(
  model: ArmModel,
  q: readonly number[],
  places: readonly (readonly [number, number, number])[],
  tool: readonly [number, number, number],
): number {
  const base = model.joints[0];
  const upright = base?.type === 'revolute' && Math.hypot(base.axis[0], base.axis[1]) < ON_AXIS;
  if (upright) {
    const turn = (q[0] ?? 0) * Math.sign(base.axis[2]);
    const reach = reachOf(model).out;
    const flat = places.every(
      ([x, y]) => Math.abs(y * Math.cos(turn) - x * Math.sin(turn)) < IN_PLANE * reach,
    );
    if (flat) return turn;
  }
  return Math.hypot(tool[0], tool[1]) < ON_AXIS ? 0 : Math.atan2(tool[1], tool[0]);
}
