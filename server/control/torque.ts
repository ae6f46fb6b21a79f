import { availableTorque, reflectedInertia, wouldDrop } from '../../shared/arm/drives';
import { CARRIES_BELOW } from '../../shared/arm/motion-rules';
import { gravityTorques, inverseDynamics } from '../../shared/dynamics';
import type { Arm, ControllerState } from './state';

/** What the gripper is taken to carry: the arm's payload once it has closed, nothing while it is open. */
export function carried(arm: Arm, gripper: ControllerState['gripper']) {
  const { payload } = arm.model;
  return payload && (gripper === null || gripper.opening < CARRIES_BELOW) ? payload : null;
}

const tau = new Float64Array(16);

/** Share of each energised joint's available torque that holding and moving takes now; above 1 none is left. */
export function updateTorqueUsed(arm: Arm, state: ControllerState): void {
  const { chain, model } = arm;
  inverseDynamics(chain, state.q, state.qd, state.qdd, { payload: carried(arm, state.gripper), out: tau });
  for (let i = 0; i < chain.n; i++) {
    const { drive } = model.joints[i]!;
    const asked = tau[i]! + reflectedInertia(drive) * state.qdd[i]!;
    state.torqueUsed[i] = state.energised[i] ? Math.abs(asked) / availableTorque(drive, state.qd[i]!) : null;
  }
}

/** Joints (indices) that gravity would move if the motors went off where the arm is believed to be. */
export function dropsNow(arm: Arm, state: ControllerState): number[] {
  gravityTorques(arm.chain, state.q, { payload: carried(arm, state.gripper), out: tau });
  const drops: number[] = [];
  for (const [i, joint] of arm.model.joints.entries())
    if (state.energised[i] && wouldDrop(joint, tau[i]!)) drops.push(i);
  return drops;
}
