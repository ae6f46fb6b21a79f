import { GRIPPER_PACE } from '../../shared/arm/motion-rules';
import { type Refusal, refusal } from './report';
import type { Arm, ControllerState } from './state';

export function setGripper(arm: Arm, state: ControllerState, opening: number): Refusal {
  if (!state.gripper) return refusal('noGripper', `${arm.model.name} has no gripper.`);
  if (state.link !== 'steady') return refusal('noLink', 'The link is not steady: nothing moves.');
  if (state.fault) return refusal('faulted', 'A fault waits to be acknowledged first.');
  if (!state.gripperEnergised) return refusal('resting', 'The gripper is not energised.');
  if (state.run) return refusal('running', 'End the run first.');
  state.gripper.target = opening;
  return null;
}

/** The gripper stays where it is. */
export function stillGripper(state: ControllerState): void {
  if (state.gripper) state.gripper.target = state.gripper.opening;
}

export function tickGripper(arm: Arm, state: ControllerState, dt: number): void {
  const { gripper } = state;
  if (!gripper || !arm.model.gripper) return;
  const most = (GRIPPER_PACE * dt) / arm.model.gripper.travelTime;
  const gap = gripper.target - gripper.opening;
  gripper.opening = Math.abs(gap) <= most ? gripper.target : gripper.opening + Math.sign(gap) * most;
}
