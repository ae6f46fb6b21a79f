import { fastestPointSpeed, forwardKinematics } from '../../shared/kinematics';
import { HOLD_EXPIRY_MS } from '../../shared/live/client-messages';
import { restPosition } from '../../shared/motion';
import type { BoardOrder } from './arm-link';
import { ceilingState, positionKnown, unknownTravel } from './ceiling';
import type { Arm, ControllerState, Watch } from './state';

/** Rounding only; the profiles keep the limits exactly. */
const SLACK = 1 + 1e-6;
/** Third differences of doubles at 10 ms carry this much noise against a jerk limit, in the joint's units per s³. */
const JERK_NOISE = 1e-6;
/** Rounding of a position, rad or m. */
const AT_LIMIT = 1e-9;
/** Smaller shares of a speed or acceleration are rounding: a ramp at 10 ms changes them by 1e-5 and more. */
const REAL_CHANGE = 1e-7;
/**
 * An acceleration that is being let off shows in differences only in the tick after the next; let go in its
 * first tick, a joint even keeps its speed for one tick. The third tick in a row has to be slower.
 */
const MOST_STRIKES = 3;
/** On a curved path a joint may gain while the whole slows down; that is over as soon as the ramp has its full pull. */
const MOST_STRIKES_CURVED = 8;

const speed = new Float64Array(16);

/**
 * The last word before the link. Looks at a set-point as a stranger would: finite, inside limits, able to stop
 * before them, no faster, no harder and no jerkier than each joint may, nothing moving without its conditions.
 * Speed, acceleration and jerk are differences of what really went out.
 * @returns what is wrong, or null
 */
export function objection(
  arm: Arm,
  state: ControllerState,
  watch: Watch,
  gripper: number | null,
  dt: number,
): string | null {
  const { q } = state;
  const [q3, q2, q1] = lastThree(watch, q);
  const ceiling = ceilingState(state);
  const known = positionKnown(state);
  const caused = hasCause(state);
  let moves = false;
  let slowing = true;
  let tooFast: string | null = null;
  for (const [i, joint] of arm.model.joints.entries()) {
    const { lower, upper, velocity, acceleration, jerk } = joint.limits;
    const now = q[i]!;
    if (!Number.isFinite(now)) return `${joint.name}: the set-point is not a number`;
    const v = (now - q1[i]!) / dt;
    const before = (q1[i]! - q2[i]!) / dt;
    const a = (v - before) / dt;
    const aBefore = (before - (q2[i]! - q3[i]!) / dt) / dt;
    speed[i] = v;
    if (Math.abs(v) > velocity * SLACK) return `${joint.name} would go faster than it may`;
    if (Math.abs(a) > acceleration * SLACK + JERK_NOISE * dt)
      return `${joint.name} would change its speed harder than it may`;
    if (Math.abs(a - aBefore) / dt > jerk * SLACK + JERK_NOISE)
      return `${joint.name} would jerk harder than it may`;
    if (v === 0) continue;
    moves = true;
    if (!state.energised[i]) return `${joint.name} would move without power`;
    const out = v > 0 ? upper : lower;
    if (known && (now - out) * Math.sign(v) > AT_LIMIT) return `${joint.name} would cross its soft limit`;
    if (known && !canStop(now, v, a, out, joint.limits, dt))
      return `${joint.name} could not stop before its soft limit any more`;
    const { hold } = state;
    if (
      !known &&
      hold?.motion.kind === 'jog' &&
      Math.abs(now - hold.from[i]!) > unknownTravel(joint) + AT_LIMIT
    )
      return `${joint.name} would go too far for one press`;
    if (!isSlowing(v, before, a, aBefore, dt)) slowing = false;
    if (Math.abs(v) > velocity * ceiling.fraction * SLACK)
      tooFast = `${joint.name} would go above the ceiling`;
  }
  const cap = ceiling.toolSpeed ?? Infinity;
  if (moves && pointSpeed(arm, q, known) > cap * SLACK) tooFast = 'a point of the arm would go too fast';
  const curved = state.move?.path.kind === 'tool';
  if (curved && !slowing) slowing = slowsAsAWhole(arm, q, q1, q2);
  // Too fast, or without a cause, the arm may only be on its way to less.
  const wrong =
    !moves || slowing ? null : (tooFast ?? (caused ? null : 'it would move without anybody’s doing'));
  watch.strikes = wrong === null ? 0 : watch.strikes + 1;
  if (watch.strikes >= (curved ? MOST_STRIKES_CURVED : MOST_STRIKES)) return wrong;
  return gripperObjection(arm, watch, gripper, dt);
}

