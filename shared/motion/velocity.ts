import { type AxisLimits, type AxisState, addPhase, beginProfile, checkAxis, type Profile } from './profile';

/**
 * The quickest change of velocity under acceleration and jerk limits: jerk one way, perhaps hold the
 * acceleration limit, jerk the other way until the acceleration is zero at the velocity asked for.
 * Durations of the three stretches and the jerk of the first; the last has its opposite.
 */
export interface VelocityChange {
  first: number;
  hold: number;
  last: number;
  jerk: number;
  /** Before all that: a start acceleration outside the limit is brought back to it, `lead` s at `leadJerk`. */
  lead: number;
  leadJerk: number;
  /** Position gained over the whole change. */
  distance: number;
}

export function newVelocityChange(): VelocityChange {
  return { first: 0, hold: 0, last: 0, jerk: 0, lead: 0, leadJerk: 0, distance: 0 };
}

/** Position gained in `t` s of constant jerk. */
function gained(t: number, v: number, a: number, j: number): number {
  return t * (v + t * (a / 2 + (t * j) / 6));
}

/** Computes the change from (velocity, acceleration) to (`goal`, 0) into `out`. No allocation. */
export function changeVelocity(
  velocity: number,
  acceleration: number,
  goal: number,
  amax: number,
  jmax: number,
  out: VelocityChange,
): VelocityChange {
  let v = velocity;
  let a = acceleration;
  out.lead = 0;
  out.leadJerk = 0;
  let distance = 0;
  if (a > amax || a < -amax) {
    const sign = a > 0 ? 1 : -1;
    const t = (a * sign - amax) / jmax;
    out.lead = t;
    out.leadJerk = -sign * jmax;
    distance += gained(t, v, a, out.leadJerk);
    v += t * (a + (t * out.leadJerk) / 2);
    a = sign * amax;
  }
  // Letting the acceleration off right now would end at this velocity; go up or down from there.
  const atOnce = v + (a * Math.abs(a)) / (2 * jmax);
  const sign = goal >= atOnce ? 1 : -1;
  const v0 = v * sign;
  const a0 = a * sign;
  const dv = goal * sign - v0;
  // Peak acceleration of the triangle: a_p² = j·dv + a0²/2.
  let peak = Math.sqrt(Math.max(0, jmax * dv + (a0 * a0) / 2));
  let hold = 0;
  if (peak > amax) {
    peak = amax;
    hold = (dv - (2 * amax * amax - a0 * a0) / (2 * jmax)) / amax;
  }
  const first = Math.max(0, (peak - a0) / jmax);
  const last = peak / jmax;
  out.first = first;
  out.hold = hold;
  out.last = last;
  out.jerk = sign * jmax;
  const v1 = v0 + first * (a0 + (first * jmax) / 2);
  const v2 = v1 + hold * peak;
  const own = gained(first, v0, a0, jmax) + hold * (v1 + (hold * peak) / 2) + gained(last, v2, peak, -jmax);
  out.distance = distance + sign * own;
  return out;
}

/** Appends a change of velocity to a profile and pins its exact end velocity. */
export function addVelocityChange(profile: Profile, change: VelocityChange, goal: number): void {
  addPhase(profile, change.lead, change.leadJerk);
  addPhase(profile, change.first, change.jerk);
  addPhase(profile, change.hold, 0);
  addPhase(profile, change.last, -change.jerk);
  profile.end.velocity = goal;
  profile.end.acceleration = 0;
}

const scratch = newVelocityChange();

/**
 * Time-optimal change to a constant velocity, whatever the start state; for jogging and letting go.
 * A goal outside the velocity limits is brought inside them.
 *
 * @param velocity - goal, in the axis' units per s; acceleration ends at 0
 * @throws RangeError for a non-finite start or goal or a limit that is not positive
 * @see Biagiotti & Melchiorri, Trajectory Planning for Automatic Machines and Robots (2008), §3.4 (double S)
 */
export function planVelocity(start: AxisState, velocity: number, limits: AxisLimits): Profile {
  checkAxis(start, velocity, limits);
  const goal = Math.min(limits.velocity, Math.max(limits.velocityMin ?? -limits.velocity, velocity));
  const profile = beginProfile(start);
  changeVelocity(start.velocity, start.acceleration, goal, limits.acceleration, limits.jerk, scratch);
  addVelocityChange(profile, scratch, goal);
  return profile;
}

/** Where the axis comes to rest if it is told to stop now. Units of the position. */
export function restPosition(state: AxisState, limits: AxisLimits): number {
  return (
    state.position +
    changeVelocity(state.velocity, state.acceleration, 0, limits.acceleration, limits.jerk, scratch).distance
  );
}
