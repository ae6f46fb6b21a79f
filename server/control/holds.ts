import { GRIPPER_PACE } from '../../shared/arm/motion-rules';
import { CEILINGS } from '../../shared/arm/trust';
import { shownValue } from '../../shared/arm/units';
import { radiusAboutJoint } from '../../shared/kinematics';
import {
  type ClientMessage,
  HOLD_EXPIRY_MS,
  type HoldMotion,
  KEEP_MAX_AGE_S,
  NUDGE_ANGLES,
  NUDGE_LENGTHS,
  NUDGE_MAX_TOOL_TRAVEL,
} from '../../shared/live/client-messages';
import { positionKnown } from './ceiling';
import { allEnergised } from './motors';
import { isMoving, letGo, startMove } from './moves';
import type { Actor, Resolved } from './process-messages';
import { beginReference } from './reference';
import { audit, type Refusal, refusal } from './report';
import { holdRun, letGoOfRun } from './runner';
import type { Arm, ControllerState, Outputs } from './state';

/** With a joint's position unknown one press moves it at most this far: rad, m. */
const UNKNOWN_TRAVEL_RAD = (10 * Math.PI) / 180;
const UNKNOWN_TRAVEL_M = 0.02;
/** Nearer to a limit than this a joint is at it. */
const AT_LIMIT = 1e-6;

/** What every motion needs besides control. */
export function mayMove(arm: Arm, state: ControllerState): Refusal {
  if (state.link !== 'steady') return refusal('noLink', 'The link is not steady: nothing moves.');
  if (state.fault) return refusal('faulted', 'A fault waits to be acknowledged first.');
  if (!allEnergised(state)) return refusal('resting', `${arm.model.name} is not energised.`);
  if (isMoving(state) || state.hold) return refusal('moving', 'One motion at a time: let go first.');
  return null;
}

export function startHold(
  arm: Arm,
  state: ControllerState,
  outputs: Outputs,
  actor: Actor,
  message: Extract<ClientMessage, { type: 'hold.start' }>,
  resolved: Resolved,
): Refusal {
  const { motion } = message;
  const no = mayMove(arm, state);
  if (no) return no;
  if (state.run && motion.kind !== 'run') return refusal('running', 'End the run first.');
  state.blocked = null;
  const refused = begin(arm, state, outputs, motion, resolved);
  if (refused) return refused;
  state.hold = {
    holdId: message.holdId,
    userId: actor.userId,
    socketId: actor.socketId,
    motion,
    lastSeq: -1,
    lastKeepS: state.nowS,
  };
  return null;
}

function begin(
  arm: Arm,
  state: ControllerState,
  outputs: Outputs,
  motion: HoldMotion,
  resolved: Resolved,
): Refusal {
  switch (motion.kind) {
    case 'jog':
      return beginJog(arm, state, motion);
    case 'pose':
      return resolved.pose
        ? goTo(arm, state, resolved.pose.q)
        : refusal('noSuchPose', 'That pose is not there any more.');
    case 'joints':
      return goTo(arm, state, motion.q);
    case 'reference':
      return beginReference(arm, state, outputs, motion.joint);
    case 'run':
      return holdRun(arm, state);
  }
}

function beginJog(arm: Arm, state: ControllerState, motion: Extract<HoldMotion, { kind: 'jog' }>): Refusal {
  const { axis, direction, frame } = motion;
  if (frame !== 'joint' || typeof axis !== 'number')
    return refusal('frameNotAvailable', 'This arm is jogged joint by joint.');
  const joint = arm.model.joints[axis];
  if (!joint) return refusal('noSuchJoint', `${arm.model.name} has no joint ${axis + 1}.`);
  const reach = jogBound(arm, state, axis, direction);
  const way = (reach - state.q[axis]!) * direction;
  if (way <= AT_LIMIT) {
    state.blocked = { joint: axis, reason: 'at its soft limit' };
    return refusal('atLimit', `${joint.name} is at its soft limit of ${shownValue(joint.type, reach)}.`);
  }
  const to = [...state.q];
  to[axis] = reach;
  startMove(arm, state, to, 1, null);
  return null;
}

/** How far a press may take a joint: to its soft limit, or a short way while its position is not known. */
function jogBound(arm: Arm, state: ControllerState, index: number, direction: 1 | -1): number {
  const { type, limits } = arm.model.joints[index]!;
  const trust = state.trust[index];
  if (trust === 'declared' || trust === 'referenced') return direction > 0 ? limits.upper : limits.lower;
  return state.q[index]! + direction * (type === 'revolute' ? UNKNOWN_TRAVEL_RAD : UNKNOWN_TRAVEL_M);
}

