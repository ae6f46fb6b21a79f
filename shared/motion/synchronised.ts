import { approach, finish, goWay, type Way, wayTo } from './position';
import { type AxisLimits, type AxisState, addPhase, beginProfile, checkAxis, type Profile } from './profile';
import { risingRootNewton, type Sloped } from './root';
import { addVelocityChange, changeVelocity, newVelocityChange } from './velocity';

const up = newVelocityChange();
const down = newVelocityChange();
const at: Sloped = { value: 0, slope: 1 };

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
  const axes = starts.map((start, i) => begin(start, targets[i]!, limits[i]!));
  let duration = 0;
  for (const { quickest } of axes) duration = Math.max(duration, quickest.duration);
  return axes.map((axis, i) =>
    axis.quickest.duration === duration ? axis.quickest : stretched(axis, targets[i]!, limits[i]!, duration),
  );
}

/** An axis brought inside its limits, and the quickest way on from there. */
interface Axis {
  approached: Profile;
  sign: number;
  way: Way | null;
  quickest: Profile;
}

function begin(start: AxisState, target: number, limits: AxisLimits): Axis {
  checkAxis(start, target, limits);
  const approached = beginProfile(start);
  const sign = approach(approached, target, limits);
  const way = sign === 0 ? null : wayTo(approached, target, sign, limits);
  const { position, velocity, acceleration } = approached.end;
  const quickest = {
    duration: approached.duration,
    phases: approached.phases.slice(),
    end: { position, velocity, acceleration },
  };
  return { approached, sign, way, quickest: goWay(quickest, sign, way, target, limits) };
}

function stretched(axis: Axis, target: number, limits: AxisLimits, duration: number): Profile {
  const { approached: profile, sign, way, quickest } = axis;
  if (way?.kind !== 'cruise') return waiting(quickest, duration);
  const { acceleration: amax, jerk } = limits;
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
  /** Rises with the velocity: the time left over at the end. Its slope: (cruise + (p₁ + p₂)/2j)/w, p the largest accelerations. */
  const spare = (velocity: number, out: Sloped): Sloped => {
    const cruise = cruiseAt(velocity);
    out.value = left - (up.lead + up.first + up.hold + up.last + cruise + down.first + down.hold + down.last);
    out.slope = (cruise + (up.last + down.last) / 2) / velocity;
    return out;
  };
  let low = way.velocity;
  for (let i = 0; i < 60 && spare(low, at).value > 0; i++) low /= 2;
  const guess = Math.max(low, Math.min(way.velocity, wanted / left));
  const velocity = risingRootNewton(spare, low, way.velocity, guess, 32 * Number.EPSILON * duration);
  const cruise = cruiseAt(velocity);
  if (!(cruise >= 0) || Math.abs(spare(velocity, at).value) > 1e-9) return waiting(quickest, duration);
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
