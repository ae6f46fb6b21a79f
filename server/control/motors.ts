import type { ClientMessage } from '../../shared/live/client-messages';
import { isMoving } from './moves';
import type { Actor } from './process-messages';
import { audit, type Refusal, refusal } from './report';
import { endRun } from './runner';
import type { Arm, ControllerState, Outputs } from './state';
import { dropsNow } from './torque';
import { setTrust, settleServo, trustAfterMotorsOff } from './trust-keeping';

/** Joints are energised one after another, so that the supply does not sag and a jump is seen. s */
const BETWEEN_JOINTS_S = 0.25;

export function energise(
  arm: Arm,
  state: ControllerState,
  outputs: Outputs,
  actor: Actor,
  message: Extract<ClientMessage, { type: 'motors.energise' }>,
): Refusal {
  if (state.link !== 'steady')
    return refusal('noLink', 'The link is not steady. Wait for it, then energise.');
  if (state.fault) return refusal('faulted', 'A fault waits to be acknowledged first.');
  if (isMoving(state)) return refusal('moving', 'Let the arm come to rest first.');
  const { joints } = arm.model;
  if (state.run) return refusal('running', 'End the run first.');
  const asked = message.joints ? [...new Set(message.joints)] : joints.map((_, i) => i);
  const chosen = asked.filter((i) => !state.energised[i]);
  const queue: ControllerState['energising'] = [];
  for (const i of chosen) {
    const joint = joints[i];
    if (!joint) return refusal('noSuchJoint', `${arm.model.name} has no joint ${i + 1}.`);
    const given = message.servoAngles.find((s) => s.joint === i)?.q;
    if (joint.drive.kind === 'servo') {
      if (given === undefined)
        return refusal('angleMissing', `Say where ${joint.name} stands: its first signal sends it there.`);
      if (given < joint.hardRange.lower || given > joint.hardRange.upper)
        return refusal('outOfRange', `${joint.name} cannot stand there: that is beyond its mechanics.`);
      queue.push({ joint: i, assumed: given });
    } else queue.push({ joint: i, assumed: state.q[i]! });
  }
  state.energising = queue;
  state.nextEnergiseS = state.nowS;
  state.move = null;
  state.motorsSinceMs = state.wallMs;
  state.motorsBy = actor.name;
  if (state.gripper && !state.gripperEnergised) {
    const opening = message.gripperOpening ?? state.gripper.opening;
    state.gripper = { opening, target: opening };
    state.gripperEnergised = true;
    outputs.orders.push({ kind: 'energiseGripper', assumed: opening });
  }
  audit(state, outputs, actor, 'motors.energise', queue.map(({ joint }) => joints[joint]!.name).join(', '));
  return null;
}

/** Energises the next joint when its moment has come. */
export function tickEnergising(arm: Arm, state: ControllerState, outputs: Outputs): void {
  if (state.energising.length === 0 || state.nowS < state.nextEnergiseS) return;
  const { joint: index, assumed } = state.energising.shift()!;
  state.nextEnergiseS = state.nowS + BETWEEN_JOINTS_S;
  state.energised[index] = true;
  state.q[index] = assumed;
  outputs.orders.push({ kind: 'energise', joint: index, assumed });
  if (arm.model.joints[index]!.drive.kind !== 'servo') return;
  setTrust(
    state,
    [index],
    'declared',
    `${arm.model.joints[index]!.name} was energised where it was said to stand.`,
  );
  settleServo(arm, state, index);
}

/** Motors off may drop the arm: the person has to have seen which joints. */
export function motorsOff(
  arm: Arm,
  state: ControllerState,
  outputs: Outputs,
  actor: Actor,
  accepted: readonly number[],
): Refusal {
  if (state.link !== 'steady')
    return refusal(
      'noLink',
      'The link is not steady, so the motors cannot be switched off here. Use the supply switch.',
    );
  if (isMoving(state)) return refusal('moving', 'Stop the arm first, then switch the motors off.');
  const drops = dropsNow(arm, state);
  const unseen = drops.filter((i) => !accepted.includes(i)).map((i) => arm.model.joints[i]!.name);
  if (unseen.length > 0)
    return refusal('wouldDrop', `${unseen.join(' and ')} would drop. Support the arm and confirm.`);
  endRun(state, outputs, 'ended', `${actor.name} switched the motors off.`);
  outputs.orders.push({ kind: 'motorsOff' });
  trustAfterMotorsOff(state, drops, actor.name);
  nowResting(state);
  state.motorsBy = actor.name;
  audit(state, outputs, actor, 'motors.off', drops.map((i) => arm.model.joints[i]!.name).join(', '));
  return null;
}

/** Drivers are off, by whatever cause: nothing holds, nothing moves. */
export function nowResting(state: ControllerState): void {
  state.energised.fill(false);
  state.gripperEnergised = false;
  state.energising = [];
  state.servoSettledS.fill(null);
  state.move = null;
  state.hold = null;
  state.referencing = null;
  state.qd.fill(0);
  state.qdd.fill(0);
  state.motorsSinceMs = state.wallMs;
}
