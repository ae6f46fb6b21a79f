import { type Chain, fastestPointSpeed } from '../kinematics';
import type { AxisLimits } from './profile';

/**
 * A straight path in joint space: q(s) = from + s·(to − from)/length for s from 0 to `length`. One law of
 * time s(t) moves all joints, so pausing, slowing and stopping keep the arm on the path and every joint
 * arrives at the same moment. s is the travel of the joint that travels farthest (rad or m).
 */
export interface JointPath {
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
  return { from: Array.from(from).slice(0, n), direction, length, pointSpeed };
}

/** The joint values at s, clamped to the path's ends. */
export function alongPath(path: JointPath, s: number, out: number[]): number[] {
  for (let i = 0; i < path.direction.length; i++) out[i] = path.from[i]! + path.direction[i]! * s;
  return out;
}

export interface PathCaps {
  /** Share of each joint's own speed limit: the lower of ceiling and step speed. */
  fraction: number;
  /** Largest speed of the fastest modelled point, m/s; Infinity for none. */
  pointSpeed: number;
}

/** Limits of s that keep every joint inside its own velocity, acceleration and jerk limits and the arm inside the caps. */
export function pathLimits(chain: Chain, path: JointPath, caps: PathCaps): AxisLimits {
  let velocity = Infinity;
  let acceleration = Infinity;
  let jerk = Infinity;
  for (let i = 0; i < chain.n; i++) {
    const share = Math.abs(path.direction[i]!);
    if (share === 0) continue;
    velocity = Math.min(velocity, (chain.velocity[i]! * caps.fraction) / share);
    acceleration = Math.min(acceleration, chain.acceleration[i]! / share);
    jerk = Math.min(jerk, chain.jerk[i]! / share);
  }
  if (path.pointSpeed > 0) velocity = Math.min(velocity, caps.pointSpeed / path.pointSpeed);
  // A path of no length: any limits do, it is over at once.
  if (velocity === Infinity) return { velocity: 1, acceleration: 1, jerk: 1 };
  return { velocity, acceleration, jerk };
}
