import { CEILINGS } from '../../shared/arm/trust';
import type { ClientMessage } from '../../shared/live/client-messages';
import { ceilingState, positionKnown } from './ceiling';
import { answer, handBack, handOver, mayAct, sessionEnded, socketClosed, take } from './control-right';
import { acknowledge } from './faults';
import { setGripper } from './gripper';
import { endHold, keepHold, startHold } from './holds';
import { mayMove } from './may-move';
import { energise, motorsOff } from './motors';
import { isMoving, letGo, replanMove } from './moves';
import { nudge } from './nudge';
import type { Actor, Resolved } from './process-messages';
import { audit, type Refusal, refusal } from './report';
import { endRun, pauseRun, resumeRun, startRun, stepRun } from './runner';
import type { Arm, ControllerState, Incoming, Outputs } from './state';
import { stop } from './stopping';
import { declare, doubt } from './trust-keeping';

/** Takes one message in and answers it. Nothing here throws for what a page may send. */
export function receive(arm: Arm, state: ControllerState, outputs: Outputs, incoming: Incoming): void {
  switch (incoming.kind) {
    case 'command': {
      const { actor, message, resolved } = incoming;
      const refused = handle(arm, state, outputs, actor, message, resolved);
      if ('id' in message) outputs.answers.push({ socketId: actor.socketId, id: message.id, refused });
      return;
    }
    case 'socketClosed':
      socketClosed(arm, state, incoming.socketId);
      return;
    case 'sessionEnded':
      sessionEnded(arm, state, outputs, incoming.sessionId);
      return;
    case 'stop':
      stop(arm, state, outputs, { userId: '', name: incoming.by });
      return;
    case 'settings':
      state.unattended = incoming.unattended;
      return;
  }
}

function handle(
  arm: Arm,
  state: ControllerState,
  outputs: Outputs,
  actor: Actor,
  message: ClientMessage,
  resolved: Resolved,
): Refusal {
  switch (message.type) {
    case 'stop':
      stop(arm, state, outputs, actor);
      return null;
    case 'control.take':
      return take(arm, state, outputs, actor, message.force ?? false);
    case 'control.answer':
      return answer(state, outputs, actor, message.accept);
    case 'control.handBack':
      return handBack(state, outputs, actor, message.turn);
    case 'control.handOver':
      return handOver(state, outputs, actor, message.turn, resolved.person);
    case 'motors.off':
      return motorsOff(arm, state, outputs, actor, message.dropsAccepted);
    case 'trust.doubt':
      return doubt(arm, state, outputs, actor, message.joints, message.reason ?? 'pushed by hand');
    case 'hold.keep':
      keepHold(state, actor, message);
      return null;
    case 'hold.end':
      if (state.hold?.socketId === actor.socketId) endHold(arm, state, message.holdId);
      return null;
    default:
      return mayAct(state, actor, message.turn) ?? inControl(arm, state, outputs, actor, message, resolved);
  }
}

/** Messages of whoever has control, in this turn. */
function inControl(
  arm: Arm,
  state: ControllerState,
  outputs: Outputs,
  actor: Actor,
  message: Exclude<
    ClientMessage,
    {
      type:
        | 'stop'
        | 'control.take'
        | 'control.answer'
        | 'control.handBack'
        | 'control.handOver'
        | 'motors.off'
        | 'trust.doubt'
        | 'hold.keep'
        | 'hold.end';
    }
  >,
  resolved: Resolved,
): Refusal {
  switch (message.type) {
    case 'motors.energise':
      return energise(arm, state, outputs, actor, message);
    case 'fault.acknowledge':
      return acknowledge(arm, state, outputs, actor);
    case 'ceiling.set':
      return setCeiling(arm, state, outputs, actor, message.fraction, message.peopleClear ?? false);
    case 'trust.declare':
      return declare(arm, state, outputs, actor, message.q, message.joints);
    case 'hold.start':
      return startHold(arm, state, outputs, actor, message, resolved);
    case 'nudge':
      return nudge(arm, state, outputs, actor, message);
    case 'gripper.set':
      return setGripper(arm, state, message.opening);
    case 'run.start': {
      const no = mayMove(arm, state);
      if (no) return no;
      if (!positionKnown(state))
        return refusal(
          'positionUnknown',
          'The position is not known well enough. Declare or reference it first.',
        );
      return startRun(arm, state, outputs, actor, message, resolved.program);
    }
    case 'run.pause':
      if (!state.run) return refusal('noRun', 'There is no run to pause.');
      pauseRun(arm, state, 'Paused.');
      return null;
    case 'run.resume':
      return resumeRun(state, outputs, actor);
    case 'run.step':
      return stepRun(state);
    case 'run.end':
      if (!state.run) return refusal('noRun', 'There is no run to end.');
      letGo(arm, state);
      if (state.hold?.motion.kind === 'run') state.hold = null;
      endRun(state, outputs, 'ended', `${actor.name} ended it.`);
      return null;
  }
}

/** Lowering takes a ramp at once; raising waits until the arm stands. */
function setCeiling(
  arm: Arm,
  state: ControllerState,
  outputs: Outputs,
  actor: Actor,
  fraction: number,
  peopleClear: boolean,
): Refusal {
  if (peopleClear && fraction !== 1)
    return refusal('notFull', 'People clear goes with a ceiling of exactly 100 %.');
  const raises = fraction > state.personCeiling || (peopleClear && !state.peopleClear);
  if (raises && isMoving(state))
    return refusal('moving', 'While the arm moves the ceiling can only be lowered.');
  const before = ceilingState(state);
  state.personCeiling = fraction;
  state.peopleClear = peopleClear;
  const after = ceilingState(state);
  const lower = after.fraction < before.fraction || after.toolSpeed !== before.toolSpeed;
  if (lower && state.move && isMoving(state) && !state.move.ending) replanMove(arm, state, state.move);
  if (after.fraction > CEILINGS.easy || peopleClear)
    audit(
      state,
      outputs,
      actor,
      'ceiling.set',
      `${Math.round(fraction * 100)} %${peopleClear ? ', people clear' : ''}`,
    );
  return null;
}
