import type { ArmModel } from '../../shared/arm/model';
import type { HoldMotion } from '../../shared/live/client-messages';

/** What one tick of the simulation showed from outside the controller. q: rad, m for sliding joints. */
export interface Observation {
  /** Monotonic time of the tick, s. */
  t: number;
  /** The set-point that reached the board in this tick, or null when none did. */
  setpoint: readonly number[] | null;
  /** What the board counts, before it lives through the next tick. */
  counts: readonly number[];
  /** Where the joints really are; known to the simulation alone. */
  truth: readonly number[];
  /** The board was told anew where a joint stands (energised, declared, cleared): its count starts afresh. */
  recounted: boolean;
  /** What the board says of its drivers. */
  energised: readonly boolean[];
  /** The board moves by itself, as it says. */
  boardMoving: boolean;
  linkSteady: boolean;
  /** Joints that the page shows as declared or better: their soft limits hold. */
  known: readonly boolean[];
  /** The ceiling that holds by the messages that arrived and the trust that the page shows, 0 to 1. */
  ceiling: number;
  /** Somebody confirmed at a ceiling of exactly 1 that people are clear. */
  peopleClear: boolean;
  /** What, by the messages that really arrived, may move the arm in this tick. */
  cause: Cause;
  /** Where each joint would come to rest if let go in this tick, as the page is shown it. */
  stopAt: readonly number[];
}

export type Cause =
  | { kind: 'hold'; motion: HoldMotion['kind']; joint: number | null; from: readonly number[] }
  | { kind: 'nudge'; joint: number | null; amount: number; from: readonly number[] }
  /** `curved`: some of its steps go straight to their pose. */
  | { kind: 'run'; curved: boolean }
  /** Nothing may move it; `since` is the tick that took the last cause away. */
  | { kind: 'none'; since: number };

/** The rules of motion that are watched, and how near to breaking each one came (1 = at the limit). */
export const RULES = [
  /** Soft limits of joints whose position is known. */
  'position',
  'velocity',
  'ceiling',
  'acceleration',
  'jerk',
  /** 250 mm/s, 50 mm/s at creep or with the position unknown, for the fastest modelled point. */
  'pointSpeed',
  /** Nothing moves or is granted without its conditions; nothing resumes by itself. */
  'conditions',
  /** With its cause gone the arm is at rest within the shortest ramp that its limits allow. */
  'holdEnds',
  'unknownTravel',
  'nudgeTravel',
  'stoppingShadow',
  /** With the link lost the board stops by itself. */
  'watchdog',
  /** The controller's own last check before the link never had to step in. */
  'lastWord',
] as const;
export type Rule = (typeof RULES)[number];

export interface Violation {
  rule: Rule;
  t: number;
  ratio: number;
  detail: string;
}

/** ISO 10218-1: the tool centre point at most 250 mm/s in manual reduced-speed mode; here for every modelled point. */
export const POINT_SPEED_M_S = 0.25;
/** Our own stricter figure at creep and wherever the position is not known. */
export const POINT_SPEED_CREEP_M_S = 0.05;
export const CREEP = 0.05;
/** What a position that was declared but not referenced allows. */
export const EASY = 0.25;
/** Rule of motion 2: a hold dies by itself after this long without its keep-alive, s. */
export const HOLD_EXPIRY_S = 0.25;
/** A keep-alive that saw only telemetry older than this does not count, s. */
export const KEEP_AGE_S = 0.3;
/** Before unheld motion, s. */
export const COUNTDOWN_S = 3;
/** Control waits this long for an answer, and for a session that went away, s. */
export const CONTROL_WAIT_S = 10;
/** The board stops by itself this long after the last set-point, s. */
export const WATCHDOG_S = 0.25;
/** With the position unknown, one press moves at most this far. */
export const UNKNOWN_TRAVEL_RAD = (10 * Math.PI) / 180;
export const UNKNOWN_TRAVEL_M = 0.02;
/** A nudge moves no modelled point farther than this, m. */
export const NUDGE_POINT_TRAVEL_M = 0.02;

/** s: how long a ramp may take, and for how long of that the arm may still get faster. */
export interface Ramp {
  duration: number;
  rising: number;
}

/**
 * The shortest ramp to rest on a straight joint path, from finite differences: the acceleration is let off,
 * the braking built up, held and let off, all at the limits of the joint that the path asks most of.
 * @param v - joint speeds, rad/s or m/s
 * @param a - joint accelerations
 * @see Biagiotti & Melchiorri, Trajectory Planning for Automatic Machines and Robots (2008), §3.4
 */
export function shortestRamp(model: ArmModel, v: readonly number[], a: readonly number[]): Ramp {
  // The direction of the path: of the speeds, or just after the start of the accelerations.
  let speed = 0;
  let push = 0;
  for (const [i, { limits }] of model.joints.entries()) {
    speed = Math.max(speed, Math.abs(v[i]!) / limits.velocity);
    push = Math.max(push, Math.abs(a[i]!) / limits.acceleration);
  }
  const along = speed > 1e-6 ? v : a;
  if (speed <= 1e-6 && push <= 1e-6) return { duration: 0, rising: 0 };
  const length = Math.hypot(...along);
  let hardest = Infinity;
  let jerkiest = Infinity;
  let rate = 0;
  let change = 0;
  for (const [i, { limits }] of model.joints.entries()) {
    const share = along[i]! / length;
    rate += v[i]! * share;
    change += a[i]! * share;
    if (Math.abs(share) < 1e-6) continue;
    hardest = Math.min(hardest, limits.acceleration / Math.abs(share));
    jerkiest = Math.min(jerkiest, limits.jerk / Math.abs(share));
  }
  const rising = Math.max(0, change) / jerkiest;
  const top = Math.max(0, rate) + (Math.max(0, change) * rising) / 2;
  const full = (hardest * hardest) / jerkiest;
  const braking = top >= full ? top / hardest + hardest / jerkiest : 2 * Math.sqrt(top / jerkiest);
  return { duration: rising + braking, rising };
}
