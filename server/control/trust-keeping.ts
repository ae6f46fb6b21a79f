import type { Trust } from '../../shared/arm/trust';
import { shownValue } from '../../shared/arm/units';
import { pathMoves } from '../../shared/motion';
import { isMoving, letGo } from './moves';
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

/** Somebody pushed the arm, or suspects it: what was believed becomes doubtful, and what goes on ends. */
export function doubt(
  arm: Arm,
  state: ControllerState,
  outputs: Outputs,
  actor: Actor,
  joints: readonly number[],
  reason: string,
): Refusal {
  if (joints.length === 0) return null;
  const names = joints.flatMap((i) => arm.model.joints[i]?.name ?? []);
  if (names.length < joints.length)
    return refusal('noSuchJoint', `${arm.model.name} has ${arm.chain.n} joints only.`);
  loseTrust(arm, state, joints, `${actor.name}: ${reason}`);
  tellTrustLoss(state, outputs, names.join(' and '), `${actor.name} says: ${reason}.`);
  audit(state, outputs, actor, 'trust.doubt', `${names.join(', ')}: ${reason}`);
  return null;
}

/**
 * What was believed of some joints is doubtful now; what moves ramps down, because it was planned for a
 * position that was known. An energised servo finds back by itself: it drives to where it is told to be.
 */
export function loseTrust(arm: Arm, state: ControllerState, joints: readonly number[], why: string): void {
  setTrust(
    state,
    joints.filter((i) => state.trust[i] !== 'unknown'),
    'doubtful',
    why,
  );
  letGo(arm, state);
  state.hold = null;
  if (state.referencing && joints.includes(state.referencing.joint)) state.referencing.before = 'doubtful';
  for (const i of joints) if (state.energised[i]) settleServo(arm, state, i);
}

/** Starts the time after which a servo must have got to where it was told to be: its whole travel. */
export function settleServo(arm: Arm, state: ControllerState, index: number): void {
  const { drive, hardRange } = arm.model.joints[index]!;
  if (drive.kind !== 'servo') return;
  state.servoSettledS[index] =
    state.nowS + ((hardRange.upper - hardRange.lower) * drive.ratio) / drive.noLoadSpeed;
}

/** A servo has no count to lose: once it has stood for its full travel time it is where it was told to be. */
export function tickServos(arm: Arm, state: ControllerState): void {
  for (let i = 0; i < arm.chain.n; i++) {
    const settled = state.servoSettledS[i];
    if (settled === null || settled === undefined) continue;
    if (isMoving(state) && pathMoves(state.move!.path, i)) settleServo(arm, state, i);
    else if (state.nowS >= settled) {
      state.servoSettledS[i] = null;
      setTrust(state, [i], 'referenced', `${arm.model.joints[i]!.name} has settled.`);
    }
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