/** Poses and typed values need every joint's position, and lie inside the soft limits. */
function goTo(arm: Arm, state: ControllerState, q: readonly number[]): Refusal {
  if (!positionKnown(state))
    return refusal(
      'positionUnknown',
      'The position is not known well enough. Declare or reference it first.',
    );
  const { joints } = arm.model;
  if (q.length !== joints.length)
    return refusal('wrongLength', `${arm.model.name} has ${joints.length} joints.`);
  for (const [i, joint] of joints.entries()) {
    const { lower, upper } = joint.limits;
    if (q[i]! < lower - AT_LIMIT || q[i]! > upper + AT_LIMIT)
      return refusal(
        'beyondLimit',
        `${joint.name} would have to go to ${shownValue(joint.type, q[i]!)}; its soft limits are ${shownValue(joint.type, lower)} and ${shownValue(joint.type, upper)}.`,
      );
  }
  const inside = q.map((value, i) =>
    Math.min(joints[i]!.limits.upper, Math.max(joints[i]!.limits.lower, value)),
  );
  startMove(arm, state, inside, 1, inside);
  return null;
}

/** A keep that is out of order, from elsewhere, or that saw only old telemetry is dropped. */
export function keepHold(
  state: ControllerState,
  actor: Actor,
  message: Extract<ClientMessage, { type: 'hold.keep' }>,
): void {
  const { hold } = state;
  if (!hold || hold.holdId !== message.holdId || hold.socketId !== actor.socketId) return;
  if (message.seq <= hold.lastSeq || state.nowS - message.seenT > KEEP_MAX_AGE_S) return;
  hold.lastSeq = message.seq;
  hold.lastKeepS = state.nowS;
}

export function endHold(arm: Arm, state: ControllerState, holdId: string | null): void {
  const { hold } = state;
  if (!hold || (holdId !== null && hold.holdId !== holdId)) return;
  state.hold = null;
  if (hold.motion.kind === 'run') letGoOfRun(arm, state);
  else letGo(arm, state);
}

/** Every hold dies by itself. */
export function tickHold(arm: Arm, state: ControllerState): void {
  const { hold } = state;
  if (hold && state.nowS - hold.lastKeepS >= HOLD_EXPIRY_MS / 1000) endHold(arm, state, null);
}

export function nudge(
  arm: Arm,
  state: ControllerState,
  outputs: Outputs,
  actor: Actor,
  message: Extract<ClientMessage, { type: 'nudge' }>,
): Refusal {
  const no = mayMove(arm, state);
  if (no) return no;
  if (state.run) return refusal('running', 'End the run first.');
  const { frame, axis, amount } = message;
  if (frame !== 'joint' || typeof axis !== 'number')
    return refusal('frameNotAvailable', 'This arm is nudged joint by joint.');
  const joint = arm.model.joints[axis];
  if (!joint) return refusal('noSuchJoint', `${arm.model.name} has no joint ${axis + 1}.`);
  const sizes = joint.type === 'revolute' ? NUDGE_ANGLES : NUDGE_LENGTHS;
  if (!sizes.some((size) => Math.abs(size - Math.abs(amount)) < 1e-9))
    return refusal('notANudge', 'That is not one of the nudge sizes.');
  const known = positionKnown(state);
  const radius = known ? radiusAboutJoint(arm.chain, state.q, axis) : arm.reach[axis]!;
  const most = Math.min(Math.abs(amount), NUDGE_MAX_TOOL_TRAVEL / radius);
  const wanted = state.q[axis]! + Math.sign(amount) * most;
  const bound = jogBound(arm, state, axis, amount > 0 ? 1 : -1);
  if ((bound - wanted) * Math.sign(amount) < 0) {
    state.blocked = { joint: axis, reason: 'the nudge would cross its soft limit' };
    return refusal('atLimit', `That nudge would take ${joint.name} beyond ${shownValue(joint.type, bound)}.`);
  }
  state.blocked = null;
  const to = [...state.q];
  to[axis] = wanted;
  startMove(arm, state, to, CEILINGS.easy, to);
  audit(state, outputs, actor, 'nudge', `${joint.name} by ${shownValue(joint.type, most)}`);
  return null;
}

export function setGripper(arm: Arm, state: ControllerState, opening: number): Refusal {
  if (!state.gripper) return refusal('noGripper', `${arm.model.name} has no gripper.`);
  if (state.link !== 'steady') return refusal('noLink', 'The link is not steady: nothing moves.');
  if (state.fault) return refusal('faulted', 'A fault waits to be acknowledged first.');
  if (!state.gripperEnergised) return refusal('resting', 'The gripper is not energised.');
  if (state.run) return refusal('running', 'End the run first.');
  state.gripper.target = opening;
  return null;
}

export function tickGripper(arm: Arm, state: ControllerState, dt: number): void {
  const { gripper } = state;
  if (!gripper || !arm.model.gripper) return;
  const most = (GRIPPER_PACE * dt) / arm.model.gripper.travelTime;
  const gap = gripper.target - gripper.opening;
  gripper.opening = Math.abs(gap) <= most ? gripper.target : gripper.opening + Math.sign(gap) * most;
}
