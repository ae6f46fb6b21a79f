import type { Chain } from '../kinematics';
import type { JointPath } from './joint-path';
import type { AxisLimits, AxisState } from './profile';
import { splineRates, splineValue } from './spline';
import { type ToolPath, toolPathLimits } from './tool-path';

/** What a motion follows: one parameter from 0 to `length`, driven by one law of time. */
export type MotionPath = JointPath | ToolPath;

/** The joint values at parameter s, into `out`. */
export function alongPath<Out extends number[] | Float64Array>(path: MotionPath, s: number, out: Out): Out {
  if (path.kind === 'tool') {
    splineValue(path.spline, s, out);
    for (let i = 0; i < path.spline.n; i++) out[i] = keptInside(out[i]!, path.lower[i]!, path.upper[i]!);
  } else for (let i = 0; i < path.direction.length; i++) out[i] = path.from[i]! + path.direction[i]! * s;
  return out;
}

/** Beyond a limit by so little is rounding; keeping more back would be felt as a jerk, and is for the supervisor to object to. */
const ROUNDING = 1e-8;
const keptInside = (value: number, lower: number, upper: number): number =>
  value < lower && value > lower - ROUNDING
    ? lower
    : value > upper && value < upper + ROUNDING
      ? upper
      : value;

const bends: Float64Array[] = [];

/** Joint speeds and accelerations for a parameter in this state, into `qd` and `qdd`. */
export function pathRates(
  path: MotionPath,
  s: Readonly<AxisState>,
  qd: number[] | Float64Array,
  qdd: number[] | Float64Array,
): void {
  const { velocity, acceleration } = s;
  if (path.kind === 'joint') {
    const { direction } = path;
    for (let i = 0; i < direction.length; i++) {
      qd[i] = direction[i]! * velocity;
      qdd[i] = direction[i]! * acceleration;
    }
    return;
  }
  const { n } = path.spline;
  bends[n] ??= new Float64Array(n);
  const bend = bends[n]!;
  splineRates(path.spline, s.position, qd, bend);
  for (let i = 0; i < n; i++) {
    qdd[i] = qd[i]! * acceleration + bend[i]! * velocity * velocity;
    qd[i]! *= velocity;
  }
}

/** Whether a joint moves anywhere on the path. */
export function pathMoves(path: MotionPath, joint: number): boolean {
  if (path.kind === 'joint') return path.direction[joint] !== 0;
  const { n, q } = path.spline;
  for (let o = joint + n; o < q.length; o += n) if (q[o] !== q[joint]) return true;
  return false;
}

export interface PathCaps {
  /** Share of each joint's own speed limit: the lower of ceiling and step speed. */
  fraction: number;
  /** Largest speed of the fastest modelled point, m/s; Infinity for none. */
  pointSpeed: number;
}

/**
 * Limits of s that keep every joint inside its own velocity, acceleration and jerk limits and the arm inside the caps.
 *
 * @param going - how fast s runs already, where the motion is under way
 * @param stretch - the part of the path that counts, from and to in s; a straight joint path is the same everywhere
 */
export function pathLimits(
  chain: Chain,
  path: MotionPath,
  caps: PathCaps,
  going = 0,
  stretch?: readonly [number, number],
): AxisLimits {
  if (path.kind === 'tool')
    return toolPathLimits(chain, path, caps.fraction, caps.pointSpeed, Math.abs(going), stretch);
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
