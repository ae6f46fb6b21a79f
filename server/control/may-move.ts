import { shownValue } from '../../shared/arm/units';
import { KEEP_MAX_AGE_S } from '../../shared/live/client-messages';
import { positionKnown, unknownTravel } from './ceiling';
import { allEnergised } from './motors-state';
import { isMoving } from './moves';
import { type Refusal, refusal } from './report';
import type { Arm, ControllerState } from './state';

/** Nearer to a limit than this a joint is at it, rad or m. */
export const AT_LIMIT = 1e-6;

/** What every motion needs besides control. `joint`: the only one that moves; the others may rest. */
export function mayMove(arm: Arm, state: ControllerState, joint: number | null = null): Refusal {
  if (state.link !== 'steady') return refusal('noLink', 'The link is not steady: nothing moves.');
  if (state.fault) return refusal('faulted', 'A fault waits to be acknowledged first.');
  if (state.energising.length > 0) return refusal('energising', 'Wait until every joint is energised.');
  if (joint === null ? !allEnergised(state) : !state.energised[joint])
    return refusal(
      'resting',
      `${joint === null ? arm.model.name : arm.model.joints[joint]!.name} is not energised.`,
    );
  if (isMoving(state) || state.hold) return refusal('moving', 'One motion at a time: let go first.');
  return null;
}

/** Where an arm is sent has to lie inside every soft limit. */
export function mayReach(arm: Arm, q: readonly number[]): Refusal {
  const { name, joints } = arm.model;
  if (q.length !== joints.length) return refusal('wrongLength', `${name} has ${joints.length} joints.`);
  for (const [i, joint] of joints.entries()) {
    const { lower, upper } = joint.limits;
    // Written so that what is not a number is not inside either.
    if (!(q[i]! >= lower - AT_LIMIT && q[i]! <= upper + AT_LIMIT))
      return refusal(
        'beyondLimit',
        `${joint.name} would have to go to ${shownValue(joint.type, q[i]!)}; its soft limits are ${shownValue(joint.type, lower)} and ${shownValue(joint.type, upper)}.`,
      );
  }
  return null;
}

/** An order that was long under way is dropped: whoever gave it saw another arm. */
export function tooLate(state: ControllerState, seenT: number | undefined): Refusal {
  if (seenT === undefined || isFresh(state, seenT)) return null;
  return refusal('tooLate', 'This order came late, so nothing moved. Look at the arm and press again.');
}

/** Telemetry seen at `seenT` is recent, and not from the future either. */
export function isFresh(state: ControllerState, seenT: number): boolean {
  const age = state.nowS - seenT;
  return age <= KEEP_MAX_AGE_S && age >= -KEEP_MAX_AGE_S;
}

/** How far a press may take a joint: to its soft limit, and a short way only while the arm is not known. */
export function jogBound(arm: Arm, state: ControllerState, index: number, direction: 1 | -1): number {
  const joint = arm.model.joints[index]!;
  const trust = state.trust[index];
  const end = direction > 0 ? 'upper' : 'lower';
  if (positionKnown(state)) return joint.limits[end];
  const short = state.q[index]! + direction * unknownTravel(joint);
  if (trust === 'unknown') return short;
  // Doubtful counts are wrong by something; the board still keeps them inside the mechanics.
  const bound = trust === 'doubtful' ? joint.hardRange[end] : joint.limits[end];
  return direction > 0 ? Math.min(bound, short) : Math.max(bound, short);
}
