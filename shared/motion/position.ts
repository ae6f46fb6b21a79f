import { type AxisLimits, type AxisState, addPhase, beginProfile, checkAxis, type Profile } from './profile';
import { risingRoot, risingRootNewton, type Sloped } from './root';
import { addVelocityChange, changeVelocity, newVelocityChange, restPosition } from './velocity';

/**
 * A rest position this near the target, relative to the numbers at hand, is the target: what is left is
 * rounding, and a profile for it would be noise.
 */
const AT_TARGET = 4 * Number.EPSILON;

const up = newVelocityChange();
const down = newVelocityChange();

/**
 * The quickest way to stand still at `target`, from any state, also one outside the limits (those are
 * entered again as fast as the jerk allows). Ends at rest, exactly at the target.
 *
 * Two families of laws contain the optimum. (1) Change to a velocity v, keep it for a while if it is the
 * velocity limit, change to zero. (2) From a state that already brakes: let go of the brake for a while,
 * then brake again, the acceleration never reaching zero. In both, where the axis ends rises with one
 * unknown, which is found by a bracketed root.
 *
 * @param target - rad or m
 * @throws RangeError for a non-finite start or target or a limit that is not positive
 * @see Biagiotti & Melchiorri, Trajectory Planning for Automatic Machines and Robots (2008), §3.4 (double S);
 *   Kröger, On-Line Trajectory Generation in Robotic Systems (2010) for arbitrary start states
 */
export function planPosition(start: AxisState, target: number, limits: AxisLimits): Profile {
  checkAxis(start, target, limits);
  const profile = beginProfile(start);
  const sign = approach(profile, target, limits);
  return goWay(profile, sign, sign === 0 ? null : wayTo(profile, target, sign, limits), target, limits);
}

/** Appends a way and the stop after it. */
export function goWay(
  profile: Profile,
  sign: number,
  way: Way | null,
  target: number,
  limits: AxisLimits,
): Profile {
  if (way) {
    if (way.kind === 'reBrake') addPhase(profile, way.letGo, sign * limits.jerk);
    else {
      changeVelocity(
        profile.end.velocity,
        profile.end.acceleration,
        sign * way.velocity,
        limits.acceleration,
        limits.jerk,
        up,
      );
      addVelocityChange(profile, up, sign * way.velocity);
      addPhase(profile, way.cruise, 0);
    }
  }
  return finish(profile, target, limits);
}

/** How the target is approached once the state is inside the limits. */
export type Way = { kind: 'cruise'; velocity: number; cruise: number } | { kind: 'reBrake'; letGo: number };

/**
 * Brings the state inside the limits (phases are appended) and tells in which direction the target lies
 * from where the axis would stop: 1, −1, or 0 when stopping is all there is to do.
 */
export function approach(profile: Profile, target: number, limits: AxisLimits): number {
  const { end } = profile;
  const { acceleration: amax, jerk } = limits;
  const gap = target - restPosition(end, limits);
  const scale = Math.abs(target) + Math.abs(end.position) + Math.abs(target - end.position);
  if (Math.abs(gap) <= AT_TARGET * scale) return 0;
  const sign = gap > 0 ? 1 : -1;
  const vmax = sign > 0 ? limits.velocity : -(limits.velocityMin ?? -limits.velocity);
  if (Math.abs(end.acceleration) > amax) {
    const s = end.acceleration > 0 ? 1 : -1;
    addPhase(profile, (end.acceleration * s - amax) / jerk, -s * jerk);
    end.acceleration = s * amax;
  }
  const v = end.velocity * sign;
  const a = end.acceleration * sign;
  const top = a > 0 ? v + (a * a) / (2 * jerk) : v;
  if (top > vmax * (1 + Number.EPSILON)) {
    const vmin = sign > 0 ? (limits.velocityMin ?? -limits.velocity) : -limits.velocity;
    brakeTo(profile, sign, vmax, vmin, amax, jerk);
  }
  return sign;
}

