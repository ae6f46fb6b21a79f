import { approach, finish, planPosition, wayTo } from './position';
import { type AxisLimits, type AxisState, addPhase, beginProfile, type Profile } from './profile';
import { risingRoot } from './root';
import { addVelocityChange, changeVelocity, newVelocityChange } from './velocity';

const up = newVelocityChange();
const down = newVelocityChange();

/**
 * Moves that end together, as early as possible: the slowest axis sets the time, the others travel at a
 * lower velocity. Targets are at rest, so an axis that cannot be made slower in one sweep (because it is
 * still coming down from a fast start) arrives early and waits at its target.
 *
 * @param starts - one state per axis
 * @param targets - rad or m, one per axis
 * @returns one profile per axis, all of the same duration (s)
 * @throws RangeError for non-finite numbers, limits that are not positive, or lists of different length
 */
export function planSynchronised(
  starts: readonly AxisState[],
  targets: ArrayLike<number>,
  limits: readonly AxisLimits[],
): Profile[] {
  if (starts.length !== targets.length || starts.length !== limits.length)
    throw new RangeError(
      `starts, targets and limits differ in length: ${starts.length}, ${targets.length}, ${limits.length}`,
    );
  const profiles = starts.map((start, i) => planPosition(start, targets[i]!, limits[i]!));
  let duration = 0;
  for (const profile of profiles) duration = Math.max(duration, profile.duration);
  return profiles.map((profile, i) =>
    profile.duration === duration
      ? profile
      : stretched(starts[i]!, targets[i]!, limits[i]!, duration, profile),
  );
}

function stretched(
  start: AxisState,
  target: number,
  limits: AxisLimits,
  duration: number,
  quickest: Profile,
): Profile {
  const { acceleration: amax, jerk } = limits;
  const profile = beginProfile(start);
  const sign = approach(profile, target, limits);
  if (sign === 0) return waiting(quickest, duration);
  const vmax = sign > 0 ? limits.velocity : -(limits.velocityMin ?? -limits.velocity);
  const way = wayTo(profile, target, sign, vmax, limits);
  if (way.kind === 'reBrake') return waiting(quickest, duration);
  const { end } = profile;
  const v = end.velocity * sign;
  const a = end.acceleration * sign;
  const wanted = (target - end.position) * sign;
  const left = duration - profile.duration;
  const cruiseAt = (velocity: number): number => {
    changeVelocity(v, a, velocity, amax, jerk, up);
    changeVelocity(velocity, 0, 0, amax, jerk, down);
    return (wanted - up.distance - down.distance) / velocity;
  };
  /** Rises with the velocity: the time left over at the end. */
  const spare = (velocity: number): number => {
    const cruise = cruiseAt(velocity);
    return left - (up.lead + up.first + up.hold + up.last + cruise + down.first + down.hold + down.last);
  };
  let low = way.velocity;
  for (let i = 0; i < 60 && spare(low) > 0; i++) low /= 2;
  const velocity = risingRoot(spare, low, way.velocity, 4 * Number.EPSILON * duration);
  const cruise = cruiseAt(velocity);
  if (!(cruise >= 0) || Math.abs(spare(velocity)) > 1e-9) return waiting(quickest, duration);
  changeVelocity(end.velocity, end.acceleration, sign * velocity, amax, jerk, up);
  addVelocityChange(profile, up, sign * velocity);
  addPhase(profile, cruise, 0);
  finish(profile, target, limits);
  profile.duration = duration;
  return profile;
}

/** Arrives early and waits. */
function waiting(profile: Profile, duration: number): Profile {
  addPhase(profile, duration - profile.duration, 0);
  profile.duration = duration;
  return profile;
}
