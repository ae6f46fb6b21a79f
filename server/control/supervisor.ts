import { fastestPointSpeed } from '../../shared/kinematics';
import { ceilingState, positionKnown } from './ceiling';
import type { Arm, ControllerState } from './state';

/** Rounding only; the profiles keep the limits exactly. */
const SLACK = 1 + 1e-6;
/** Third differences of doubles at 10 ms carry this much noise against a jerk limit, in the joint's units per s³. */
const JERK_NOISE = 1e-6;

/** The last set-points sent, so that speed, acceleration and jerk are judged from what really goes out. */
export interface Watch {
  /** Newest last; at most three. */
  sent: number[][];
  pointSpeed: number;
}

export function newWatch(): Watch {
  return { sent: [], pointSpeed: 0 };
}

const speed = new Float64Array(16);

/**
 * The last word before the link. Looks at a set-point as a stranger would: finite, inside limits, no faster,
 * no harder and no jerkier than the joint may, nothing moving without its conditions.
 * @returns what is wrong, or null
 */
export function objection(
  arm: Arm,
  state: ControllerState,
  watch: Watch,
  q: readonly number[],
  dt: number,
): string | null {
  const { joints } = arm.model;
  const [q3, q2, q1] = lastThree(watch, q);
  const ceiling = ceilingState(state);
  const known = positionKnown(state);
  let moves = false;
  for (const [i, joint] of joints.entries()) {
    const { lower, upper, velocity, acceleration, jerk } = joint.limits;
    const now = q[i]!;
    if (!Number.isFinite(now)) return `${joint.name}: the set-point is not a number`;
    const v = (now - q1[i]!) / dt;
    const before = (q1[i]! - q2[i]!) / dt;
    const a = (v - before) / dt;
    const j = (now - 3 * q1[i]! + 3 * q2[i]! - q3[i]!) / dt ** 3;
    speed[i] = v;
    if (v === 0) continue;
    moves = true;
    if (!state.energised[i]) return `${joint.name} would move without power`;
    if (Math.abs(v) > velocity * SLACK) return `${joint.name} would go faster than it may`;
    if (Math.abs(a) > acceleration * SLACK + JERK_NOISE * dt)
      return `${joint.name} would accelerate harder than it may`;
    if (Math.abs(j) > jerk * SLACK + JERK_NOISE) return `${joint.name} would jerk harder than it may`;
    const faster = Math.abs(v) > Math.abs(before) * SLACK;
    if (faster && Math.abs(v) > velocity * ceiling.fraction * SLACK)
      return `${joint.name} would go above the ceiling`;
    if (known && ((now > upper + 1e-9 && v > 0) || (now < lower - 1e-9 && v < 0)))
      return `${joint.name} would cross its soft limit`;
    if (faster && !hasCause(state)) return `${joint.name} would move without anybody's doing`;
  }
  if (!moves) {
    watch.pointSpeed = 0;
    return null;
  }
  const points = fastestPointSpeed(arm.chain, q, speed);
  const cap = ceiling.toolSpeed ?? Infinity;
  if (points > watch.pointSpeed * SLACK && points > cap * SLACK)
    return 'a point of the arm would go too fast';
  watch.pointSpeed = points;
  return null;
}

/** Remembers what was sent. */
export function noteSent(watch: Watch, q: readonly number[]): void {
  if (watch.sent.length === 3) {
    const oldest = watch.sent.shift()!;
    for (let i = 0; i < q.length; i++) oldest[i] = q[i]!;
    watch.sent.push(oldest);
  } else watch.sent.push([...q]);
}

function lastThree(watch: Watch, q: readonly number[]): [number[], number[], number[]] {
  const { sent } = watch;
  const q1 = sent.at(-1) ?? (q as number[]);
  const q2 = sent.at(-2) ?? q1;
  return [sent.at(-3) ?? q2, q2, q1];
}

/** Somebody in control wants the arm to move, or it is on its ramp to rest (whose acceleration is let off first). */
function hasCause(state: ControllerState): boolean {
  const { control, move, run } = state;
  return move !== null && (move.ending || control !== null || run !== null);
}
