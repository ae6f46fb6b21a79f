import { type Trust, worstTrust } from '../../shared/arm/trust';
import { shownValue } from '../../shared/arm/units';
import { isMoving } from './moves';
import type { Actor } from './process-messages';
import { audit, type Refusal, refusal, tell } from './report';
import type { Arm, ControllerState, Outputs } from './state';

/** Sets the trust of some joints and says why. */
export function setTrust(
  state: ControllerState,
  joints: readonly number[],
  trust: Trust,
  note: string,
): void {
  for (const joint of joints) state.trust[joint] = trust;
  state.trustNote = note;
  state.trustSinceMs = state.wallMs;
}

/** A person says where the joints stand. Servos know their own angle and are left alone. */
export function declare(
  arm: Arm,
  state: ControllerState,
  outputs: Outputs,
  actor: Actor,
  q: readonly number[],
  only: readonly number[] | undefined,
): Refusal {
  const { joints } = arm.model;
  if (q.length !== joints.length)
    return refusal('wrongLength', `${arm.model.name} has ${joints.length} joints.`);
  if (isMoving(state) || state.run) return refusal('moving', 'Let the arm come to rest first.');
  const chosen = joints
    .map((_, i) => i)
    .filter((i) => joints[i]!.drive.kind === 'stepper' && (!only || only.includes(i)));
  for (const i of chosen) {
    const joint = joints[i]!;
    if (!state.energised[i])
      return refusal('resting', `Energise ${joint.name} first: a resting joint can still move.`);
    const { lower, upper } = joint.hardRange;
    if (q[i]! < lower || q[i]! > upper)
      return refusal(
        'outOfRange',
        `${joint.name} cannot stand at ${shownValue(joint.type, q[i]!)}: its mechanics end at ${shownValue(joint.type, lower)} and ${shownValue(joint.type, upper)}.`,
      );
  }
  for (const i of chosen) {
    state.q[i] = q[i]!;
    outputs.orders.push({ kind: 'declare', joint: i, q: q[i]! });
  }
  state.move = null;
  setTrust(state, chosen, 'declared', `Declared by ${actor.name}.`);
  audit(state, outputs, actor, 'trust.declare', chosen.map((i) => joints[i]!.name).join(', '));
  return null;
}

/** Somebody pushed the arm, or suspects it: what was believed becomes doubtful. */
export function doubt(
  arm: Arm,
  state: ControllerState,
  outputs: Outputs,
  actor: Actor,
  joints: readonly number[],
  reason: string,
): Refusal {
  const known = joints.filter((i) => i < arm.chain.n && state.trust[i] !== 'unknown');
  setTrust(state, known, 'doubtful', `${actor.name}: ${reason}`);
  audit(state, outputs, actor, 'trust.doubt', reason);
  return null;
}

/** A servo has no count to lose: once it has stood for its full travel time it is where it was told to be. */
export function tickServos(arm: Arm, state: ControllerState): void {
  for (let i = 0; i < arm.chain.n; i++) {
    const settled = state.servoSettledS[i];
    if (settled === null || settled === undefined || state.nowS < settled) continue;
    state.servoSettledS[i] = null;
    state.trust[i] = 'referenced';
    state.trustSinceMs = state.wallMs;
  }
}

/** What the motors going off does to trust: joints that drop are unknown, joints that hold by themselves doubtful. */
export function trustAfterMotorsOff(state: ControllerState, drops: readonly number[], who: string): void {
  for (let i = 0; i < state.trust.length; i++) {
    if (drops.includes(i)) state.trust[i] = 'unknown';
    else if (state.trust[i] !== 'unknown') state.trust[i] = 'doubtful';
  }
  state.trustNote = `Motors off, ${who}.`;
  state.trustSinceMs = state.wallMs;
}

/** Says so when the arm's trust has fallen below what a run needs. */
export function tellTrustLoss(state: ControllerState, outputs: Outputs, joint: string, why: string): void {
  tell(
    state,
    outputs,
    'caution',
    'trustLost',
    `${why} The position of ${joint} is doubtful: creep, holds and nudges only. Look at the arm, then declare or reference.`,
  );
}

export function armTrust(state: ControllerState): Trust {
  return worstTrust(state.trust);
}
