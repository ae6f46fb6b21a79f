import { type Chain, fastestPointSpeed } from '../kinematics';

/**
 * A straight path in joint space: q(s) = from + s·(to − from)/length for s from 0 to `length`. One law of
 * time s(t) moves all joints, so pausing, slowing and stopping keep the arm on the path and every joint
 * arrives at the same moment. s is the travel of the joint that travels farthest (rad or m).
 */
export interface JointPath {
  kind: 'joint';
  from: number[];
  /** dq/ds, each within ±1. */
  direction: number[];
  length: number;
  /** Speed of the fastest modelled point per unit of ds/dt, the largest found along the path; m per unit of s. */
  pointSpeed: number;
}

/** How many places along a path are looked at for the speed of the fastest point. */
const POINT_SAMPLES = 48;
/** Between two looks the fastest point may be this much faster still. */
const POINT_MARGIN = 1.02;

/** @param reach - where the configuration is not known: worst reach per joint (m), used instead of looking along the path */
export function jointPath(
  chain: Chain,
  from: ArrayLike<number>,
  to: ArrayLike<number>,
  reach?: ArrayLike<number>,
): JointPath {
  const n = chain.n;
  let length = 0;
  for (let i = 0; i < n; i++) length = Math.max(length, Math.abs(to[i]! - from[i]!));
  const direction = Array.from({ length: n }, (_, i) => (length > 0 ? (to[i]! - from[i]!) / length : 0));
  let pointSpeed = 0;
  if (reach) for (let i = 0; i < n; i++) pointSpeed += Math.abs(direction[i]!) * reach[i]!;
  else if (length > 0) {
    const q = new Float64Array(n);
    for (let k = 0; k <= POINT_SAMPLES; k++) {
      const s = (length * k) / POINT_SAMPLES;
      for (let i = 0; i < n; i++) q[i] = from[i]! + direction[i]! * s;
      pointSpeed = Math.max(pointSpeed, fastestPointSpeed(chain, q, direction));
    }
    const moving = direction.filter((d) => d !== 0).length;
    // With one joint moving, every point keeps its distance to the axis: nothing can be faster between looks.
    if (moving > 1) pointSpeed *= POINT_MARGIN;
  }
  return { kind: 'joint', from: Array.from(from).slice(0, n), direction, length, pointSpeed };
}