/** Along a straight line of the tool the joints share the way unevenly: taken together, or by its tool point, the arm slows. */
function slowsAsAWhole(
  arm: Arm,
  q: readonly number[],
  q1: readonly number[],
  q2: readonly number[],
): boolean {
  let now = 0;
  let before = 0;
  for (const [i, { limits }] of arm.model.joints.entries()) {
    now += ((q[i]! - q1[i]!) / limits.velocity) ** 2;
    before += ((q1[i]! - q2[i]!) / limits.velocity) ** 2;
  }
  if (now < before * (1 - REAL_CHANGE)) return true;
  const p = forwardKinematics(arm.chain, q).position;
  const p1 = forwardKinematics(arm.chain, q1).position;
  const p2 = forwardKinematics(arm.chain, q2).position;
  const way = Math.hypot(p[0] - p1[0], p[1] - p1[1], p[2] - p1[2]);
  const wayBefore = Math.hypot(p1[0] - p2[0], p1[1] - p2[1], p1[2] - p2[2]);
  return way < wayBefore * (1 - REAL_CHANGE);
}

/** Whether a joint loses speed, or at least lets off the acceleration it had; rounding counts as neither. */
function isSlowing(v: number, before: number, a: number, aBefore: number, dt: number): boolean {
  if (Math.abs(v) < Math.abs(before) * (1 - REAL_CHANGE)) return true;
  const speedsUp = a * v > 0 && Math.abs(a) * dt > Math.abs(v) * REAL_CHANGE;
  return speedsUp && Math.abs(a) < Math.abs(aBefore) * (1 - REAL_CHANGE);
}

/** Whether a joint may still come to rest before `out`, braking as hard as it may from the next moment on. */
function canStop(
  position: number,
  velocity: number,
  acceleration: number,
  out: number,
  limits: { velocity: number; acceleration: number; jerk: number },
  dt: number,
): boolean {
  const sign = Math.sign(velocity);
  // A difference is half a tick (speed) or one tick (acceleration) old: reckon with the best that can be since.
  const braking = Math.max(-limits.acceleration, acceleration * sign - 1.5 * limits.jerk * dt);
  const v = Math.max(0, velocity * sign + (Math.min(acceleration * sign, braking) * dt) / 2);
  const state = { position: position * sign, velocity: v, acceleration: v > 0 ? braking : 0 };
  return restPosition(state, limits) <= out * sign + AT_LIMIT;
}

/** Speed of the fastest modelled point; while the configuration is not known, the most it can be, m/s. */
function pointSpeed(arm: Arm, q: readonly number[], known: boolean): number {
  if (known) return fastestPointSpeed(arm.chain, q, speed.subarray(0, arm.chain.n));
  let worst = 0;
  for (let i = 0; i < arm.chain.n; i++) worst += Math.abs(speed[i]!) * arm.reach[i]!;
  return worst;
}

function gripperObjection(arm: Arm, watch: Watch, opening: number | null, dt: number): string | null {
  if (opening === null || !arm.model.gripper) return null;
  if (!(opening >= 0 && opening <= 1)) return 'the gripper would leave its range';
  if (watch.gripper === null) return null;
  const share = Math.abs(opening - watch.gripper) / (dt / arm.model.gripper.travelTime);
  return share > SLACK ? 'the gripper would go faster than it can' : null;
}

/** Remembers what was sent. */
export function noteSent(watch: Watch, q: readonly number[], gripper: number | null): void {
  const next = watch.sent.length === 3 ? watch.sent.shift()! : new Array<number>(q.length);
  for (let i = 0; i < q.length; i++) next[i] = q[i]!;
  watch.sent.push(next);
  watch.gripper = gripper;
}

/** Nothing goes out now: the next set-point is judged from where the board says it is. */
export function forgetSent(watch: Watch): void {
  watch.sent.length = 0;
  watch.gripper = null;
  watch.strikes = 0;
}

/** A joint that begins to be counted anew stands there; its past says nothing about speed. */
export function recount(watch: Watch, state: ControllerState, orders: readonly BoardOrder[]): void {
  if (watch.sent.length === 0 && state.sample)
    watch.sent.push(state.q.map((value, i) => (state.energised[i] ? state.sample!.q[i]! : value)));
  for (const order of orders) {
    if (order.kind !== 'energise' && order.kind !== 'declare') continue;
    for (const q of watch.sent) q[order.joint] = state.q[order.joint]!;
  }
}

function lastThree(
  watch: Watch,
  q: readonly number[],
): [readonly number[], readonly number[], readonly number[]] {
  const { sent } = watch;
  const q1 = sent.at(-1) ?? q;
  const q2 = sent.at(-2) ?? q1;
  return [sent.at(-3) ?? q2, q2, q1];
}

/** What the move says keeps it going is really there, by somebody in control. */
function hasCause(state: ControllerState): boolean {
  const { control, hold, move, run } = state;
  if (!move || move.ending) return false;
  const kept = hold !== null && state.nowS - hold.lastKeepS < HOLD_EXPIRY_MS / 1000;
  switch (move.by) {
    case 'hold':
      return control !== null && kept && hold.socketId === control.socketId;
    case 'nudge':
      return control !== null;
    case 'run':
      return run?.phase === 'running' || (run?.phase === 'heldRunning' && kept && hold.motion.kind === 'run');
  }
}
