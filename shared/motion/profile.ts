/** Where one axis is. Units of the axis: rad or m, per s, per s². */
export interface AxisState {
  position: number;
  velocity: number;
  acceleration: number;
}

/** What one axis may do. All positive but `velocityMin`. */
export interface AxisLimits {
  velocity: number;
  acceleration: number;
  jerk: number;
  /** Fastest motion in the negative direction, negative; default −velocity. */
  velocityMin?: number;
}

/** One stretch of constant jerk: how long it lasts, its jerk, and the state in which it begins. */
export interface Phase {
  duration: number;
  jerk: number;
  position: number;
  velocity: number;
  acceleration: number;
}

/**
 * A law of time of one axis: stretches of constant jerk in order, then constant velocity for ever
 * (zero for profiles that end at rest). Plain data.
 */
export interface Profile {
  /** s */
  duration: number;
  phases: Phase[];
  end: AxisState;
}

/** Phases shorter than this are rounding, s. */
const NOTHING_S = 1e-13;

/** Begins a profile at a state; `addPhase` extends it. */
export function beginProfile(start: AxisState): Profile {
  return {
    duration: 0,
    phases: [],
    end: { position: start.position, velocity: start.velocity, acceleration: start.acceleration },
  };
}

/** Appends `duration` s of constant `jerk`; stretches of no length are left out. */
export function addPhase(profile: Profile, duration: number, jerk: number): void {
  if (!(duration > NOTHING_S)) return;
  const { end } = profile;
  const { position, velocity, acceleration } = end;
  profile.phases.push({ duration, jerk, position, velocity, acceleration });
  const t = duration;
  end.position = position + t * (velocity + t * (acceleration / 2 + (t * jerk) / 6));
  end.velocity = velocity + t * (acceleration + (t * jerk) / 2);
  end.acceleration = acceleration + t * jerk;
  profile.duration += t;
}

/**
 * The state at time t.
 * @param t - s since the start; before 0 the start, after the end the axis goes on at its final velocity
 * @param out - reused when given, so that a control loop allocates nothing
 */
export function sampleProfile(profile: Profile, t: number, out?: AxisState): AxisState {
  const into = out ?? { position: 0, velocity: 0, acceleration: 0 };
  let left = Math.max(t, 0);
  for (const phase of profile.phases) {
    if (left < phase.duration) {
      const { position, velocity, acceleration, jerk } = phase;
      into.position = position + left * (velocity + left * (acceleration / 2 + (left * jerk) / 6));
      into.velocity = velocity + left * (acceleration + (left * jerk) / 2);
      into.acceleration = acceleration + left * jerk;
      return into;
    }
    left -= phase.duration;
  }
  const { end } = profile;
  into.position = end.position + left * end.velocity;
  into.velocity = end.velocity;
  into.acceleration = end.acceleration;
  return into;
}

/** @throws RangeError naming what is not finite, or not positive, or (velocityMin) not negative */
export function checkAxis(start: AxisState, goal: number, limits: AxisLimits): void {
  if (!Number.isFinite(start.position))
    throw new RangeError(`start.position is not finite: ${start.position}`);
  if (!Number.isFinite(start.velocity))
    throw new RangeError(`start.velocity is not finite: ${start.velocity}`);
  if (!Number.isFinite(start.acceleration))
    throw new RangeError(`start.acceleration is not finite: ${start.acceleration}`);
  if (!Number.isFinite(goal)) throw new RangeError(`target is not finite: ${goal}`);
  if (!(limits.velocity > 0 && limits.velocity < Infinity))
    throw new RangeError(`limits.velocity must be positive and finite: ${limits.velocity}`);
  if (!(limits.acceleration > 0 && limits.acceleration < Infinity))
    throw new RangeError(`limits.acceleration must be positive and finite: ${limits.acceleration}`);
  if (!(limits.jerk > 0 && limits.jerk < Infinity))
    throw new RangeError(`limits.jerk must be positive and finite: ${limits.jerk}`);
  if (limits.velocityMin !== undefined && !(limits.velocityMin < 0 && limits.velocityMin > -Infinity))
    throw new RangeError(`limits.velocityMin must be negative and finite: ${limits.velocityMin}`);
}
