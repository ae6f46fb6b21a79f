import { CEILINGS } from '../../shared/arm/trust';
import { may } from '../../shared/team/roles';
import { stillGripper } from './gripper';
import { endHold } from './holds';
import { isMoving, letGo } from './moves';
import type { Actor } from './process-messages';
import { audit, type Refusal, refusal, tell } from './report';
import { endRun, pauseRun, waitsForPerson } from './runner';
import type { Arm, ControllerState, Holder, Outputs } from './state';

/** Silence after which a request for control is granted, s. */
const REQUEST_SILENCE_S = 10;
/** How long a session whose socket was lost may still reclaim control, s. */
const AWAY_S = 10;

/** Null when `actor` may act in this turn. Every motion message passes here. */
export function mayAct(state: ControllerState, actor: Actor, turn: number): Refusal {
  const { control } = state;
  if (!control) return refusal('noControl', 'Nobody has control. Take control first.');
  if (control.socketId !== actor.socketId)
    return refusal('notInControl', `${control.name} has control. Ask for it first.`);
  if (turn !== state.turn) return refusal('oldTurn', 'Control has changed hands since. Press again.');
  return null;
}

export function take(
  arm: Arm,
  state: ControllerState,
  outputs: Outputs,
  actor: Actor,
  force: boolean,
): Refusal {
  const { control } = state;
  if (force && !may(actor.role, 'control.force'))
    return refusal('notAllowed', 'Only the owner may take control by force.');
  if (!control) {
    grant(state, outputs, actor);
    return null;
  }
  if (control.sessionId === actor.sessionId) return reclaim(arm, state, outputs, actor, control);
  if (state.request && !force && state.request.holder.sessionId !== actor.sessionId)
    return refusal('alreadyAsked', `${state.request.holder.name} has already asked for control. Wait.`);
  if (force) {
    endRun(state, outputs, 'stopped', `${actor.name} took control by force.`);
    comeToRest(arm, state);
  }
  const { userId, name, role, sessionId, socketId } = actor;
  const wait = force ? 0 : REQUEST_SILENCE_S;
  state.request = {
    holder: { userId, name, role, sessionId, socketId },
    untilS: state.nowS + wait,
    untilMs: state.wallMs + wait * 1000,
    forced: force,
  };
  tell(state, outputs, 'note', 'controlAsked', `${name} asks ${control.name} for control.`);
  audit(state, outputs, actor, force ? 'control.force' : 'control.ask', `held by ${control.name}`);
  return null;
}

/** The holder's own session comes back, or takes over from its other tab. */
function reclaim(arm: Arm, state: ControllerState, outputs: Outputs, actor: Actor, control: Holder): Refusal {
  if (control.socketId === actor.socketId) return null;
  if (control.awaySinceS === null) {
    if (isMoving(state) || state.hold)
      return refusal('moving', 'The arm moves. Let go in your other tab first.');
    grant(state, outputs, actor);
    return null;
  }
  control.socketId = actor.socketId;
  control.awaySinceS = null;
  // A reconnect begins slowly again; a run that went on meanwhile keeps its speed.
  if (!state.run) resetCeiling(arm, state);
  return null;
}

function resetCeiling(arm: Arm, state: ControllerState): void {
  letGo(arm, state);
  state.personCeiling = CEILINGS.creep;
  state.peopleClear = false;
}

function grant(state: ControllerState, outputs: Outputs, to: Omit<Holder, 'sinceMs' | 'awaySinceS'>): void {
  const { userId, name, role, sessionId, socketId } = to;
  // A paused run waits for whoever started it, and for nobody else.
  if (state.run && state.run.userId !== userId)
    endRun(state, outputs, 'lost control', `Control went to ${name}.`);
  state.turn++;
  state.control = { userId, name, role, sessionId, socketId, sinceMs: state.wallMs, awaySinceS: null };
  state.request = null;
  state.energising = [];
  state.personCeiling = CEILINGS.creep;
  state.peopleClear = false;
  tell(state, outputs, 'note', 'controlTaken', `${name} has control of this arm.`);
  audit(state, outputs, to, 'control.take', `turn ${state.turn}`);
}