/**
 * Brakes as hard as allowed until the velocity (towards `sign`) is down to `vmax`; less hard where letting
 * go of that brake would only be done below `vmin`.
 */
function brakeTo(
  profile: Profile,
  sign: number,
  vmax: number,
  vmin: number,
  amax: number,
  jerk: number,
): void {
  const v = profile.end.velocity * sign;
  const a = profile.end.acceleration * sign;
  // v + a·t − j·t²/2 = vmax, the later root.
  const t = (a + Math.sqrt(Math.max(0, a * a + 2 * jerk * (v - vmax)))) / jerk;
  const toLimit = (a + amax) / jerk;
  const brake = Math.min(t, toLimit) * jerk - a;
  if (vmax - (brake * brake) / (2 * jerk) < vmin) {
    changeVelocity(v * sign, a * sign, vmin * sign, amax, jerk, up);
    addVelocityChange(profile, up, vmin * sign);
  } else if (t <= toLimit) addPhase(profile, t, -sign * jerk);
  else {
    addPhase(profile, toLimit, -sign * jerk);
    addPhase(profile, (profile.end.velocity * sign - vmax) / amax, 0);
  }
}

/** The optimal way from the profile's end, a state inside the limits whose stop falls short of the target. */
export function wayTo(profile: Profile, target: number, sign: number, limits: AxisLimits): Way {
  const vmax = sign > 0 ? limits.velocity : -(limits.velocityMin ?? -limits.velocity);
  const { acceleration: amax, jerk } = limits;
  const v = profile.end.velocity * sign;
  const a = profile.end.acceleration * sign;
  const wanted = (target - profile.end.position) * sign;
  const tolerance =
    8 * Number.EPSILON * (Math.abs(target) + Math.abs(profile.end.position) + Math.abs(wanted));
  // The velocity after letting the acceleration off.
  const atOnce = v + (a * Math.abs(a)) / (2 * jerk);
  const reach = (velocity: number): number =>
    changeVelocity(v, a, velocity, amax, jerk, up).distance +
    changeVelocity(velocity, 0, 0, amax, jerk, down).distance -
    wanted;
  if (a < 0 && atOnce > 0 && reach(atOnce) > 0) {
    const letGo = risingRoot(
      (t) => {
        const a1 = a + t * jerk;
        const v1 = v + t * (a + (t * jerk) / 2);
        const p1 = t * (v + t * (a / 2 + (t * jerk) / 6));
        return p1 + changeVelocity(v1, a1, 0, amax, jerk, down).distance - wanted;
      },
      0,
      -a / jerk,
      tolerance,
    );
    return { kind: 'reBrake', letGo };
  }
  const over = reach(vmax);
  if (over <= 0) return { kind: 'cruise', velocity: vmax, cruise: -over / vmax };
  const low = Math.min(vmax, Math.max(0, atOnce));
  // What reach gains with the velocity: each of the two changes w/p + p/2j, with p its largest acceleration.
  const slopedReach = (velocity: number, out: Sloped): Sloped => {
    out.value = reach(velocity);
    const rise = up.last * jerk;
    const fall = down.last * jerk;
    out.slope = velocity / rise + velocity / fall + (rise + fall) / (2 * jerk);
    return out;
  };
  if (reach(low) >= 0) return { kind: 'cruise', velocity: low, cruise: 0 };
  // From rest to rest without touching the acceleration limit: 2·w·√(w/j) is the whole way.
  const guess = Math.min(vmax, Math.max(low, Math.cbrt((wanted * wanted * jerk) / 4)));
  return { kind: 'cruise', velocity: risingRootNewton(slopedReach, low, vmax, guess, tolerance), cruise: 0 };
}

/** Appends the stop and pins the end: what is left is rounding of the root. */
export function finish(profile: Profile, target: number, limits: AxisLimits): Profile {
  const { end } = profile;
  changeVelocity(end.velocity, end.acceleration, 0, limits.acceleration, limits.jerk, down);
  addVelocityChange(profile, down, 0);
  end.position = target;
  return profile;
}
