import { shownValue } from '../../shared/arm/units';
import { type ClientMessage, HOLD_EXPIRY_MS, type HoldMotion } from '../../shared/live/client-messages';
import { positionKnown } from './ceiling';
import { AT_LIMIT, isFresh, jogBound, mayMove, mayReach, tooLate } from './may-move';
import { hasArrived, letGo, startMove } from './moves';
import type { Actor, Resolved } from './process-messages';
import { beginReference } from './reference';
import { type Refusal, refusal } from './report';
import { holdRun, letGoOfRun } from './runner';
import type { Arm, ControllerState, Outputs } from './state';
import { blockedBy, moveTool } from './tool-moves';

export function startHold(
  arm: Arm,
  state: ControllerState,
  outputs: Outputs,
  actor: Actor,
  message: Extract<ClientMessage, { type: 'hold.start' }>,
  resolved: Resolved,
): Refusal {
  const { motion } = message;
  const no = tooLate(state, message.seenT) ?? mayStart(arm, state, motion);
  if (no) return no;
  const from = [...state.q];
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
    from,
  };
  return null;
}

function mayStart(arm: Arm, state: ControllerState, motion: HoldMotion): Refusal {
  if (state.run && motion.kind !== 'run') return refusal('running', 'End the run first.');
  const joint = motion.kind === 'jog' ? motion.axis : motion.kind === 'reference' ? motion.joint : null;
  if (typeof joint !== 'number') return mayMove(arm, state);
  return joint < arm.chain.n
    ? mayMove(arm, state, joint)
    : refusal('noSuchJoint', `${arm.model.name} has no joint ${joint + 1}.`);
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

/** A press on a tool axis goes so far at most, m and rad: farther than any arm of this kind gets. */
const FAR = { way: 1.2, turn: 2 * Math.PI };

function beginJog(arm: Arm, state: ControllerState, motion: Extract<HoldMotion, { kind: 'jog' }>): Refusal {
  const { axis, direction, frame } = motion;
  if (frame !== 'joint' && typeof axis === 'string')
    return moveTool(arm, state, frame, axis, direction * FAR[axis.length === 1 ? 'way' : 'turn'], {
      by: 'hold',
      asFar: true,
    });
  if (frame !== 'joint' || typeof axis !== 'number')
    return refusal('wrongAxis', 'Joints are jogged by number, the tool by x, y, z, rx, ry or rz.');
  const joint = arm.model.joints[axis]!;
  const reach = jogBound(arm, state, axis, direction);
  const way = (reach - state.q[axis]!) * direction;
  if (way <= AT_LIMIT) {
    state.blocked = { joint: axis, reason: 'at its soft limit' };
    return refusal('atLimit', `${joint.name} is at its soft limit of ${shownValue(joint.type, reach)}.`);
  }
  const to = [...state.q];
  to[axis] = reach;
  startMove(arm, state, to, { by: 'hold', fraction: 1, target: null });
  return null;
}

/** Poses and typed values need every joint's position, and lie inside the soft limits. */
function goTo(arm: Arm, state: ControllerState, q: readonly number[]): Refusal {
  if (!positionKnown(state))
    return refusal(
      'positionUnknown',
      'The position is not known well enough. Declare or reference it first.',
    );
  const no = mayReach(arm, q);
  if (no) return no;
  const { joints } = arm.model;
  const inside = q.map((value, i) =>
    Math.min(joints[i]!.limits.upper, Math.max(joints[i]!.limits.lower, value)),
  );
  startMove(arm, state, inside, { by: 'hold', fraction: 1, target: inside });
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
  if (message.seq <= hold.lastSeq || !isFresh(state, message.seenT)) return;
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

/** Every hold dies by itself: without its keep-alive, and at the end of the way it was for. */
export function tickHold(arm: Arm, state: ControllerState): void {
  const { hold } = state;
  if (!hold) return;
  if (state.nowS - hold.lastKeepS >= HOLD_EXPIRY_MS / 1000) return endHold(arm, state, null);
  const { kind } = hold.motion;
  if ((kind !== 'jog' && kind !== 'pose' && kind !== 'joints') || !hasArrived(state)) return;
  const end = state.move?.path.kind === 'tool' ? state.move.path.end : null;
  if (hold.motion.kind === 'jog' && end) state.blocked = blockedBy(end);
  else if (hold.motion.kind === 'jog' && typeof hold.motion.axis === 'number')
    state.blocked = {
      joint: hold.motion.axis,
      reason: positionKnown(state)
        ? 'at its soft limit'
        : 'one press goes no further while the position is not known',
    };
  state.hold = null;
}
