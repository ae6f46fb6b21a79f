import { receive } from './commands';
import { tickControl } from './control-right';
import { raiseFault, watchLink } from './faults';
import { tickGripper, tickHold } from './holds';
import { tickEnergising } from './motors';
import { advanceMove, isMoving } from './moves';
import { tickReference } from './reference';
import { tickRun } from './runner';
import { type Controller, type Inputs, newOutputs, type Outputs } from './state';
import { newWatch, noteSent, objection, type Watch } from './supervisor';
import { updateTorqueUsed } from './torque';
import { setTrust, tellTrustLoss, tickServos } from './trust-keeping';

const watches = new WeakMap<Controller, Watch>();

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
  const wasEnding = state.move?.ending ?? false;
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
  send(controller, outputs, inputs, dt, !wasEnding && (state.move?.ending ?? false));
  return outputs;
}

/** Hands the set-point out unless the supervisor objects; then nothing is sent and the board stops by itself. */
function send(controller: Controller, outputs: Outputs, inputs: Inputs, dt: number, ramp: boolean): void {
  const { arm, state } = controller;
  const watch = watches.get(controller) ?? newWatch();
  watches.set(controller, watch);
  // Where a person or the board has said anew where the joints are, the past says nothing about speed.
  if (outputs.orders.some((order) => order.kind !== 'watchSwitch')) watch.sent.length = 0;
  if (state.link !== 'steady' || !state.energised.some(Boolean) || state.fault?.code === 'supervisor') return;
  const wrong = objection(arm, state, watch, state.q, dt);
  if (wrong !== null) {
    outputs.linkStop = true;
    const last = watch.sent.at(-1);
    if (last) state.q = [...last];
    state.move = null;
    watch.sent.length = 0;
    raiseFault(arm, state, outputs, {
      code: 'supervisor',
      hard: true,
      message: `${arm.model.name} was stopped before a set-point that breaks a rule: ${wrong}. It stands. Note what you did; a builder acknowledges.`,
    });
    return;
  }
  noteSent(watch, state.q);
  outputs.setpoint = {
    t: inputs.nowS + inputs.lead,
    q: [...state.q],
    gripper: state.gripperEnergised ? (state.gripper?.opening ?? null) : null,
  };
  outputs.replace = ramp;
}

/** A stepper asked for more torque than it has at this speed may have lost steps: nobody can see it, so it is said. */
function suspectStalls(controller: Controller, outputs: Outputs): void {
  const { arm, state } = controller;
  for (const [i, joint] of arm.model.joints.entries()) {
    const used = state.torqueUsed[i];
    if (used === null || used === undefined || used <= 1 || joint.drive.kind !== 'stepper') continue;
    if (state.trust[i] !== 'declared' && state.trust[i] !== 'referenced') continue;
    const why = `${joint.name} was asked for more torque than its motor has.`;
    setTrust(state, [i], 'doubtful', why);
    tellTrustLoss(state, outputs, joint.name, why);
    if (isMoving(state))
      raiseFault(arm, state, outputs, {
        code: 'noTorqueLeft',
        hard: false,
        message: `${why} ${arm.model.name} lets go and stands; it may have lost steps. Look at it, acknowledge, then declare or reference.`,
      });
  }
}
