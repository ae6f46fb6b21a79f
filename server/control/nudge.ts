import { CEILINGS } from '../../shared/arm/trust';
import { shownValue } from '../../shared/arm/units';
import { radiusAboutJoint, type ToolAxis, type ToolFrame } from '../../shared/kinematics';
import {
  type ClientMessage,
  NUDGE_ANGLES,
  NUDGE_LENGTHS,
  NUDGE_MAX_TOOL_TRAVEL,
} from '../../shared/live/client-messages';
import { positionKnown } from './ceiling';
import { jogBound, mayMove, tooLate } from './may-move';
import { startMove } from './moves';
import type { Actor } from './process-messages';
import { audit, type Refusal, refusal, tell } from './report';
import type { Arm, ControllerState, Outputs } from './state';
import { moveTool } from './tool-moves';

/** Rounding of what pages send, rad or m. */
const SAME = 1e-9;

/** One small fixed step, which finishes by itself. */
export function nudge(
  arm: Arm,
  state: ControllerState,
  outputs: Outputs,
  actor: Actor,
  message: Extract<ClientMessage, { type: 'nudge' }>,
): Refusal {
  const { frame, axis, amount } = message;
  const late = tooLate(state, message.seenT);
  if (late) return late;
  if (state.run) return refusal('running', 'End the run first.');
  if (frame !== 'joint' && typeof axis === 'string') {
    const no = mayMove(arm, state) ?? nudgeTool(arm, state, frame, axis, amount);
    if (!no)
      audit(
        state,
        outputs,
        actor,
        'nudge',
        `tool along or about ${frame} ${axis} by ${shownValue(axis.length === 2 ? 'revolute' : 'prismatic', amount)}`,
      );
    return no;
  }
  if (frame !== 'joint' || typeof axis !== 'number')
    return refusal('wrongAxis', 'Joints are nudged by number, the tool by x, y, z, rx, ry or rz.');
  const joint = arm.model.joints[axis];
  if (!joint) return refusal('noSuchJoint', `${arm.model.name} has no joint ${axis + 1}.`);
  const no = mayMove(arm, state, axis);
  if (no) return no;
  const sizes = joint.type === 'revolute' ? NUDGE_ANGLES : NUDGE_LENGTHS;
  if (!sizes.some((size) => Math.abs(size - Math.abs(amount)) < SAME))
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
  startMove(arm, state, to, { by: 'nudge', fraction: CEILINGS.easy, target: to });
  if (most < Math.abs(amount) - SAME)
    tell(
      state,
      outputs,
      'note',
      'nudgeShortened',
      `${joint.name} moves ${shownValue(joint.type, most, 2)} only: no point of the arm goes more than ${shownValue('prismatic', NUDGE_MAX_TOOL_TRAVEL, 0)} in one nudge.`,
    );
  audit(state, outputs, actor, 'nudge', `${joint.name} by ${shownValue(joint.type, most)}`);
  return null;
}

function nudgeTool(
  arm: Arm,
  state: ControllerState,
  frame: ToolFrame,
  axis: ToolAxis,
  amount: number,
): Refusal {
  const sizes = axis.length === 2 ? NUDGE_ANGLES : NUDGE_LENGTHS;
  if (!sizes.some((size) => Math.abs(size - Math.abs(amount)) < SAME))
    return refusal('notANudge', 'That is not one of the nudge sizes.');
  state.blocked = null;
  return moveTool(arm, state, frame, axis, amount, {
    by: 'nudge',
    asFar: false,
    fraction: CEILINGS.easy,
    farthest: NUDGE_MAX_TOOL_TRAVEL,
  });
}
