import type { ArmModel } from '../../shared/arm/model';

/** One set of joint set-points: where the arm shall be at board time `t` (s). rad, m; the gripper 0 to 1. */
export interface Setpoint {
  t: number;
  q: Float64Array | readonly number[];
  gripper: number | null;
}

/** What the board reports. Positions are the board's own counts turned into rad and m: commanded, not measured. */
export interface BoardSample {
  /** Board clock, s. */
  t: number;
  /** Rises when the board restarts: position is unknown then. */
  bootId: number;
  energised: readonly boolean[];
  gripperEnergised: boolean;
  /** Where the board has been told to be by now. */
  q: readonly number[];
  gripper: number | null;
  moving: boolean;
  /** A stop or watchdog ramp is latched until `clear`. */
  latched: boolean;
  faults: readonly BoardFault[];
  /** Joints whose reference switch is closed; null where there is none. */
  switches: readonly (boolean | null)[];
  /** Where the board knows better than its counts (encoder): rad, m; null elsewhere. */
  measured: readonly (number | null)[];
  /** Built-in arm only: where the joints really are. */
  truth: readonly number[] | null;
  /** Position latched at the switch edge since the last `reference` order, per joint. */
  referenceEdge: readonly (number | null)[];
  inputs: readonly boolean[];
  outputs: readonly boolean[];
}
export type BoardFault = 'watchdog' | 'underrun' | 'limit' | 'driver' | 'brownOut';

/** Acts on a board, each idempotent. Set-points go by `send`. */
export type BoardOrder =
  /**
   * Energise one joint. A servo's first pulse goes to `assumed`; a stepper stands where it is and its count
   * reads `assumed`, which is a way of counting and says nothing about where it stands.
   */
  | { kind: 'energise'; joint: number; assumed: number }
  | { kind: 'energiseGripper'; assumed: number }
  | { kind: 'motorsOff' }
  /** The board's count for this joint shall read `q` from now on (at rest only). */
  | { kind: 'declare'; joint: number; q: number }
  /** Arm the switch latch of this joint. */
  | { kind: 'watchSwitch'; joint: number }
  /** Clears a latched stop or fault; refused while moving. */
  | { kind: 'clear' };

/**
 * All the control loop knows about an arm: built-in, serial or faulty. Nothing here blocks or throws.
 * `stop` bypasses every queue: the board ramps down by itself, flushes its buffer and latches.
 */
export interface ArmLink {
  readonly kind: 'builtIn' | 'board';
  /** How far ahead set-points are buffered, s: the built-in arm one tick, a serial board more. */
  lead(): number;
  /** Round trip, ms, or null while unknown. */
  answerMs(): number | null;
  /** Newest sample, or null before the first or after the link was lost. */
  latestSample(): BoardSample | null;
  send(setpoint: Setpoint): void;
  /** Replaces everything buffered from `setpoint.t` on, so that a ramp starts at once. */
  replaceFrom(setpoint: Setpoint): void;
  order(order: BoardOrder): void;
  stop(): void;
  /** Lets a simulated board live through `dt` seconds; a real one needs no help. */
  advance(dt: number): void;
  /** Returns the unsubscribe function. */
  onClosed(listener: (reason: string) => void): () => void;
  close(): void;
}

export interface ArmLinkOptions {
  model: ArmModel;
  /** Seed of the simulated arm's small differences. */
  seed: number;
}
