import type { Joint } from '../../shared/arm/model';
import { CEILINGS, type Trust } from '../../shared/arm/trust';
import { isMoving, letGo, startMove } from './moves';
import { audit, type Refusal, refusal, tell } from './report';
import type { Arm, ControllerState, Outputs } from './state';
import { setTrust } from './trust-keeping';

/** Looking for a switch a joint may travel its whole mechanical range, and this share more. */
const SEARCH_MARGIN = 1.05;

/** Starts looking for a joint's reference switch, at creep, for as long as the button is held. */
export function beginReference(arm: Arm, state: ControllerState, outputs: Outputs, index: number): Refusal {
  const joint = arm.model.joints[index];
  if (!joint) return refusal('noSuchJoint', `${arm.model.name} has no joint ${index + 1}.`);
  if (joint.drive.kind !== 'stepper' || joint.drive.reference.kind !== 'switch')
    return refusal('noSwitch', `${joint.name} has no reference switch. Declare its position.`);
  if (state.sample?.switches[index])
    return refusal('switchClosed', `The switch of ${joint.name} is already closed. Jog away from it first.`);
  const { direction } = joint.drive.reference;
  const to = [...state.q];
  to[index] = state.q[index]! + direction * (joint.hardRange.upper - joint.hardRange.lower) * SEARCH_MARGIN;
  const before = state.trust[index]!;
  // Its soft limits say nothing about where the switch will be found: for the search the joint is not known.
  setTrust(state, [index], 'doubtful', `${joint.name} looks for its switch.`);
  startMove(arm, state, to, { by: 'hold', fraction: CEILINGS.creep, target: null });
  state.referencing = { joint: index, armed: false, before };
  outputs.orders.push({ kind: 'watchSwitch', joint: index });
  return null;
}

/** At the edge the arm ramps down; at rest the count is corrected by what the board latched at the edge. */
export function tickReference(arm: Arm, state: ControllerState, outputs: Outputs): void {
  const { referencing, sample } = state;
  if (!referencing || !sample) return;
  const { joint: index } = referencing;
  const joint = arm.model.joints[index]!;
  if (joint.drive.kind !== 'stepper' || joint.drive.reference.kind !== 'switch') return;
  const edge = sample.referenceEdge[index] ?? null;
  // The latch of an earlier search has to be gone before this one counts.
  if (!referencing.armed) {
    referencing.armed = edge === null;
    return;
  }
  if (edge !== null) {
    letGo(arm, state);
    if (isMoving(state)) return;
    const { position } = joint.drive.reference;
    const corrected = state.q[index]! + (position - edge);
    state.q[index] = corrected;
    outputs.orders.push({ kind: 'declare', joint: index, q: corrected });
    state.move = null;
    state.referencing = null;
    state.hold = null;
    setTrust(state, [index], 'referenced', `${joint.name} found its switch.`);
    tell(state, outputs, 'note', 'referenced', `${joint.name} found its switch: its position is referenced.`);
    audit(state, outputs, state.control, 'reference', joint.name);
  } else if (!isMoving(state)) {
    state.referencing = null;
    if (state.hold) notFound(arm, state, outputs, index);
    // Let go before the switch: nothing was lost, but beyond its soft limits nothing is claimed either.
    else if (insideLimits(joint, state.q[index]!)) {
      setTrust(state, [index], referencing.before, `${joint.name} was let go before its switch.`);
      if (believed(referencing.before))
        outputs.orders.push({ kind: 'declare', joint: index, q: state.q[index]! });
    }
  }
}

/** The whole range was searched: a broken switch, or a joint that does not move. */
function notFound(arm: Arm, state: ControllerState, outputs: Outputs, index: number): void {
  const { name } = arm.model.joints[index]!;
  const message = `${name} went its whole range and its switch did not close, so its position is unknown. Check the switch and its wire.`;
  state.hold = null;
  setTrust(state, [index], 'unknown', message);
  tell(state, outputs, 'caution', 'switchNotFound', message);
}

function believed(trust: Trust): boolean {
  return trust === 'declared' || trust === 'referenced';
}

function insideLimits(joint: Joint, q: number): boolean {
  return q >= joint.limits.lower && q <= joint.limits.upper;
}