export function answer(state: ControllerState, outputs: Outputs, actor: Actor, accept: boolean): Refusal {
  if (state.control?.socketId !== actor.socketId)
    return refusal('notInControl', 'Only whoever has control can answer.');
  const { request } = state;
  if (!request) return refusal('nobodyAsks', 'Nobody asks for control.');
  if (accept) {
    if (state.run && state.run.phase !== 'paused')
      return refusal('running', 'Pause or end the run first, then say yes.');
    request.untilS = state.nowS;
    return null;
  }
  if (request.forced) return refusal('forced', `${request.holder.name} takes control by force.`);
  state.request = null;
  tell(state, outputs, 'note', 'controlKept', `${actor.name} keeps control.`);
  return null;
}

export function handBack(state: ControllerState, outputs: Outputs, actor: Actor, turn: number): Refusal {
  const no = mayAct(state, actor, turn) ?? mayChangeHands(state);
  if (no) return no;
  giveUp(state, outputs, `${actor.name} handed control back.`);
  return null;
}

export function handOver(
  state: ControllerState,
  outputs: Outputs,
  actor: Actor,
  turn: number,
  to: Actor | undefined,
): Refusal {
  const no = mayAct(state, actor, turn);
  if (no) return no;
  if (!to) return refusal('notWatching', 'That person is not looking at this arm now.');
  if (!may(to.role, 'arm.control'))
    return refusal('notAllowed', `${to.name} may watch, but not take control.`);
  const busy = mayChangeHands(state);
  if (busy) return busy;
  grant(state, outputs, to);
  return null;
}

/** Control changes hands only while the arm stands and nothing is under way. */
function mayChangeHands(state: ControllerState): Refusal {
  if (isMoving(state) || state.hold) return refusal('moving', 'Let the arm come to rest first.');
  if (state.run) return refusal('running', 'End the run first: a run belongs to whoever started it.');
  return null;
}

function giveUp(state: ControllerState, outputs: Outputs, message: string): void {
  const before = state.control;
  state.control = null;
  state.request = null;
  state.energising = [];
  state.turn++;
  state.personCeiling = CEILINGS.creep;
  state.peopleClear = false;
  tell(state, outputs, 'note', 'controlGone', message);
  audit(state, outputs, before, 'control.handBack', message);
}

/** Whatever moves ramps down; what has not begun does not begin. */
function comeToRest(arm: Arm, state: ControllerState): void {
  endHold(arm, state, null);
  letGo(arm, state);
  stillGripper(state);
  state.energising = [];
}

/** A hold dies at once with its socket, and no further joint is energised; control waits AWAY_S for its session. */
export function socketClosed(arm: Arm, state: ControllerState, socketId: string): void {
  if (state.request?.holder.socketId === socketId) state.request = null;
  if (state.control?.socketId !== socketId) return;
  endHold(arm, state, null);
  state.energising = [];
  state.control.awaySinceS ??= state.nowS;
}

/** Signed out or disabled: control goes, and what moves stops. */
export function sessionEnded(arm: Arm, state: ControllerState, outputs: Outputs, sessionId: string): void {
  if (state.request?.holder.sessionId === sessionId) state.request = null;
  if (state.control?.sessionId !== sessionId) return;
  const { name } = state.control;
  endRun(state, outputs, 'lost control', `${name} signed out.`);
  comeToRest(arm, state);
  giveUp(state, outputs, `${name} signed out, so nobody has control.`);
}

/** Requests that come due, and holders that stay away. */
export function tickControl(arm: Arm, state: ControllerState, outputs: Outputs): void {
  const { request, control } = state;
  if (!control) return;
  const still = !isMoving(state) && !state.hold;
  const { run } = state;
  if (request && state.nowS >= request.untilS && still && (!run || run.phase === 'paused')) {
    grant(state, outputs, request.holder);
    return;
  }
  if (control.awaySinceS === null || state.nowS - control.awaySinceS < AWAY_S) return;
  if (run) {
    if (state.unattended && !waitsForPerson(run)) return;
    pauseRun(arm, state, `${control.name} has been away for ${AWAY_S} s.`);
  }
  if (!still) return;
  if (request) grant(state, outputs, request.holder);
  else giveUp(state, outputs, `${control.name} is away, so nobody has control.`);
}
