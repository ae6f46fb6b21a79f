import { receive } from './commands';
import { tickControl } from './control-right';
import { raiseFault } from './faults';
import { tickGripper } from './gripper';
import { tickHold } from './holds';
import { watchLink } from './link-watch';
import { tickEnergising } from './motors';
import { advanceMove, isMoving } from './moves';
import { tickReference } from './reference';
import { tickRun } from './runner';
import { type Controller, type Inputs, newOutputs, type Outputs } from './state';
import { tickStop } from './stopping';
import { forgetSent, noteSent, objection, recount } from './supervisor';
import { updateTorqueUsed } from './torque';
import { loseTrust, tellTrustLoss, tickServos } from './trust-keeping';

/**
 * One tick of an arm: takes in what arrived, moves everything `dt` further, and says what goes out. No clock,
 * no timer, no I/O, no randomness: the same inputs give the same outputs, in the arm process and in a
 * simulation alike. The controller's state is changed in place; nothing else is.
 *
 * @param dt - s since the last tick, by which the motion advances
 */
export function step(controller: Controller, inputs: Inputs, dt: number): Outputs {
  const { arm, state } = controller;
  const outputs = newOutputs();
  state.nowS = inputs.nowS;
  state.wallMs = inputs.wallMs;
  watchLink(arm, state, outputs, inputs);
  const { move } = state;
  const plan = move?.profile;
  for (const incoming of inputs.incoming) receive(arm, state, outputs, incoming);
  tickHold(arm, state);
  tickControl(arm, state, outputs);
  tickEnergising(arm, state, outputs);
  tickServos(arm, state);
  tickReference(arm, state, outputs);
  tickRun(arm, state, outputs, dt);
  tickGripper(arm, state, dt);
  advanceMove(state, dt);
  updateTorqueUsed(arm, state);
  suspectStalls(controller, outputs);
  tickStop(arm, state, outputs, inputs.lead);
  send(controller, outputs, inputs, dt, move !== null && move === state.move && plan !== move.profile);
  return outputs;
}

/** Hands the set-point out unless the supervisor objects; then nothing is sent and the board stops by itself. */
function send(
  controller: Controller,
  outputs: Outputs,
  inputs: Inputs,
  dt: number,
  replanned: boolean,
): void {
  const { arm, state, watch } = controller;
  // Nothing is told to a board that is not there, holds nothing, or has stopped by itself until it is cleared.
  if (
    state.link !== 'steady' ||
    !state.energised.some(Boolean) ||
    state.sample?.latched ||
    outputs.linkStop ||
    state.fault?.code === 'supervisor'
  )
    return forgetSent(watch);
  const gripper = state.gripperEnergised ? (state.gripper?.opening ?? null) : null;
  recount(watch, state, outputs.orders);
  const wrong = objection(arm, state, watch, gripper, dt);
  if (wrong !== null) return overrule(controller, outputs, wrong);
  noteSent(watch, state.q, gripper);
  outputs.setpoint = { t: inputs.nowS + inputs.lead, q: [...state.q], gripper };
  outputs.replace = replanned;
}

function overrule({ arm, state, watch }: Controller, outputs: Outputs, wrong: string): void {
  outputs.linkStop = true;
  const last = watch.sent.at(-1);
  if (last) state.q = [...last];
  state.move = null;
  state.qd.fill(0);
  state.qdd.fill(0);
  forgetSent(watch);
  raiseFault(arm, state, outputs, {
    code: 'supervisor',
    hard: true,
    message: `${arm.model.name} was stopped before a set-point that breaks a rule: ${wrong}. It stands. Note what you did; a builder acknowledges.`,
  });
}

/** A stepper asked for more torque than it has at this speed may have lost steps: nobody can see it, so it is said. */
function suspectStalls({ arm, state }: Controller, outputs: Outputs): void {
  for (const [i, joint] of arm.model.joints.entries()) {
    const used = state.torqueUsed[i];
    if (used === null || used === undefined || used <= 1 || joint.drive.kind !== 'stepper') continue;
    const believed = state.referencing?.joint === i ? state.referencing.before : state.trust[i];
    if (believed !== 'declared' && believed !== 'referenced') continue;
    const why = `${joint.name} was asked for more torque than its motor has.`;
    const moved = isMoving(state);
    loseTrust(arm, state, [i], why);
    tellTrustLoss(state, outputs, joint.name, why);
    if (moved)
      raiseFault(arm, state, outputs, {
        code: 'noTorqueLeft',
        hard: false,
        message: `${why} ${arm.model.name} ramps down; it may have lost steps. Look at it, acknowledge, then declare or reference.`,
      });
  }
}
