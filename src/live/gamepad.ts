/** A game controller as a pair of hands: one button enables, one stick direction chooses. Pure, for tests. */
export interface PadReading {
  buttons: readonly boolean[];
  /** Left stick, −1…1, right and down positive. */
  x: number;
  y: number;
  /** Time of the pad's newest change, ms. */
  changedAtMs: number;
}

/** Sticks rest somewhere near the middle only. */
const DEAD_ZONE = 0.15;
/** A radio pad may freeze its last value: without any change for this long it counts as gone, ms. */
const FROZEN_MS = 10_000;

/** Which buttons of the standard layout (W3C Gamepad) mean what. */
export const PAD = { enable: 4, nextJoint: 13, previousJoint: 12, stop: 1 } as const;

export interface PadState {
  /** Released and centred since the last hold: only then may a new one begin. */
  armed: boolean;
  direction: 0 | 1 | -1;
}
export const padAtRest: PadState = { armed: false, direction: 0 };

/** Next state: direction is non-zero only while enabled, deflected, and armed by a neutral moment before. */
export function readPad(before: PadState, reading: PadReading | null, nowMs: number): PadState {
  if (!reading) return padAtRest;
  const enabled = reading.buttons[PAD.enable] ?? false;
  const deflection = Math.abs(reading.x) > DEAD_ZONE ? Math.sign(reading.x) : 0;
  if (!enabled && deflection === 0) return { armed: true, direction: 0 };
  if (!before.armed || nowMs - reading.changedAtMs > FROZEN_MS) return { armed: false, direction: 0 };
  if (!enabled || deflection === 0) return { armed: before.direction === 0, direction: 0 };
  if (before.direction !== 0 && before.direction !== deflection) return { armed: false, direction: 0 };
  return { armed: true, direction: deflection as 1 | -1 };
}
