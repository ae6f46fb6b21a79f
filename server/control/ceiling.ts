import type { Joint } from '../../shared/arm/model';
import { POINT_SPEED_CREEP_M_S, POINT_SPEED_M_S } from '../../shared/arm/motion-rules';
import { CEILINGS, trustCeiling, worstTrust } from '../../shared/arm/trust';
import type { CeilingState } from '../../shared/live/server-messages';
import type { PathCaps } from '../../shared/motion';
import type { Arm, ControllerState } from './state';

export function ceilingState(state: ControllerState): CeilingState {
  const trust = trustCeiling(worstTrust(state.trust));
  const firstPower = 1;
  const fraction = Math.min(state.personCeiling, trust, firstPower);
  const lowest = fraction === state.personCeiling ? 'person' : fraction === trust ? 'trust' : 'first power';
  const peopleClear = state.peopleClear && state.personCeiling === 1;
  const speed = pointSpeed(fraction, peopleClear, positionKnown(state));
  return {
    fraction,
    person: state.personCeiling,
    trust,
    firstPower,
    lowest,
    peopleClear,
    toolSpeed: Number.isFinite(speed) ? speed : null,
  };
}

/** Every joint declared or better: soft limits mean something. */
export function positionKnown(state: ControllerState): boolean {
  return state.trust.every((t) => t === 'declared' || t === 'referenced');
}

function pointSpeed(fraction: number, peopleClear: boolean, known: boolean): number {
  if (peopleClear && fraction === 1 && known) return Infinity;
  return known && fraction > CEILINGS.creep ? POINT_SPEED_M_S : POINT_SPEED_CREEP_M_S;
}

/** What an act that asks for `fraction` of the joint limits may do now. */
export function capsFor(state: ControllerState, fraction: number): PathCaps {
  const ceiling = ceilingState(state);
  return { fraction: Math.min(fraction, ceiling.fraction), pointSpeed: ceiling.toolSpeed ?? Infinity };
}

/** Worst reach where the configuration is not known, otherwise nothing: paths then look at the arm itself. */
export function reachToUse(arm: Arm, state: ControllerState): Float64Array | undefined {
  return positionKnown(state) ? undefined : arm.reach;
}

/** While the arm's position is not known one press moves a joint at most this far: rad, m. */
const UNKNOWN_TRAVEL_RAD = (10 * Math.PI) / 180;
const UNKNOWN_TRAVEL_M = 0.02;

export function unknownTravel(joint: Joint): number {
  return joint.type === 'revolute' ? UNKNOWN_TRAVEL_RAD : UNKNOWN_TRAVEL_M;
}
