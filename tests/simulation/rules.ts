import type { ArmModel } from '../../shared/arm/model';

/** What one tick of the simulation showed from outside the controller. q: rad, m for sliding joints. */
export interface Observation {
  /** Monotonic time of the tick, s. */
  t: number;
  /** The set-point that reached the board in this tick, or null when none did. */
  setpoint: readonly number[] | null;
  /** World positions of the modelled points at that set-point, m: joint origins, link ends, tool point. */
  points: readonly (readonly [number, number, number])[] | null;
  energised: readonly boolean[];
  linkSteady: boolean;
  controlHolder: string | null;
  /** Every joint declared or better: soft limits hold. */
  positionKnown: boolean;
  /** The ceiling in force, 0 to 1, as the pages are shown it. */
  ceiling: number;
  /** Ceiling of the person alone is exactly 1 and people are clear. */
  peopleClear: boolean;
  /**
   * What, by the messages that really arrived, may move the arm in this tick. Worked out by the driver of
   * the simulation from its own log of messages, never asked of the controller.
   */
  cause: Cause;
  /** Where each joint would come to rest if let go in this tick, as the page is shown it. */
  stopAt: readonly number[] | null;
  faulted: boolean;
}

export type Cause =
  | { kind: 'none' }
  /** A hold whose last valid keep is younger than 250 ms, with the position where it began. */
  | { kind: 'hold'; from: readonly number[]; motion: string }
  | { kind: 'nudge'; joint: number; from: readonly number[]; amount: number }
  | { kind: 'run' }
  /** Somebody let go, stopped or paused at `since`. */
  | { kind: 'letGo'; since: number };

/** The rules of motion that the checker watches, and how near to breaking each one came (1 = at the limit). */
export const RULES = [
  'position',
  'velocity',
  'ceiling',
  'acceleration',
  'jerk',
  'pointSpeed',
  'conditions',
  'holdEnds',
  'unknownTravel',
  'nudgeTravel',
  'stoppingShadow',
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
/** Rule of motion 2: a hold dies by itself after this long without its keep-alive, s. */
export const HOLD_EXPIRY_S = 0.25;
/** Rule of motion 4: with the position unknown, one press moves at most this far. */
export const UNKNOWN_TRAVEL_RAD = (10 * Math.PI) / 180;
export const UNKNOWN_TRAVEL_M = 0.02;

/**
 * The longest a joint may take from any allowed state to rest, s: bring the acceleration to zero, build the
 * braking acceleration up, brake, let it off; each at the joint's own limits (third-order ramp, textbook).
 */
export function longestRamp(model: ArmModel, joint: number, speed: number): number {
  const { acceleration, jerk } = model.joints[joint]!.limits;
  // While a positive acceleration is let off, the speed still grows by a²/2j.
  const worst = speed + (acceleration * acceleration) / (2 * jerk);
  return (2 * acceleration) / jerk + worst / acceleration + acceleration / jerk;
}
