import { CEILINGS, worstTrust } from '../../shared/arm/trust';
import type { ClientMessage } from '../../shared/live/client-messages';
import type { Program } from '../../shared/sequence/program';
import { type GoToProgramStep, stretchFrom } from '../../shared/sequence/stretch';
import { capsFor, positionKnown } from './ceiling';
import { mayReach } from './may-move';
import { isMoving, letGo, replanMove, startOnPath } from './moves';
import type { Actor, ArmRecord } from './process-messages';
import { audit, type Refusal, refusal, tell } from './report';
import type { Arm, ControllerState, Outputs, Run } from './state';
import { inWords } from './tool-moves';

/** Before unheld motion: a countdown that people can hear and see, s. */
const COUNTDOWN_S = 3;
/** How many cycle times a page is shown. */
const SHOWN_CYCLES = 50;
/** Gripper close enough to where it was told to be. */
const GRIP_TOLERANCE = 1e-6;

type RunEnding = Extract<ArmRecord, { kind: 'runEnded' }>['how'];

/** Starts a run. An unproven program has its first cycle held; otherwise it begins after a countdown. */
export function startRun(
  arm: Arm,
  state: ControllerState,
  outputs: Outputs,
  actor: Actor,
  message: Extract<ClientMessage, { type: 'run.start' }>,
  program: Program | undefined,
): Refusal {
  if (!program || program.steps.length === 0)
    return refusal('nothingToRun', 'This sequence has nothing to run.');
  for (const step of program.steps) {
    const no = step.kind === 'goTo' ? mayReach(arm, step.q) : null;
    if (no) return refusal(no.code, `Step ${step.path}: ${no.message}`);
  }
  if (state.run) return refusal('running', 'A run is under way. End it first.');
  const from = message.fromStep ? program.steps.findIndex((s) => s.stepId === message.fromStep) : 0;
  if (from < 0) return refusal('noSuchStep', 'That step does nothing by itself. Choose another one.');
  const held = !program.proven;
  state.run = {
    program,
    userId: actor.userId,
    phase: held ? 'heldWaiting' : 'countdown',
    held,
    single: message.single ?? false,
    cycle: 1,
    cycles: message.cycles,
    stepIndex: from,
    activity: { kind: 'none' },
    countdownS: held ? 0 : COUNTDOWN_S,
    cycleSeconds: 0,
    cycleWhole: from === 0,
    cycleTimes: [],
    startedAtMs: state.wallMs,
    reason: held ? 'The first cycle of this version is held: keep the button pressed.' : null,
  };
  const { runId, sequenceId, sequenceName, version, fingerprint } = program;
  outputs.records.push({
    kind: 'runStarted',
    runId,
    sequenceId,
    sequenceName,
    version,
    userId: actor.userId,
    who: actor.name,
    trust: worstTrust(state.trust),
    cyclesAsked: message.cycles,
    fingerprint,
    startedAtMs: state.wallMs,
  });
  audit(state, outputs, actor, 'run.start', `${sequenceName}, version ${version}`);
  return null;
}

/** Ends the run, if there is one, and says how. The move under way is the caller's to let go. */
export function endRun(state: ControllerState, outputs: Outputs, how: RunEnding, detail: string): void {
  const { run } = state;
  if (!run) return;
  state.run = null;
  outputs.records.push({
    kind: 'runEnded',
    runId: run.program.runId,
    how,
    detail,
    cyclesDone: run.cycle - 1,
    endedAtMs: state.wallMs,
  });
  tell(
    state,
    outputs,
    how === 'faulted' ? 'fault' : 'note',
    'runEnded',
    `${run.program.sequenceName}: run ${how}. ${detail}`.trim(),
  );
}

/** Ramps down on the path and waits. */
export function pauseRun(arm: Arm, state: ControllerState, reason: string | null): void {
  const { run } = state;
  if (!run || run.phase === 'paused' || run.phase === 'pausing') return;
  letGo(arm, state);
  run.reason = reason;
  run.phase = isMoving(state) ? 'pausing' : 'paused';
}

/** Whether the run stands until somebody does something. */
export function waitsForPerson(run: Run): boolean {
  return run.phase === 'paused' || run.phase === 'heldWaiting' || run.phase === 'stepWaiting';
}

export function resumeRun(state: ControllerState, outputs: Outputs, actor: Actor): Refusal {
  const { run } = state;
  if (!run) return refusal('noRun', 'There is no run to resume.');
  if (run.userId !== actor.userId)
    return refusal('notYours', 'Somebody else started this run. End it and start your own.');
  if (run.phase !== 'paused') return refusal('notPaused', 'The run is not paused.');
  if (run.held) {
    run.phase = 'heldWaiting';
    run.reason = 'The first cycle is held: keep the button pressed.';
    return null;
  }
  run.phase = 'countdown';
  run.countdownS = COUNTDOWN_S;
  run.reason = null;
  audit(state, outputs, actor, 'run.resume', run.program.sequenceName);
  return null;
}

/** Does the next step of a run that goes one step at a time. */
export function stepRun(state: ControllerState): Refusal {
  const { run } = state;
  if (run?.phase !== 'stepWaiting') return refusal('notWaiting', 'The run does not wait for a step.');
  run.phase = 'running';
  return null;
}

/** The hold that carries a first cycle begins. */
export function holdRun(arm: Arm, state: ControllerState): Refusal {
  const { run } = state;
  if (!run?.held) return refusal('notHeld', 'This run needs no holding.');
  if (run.phase !== 'heldWaiting')
    return refusal('notWaiting', 'Let the arm come to rest, then press again.');
  run.phase = 'heldRunning';
  run.reason = null;
  goOn(arm, state, run);
  return null;
}

/** The hold ended: ramp down on the path, wait for the next press. */
export function letGoOfRun(arm: Arm, state: ControllerState): void {
  const { run } = state;
  if (run?.phase !== 'heldRunning') return;
  letGo(arm, state);
  run.phase = 'heldWaiting';
  run.reason = 'Let go. Press and hold to go on.';
}

/** An interrupted step goes on along the path it was on. */
function goOn(arm: Arm, state: ControllerState, run: Run): void {
  const { move } = state;
  if (run.activity.kind !== 'move' || !move?.ending) return;
  move.ending = false;
  move.fraction = heldFraction(run, run.activity.speed);
  replanMove(arm, state, move);
}

/** A held first cycle goes at most easy, whatever the steps ask for. */
function heldFraction(run: Run, speed: number): number {
  return run.held ? Math.min(speed, CEILINGS.easy) : speed;
}

/** Brings the run `dt` further; moves themselves are advanced elsewhere. */
export function tickRun(arm: Arm, state: ControllerState, outputs: Outputs, dt: number): void {
  const { run } = state;
  if (!run) return;
  if (!positionKnown(state)) {
    letGo(arm, state);
    endRun(state, outputs, 'stopped', 'The position is not known well enough any more.');
    return;
  }
  if (run.phase === 'heldRunning' && state.hold?.motion.kind !== 'run') letGoOfRun(arm, state);
  if (run.phase === 'pausing' && !isMoving(state)) run.phase = 'paused';
  if (run.phase === 'countdown') {
    run.countdownS = Math.max(0, run.countdownS - dt);
    if (run.countdownS > 0) return;
    run.phase = 'running';
    goOn(arm, state, run);
  }
  if (run.phase !== 'running' && run.phase !== 'heldRunning') return;
  run.cycleSeconds += dt;
  if (run.activity.kind === 'none') {
    const trouble = beginStep(arm, state, run);
    if (trouble) return pauseRun(arm, state, trouble);
  }
  if (stepDone(state, run, dt)) finishStep(state, outputs, run);
}

/** @returns why the step cannot begin, in words */
function beginStep(arm: Arm, state: ControllerState, run: Run): string | null {
  const step = run.program.steps[run.stepIndex]!;
  if (step.kind === 'goTo') {
    const { stretch, refused } = stretchFrom(arm.chain, state.q, run.program.steps, run.stepIndex, {
      ceiling: capsFor(state, run.held ? CEILINGS.easy : 1).fraction,
      single: run.single,
    });
    if (!stretch)
      return `No straight way to “${refused.step.label}” from here: ${inWords(arm, refused.end, true)}`;
    const { path, last, corners, speed } = stretch;
    const { q } = run.program.steps[last] as GoToProgramStep;
    startOnPath(arm, state, path, { by: 'run', fraction: heldFraction(run, speed), target: q });
    run.activity = { kind: 'move', corners, speed };
  } else if (step.kind === 'grip') {
    if (state.gripper) state.gripper.target = step.opening;
    run.activity = { kind: 'grip' };
  } else run.activity = { kind: 'wait', leftS: step.seconds };
  return null;
}

function stepDone(state: ControllerState, run: Run, dt: number): boolean {
  const { activity } = run;
  const step = run.program.steps[run.stepIndex]!;
  if (activity.kind === 'move') {
    // Past a corner that is not stood at, the next step is under way.
    if (activity.corners.length > 0 && (state.move?.s.position ?? 0) >= activity.corners[0]!) {
      activity.corners.shift();
      run.stepIndex++;
      return false;
    }
    if (isMoving(state) || state.move?.ending) return false;
    if (step.kind === 'goTo' && step.settle > 0) {
      run.activity = { kind: 'wait', leftS: step.settle };
      return false;
    }
    return true;
  }
  if (activity.kind === 'grip')
    return state.gripper === null || Math.abs(state.gripper.opening - state.gripper.target) < GRIP_TOLERANCE;
  if (activity.kind === 'wait') {
    activity.leftS -= dt;
    return activity.leftS <= 0;
  }
  return false;
}

function finishStep(state: ControllerState, outputs: Outputs, run: Run): void {
  run.activity = { kind: 'none' };
  state.move = null;
  run.stepIndex++;
  if (run.stepIndex >= run.program.steps.length) finishCycle(state, outputs, run);
  else if (run.single && run.phase === 'running') {
    run.phase = 'stepWaiting';
    run.reason = null;
  }
}

function finishCycle(state: ControllerState, outputs: Outputs, run: Run): void {
  const { runId, sequenceId, version, fingerprint } = run.program;
  const seconds = run.cycleSeconds;
  outputs.records.push({
    kind: 'runCycle',
    runId,
    cycle: run.cycle,
    seconds,
    held: run.held,
    endedAtMs: state.wallMs,
  });
  run.cycleTimes = [...run.cycleTimes, seconds].slice(-SHOWN_CYCLES);
  const wasHeld = run.held;
  if (wasHeld && run.cycleWhole) {
    outputs.records.push({
      kind: 'programProven',
      sequenceId,
      version,
      fingerprint,
      who: state.control?.name ?? '',
    });
    run.held = false;
  }
  run.cycle++;
  run.stepIndex = 0;
  run.cycleSeconds = 0;
  run.cycleWhole = true;
  if (run.cycles !== null && run.cycle > run.cycles) {
    endRun(state, outputs, 'finished', '');
    state.hold = null;
  } else if (run.held) {
    run.phase = 'heldWaiting';
    run.reason = 'The whole sequence has to be held through once. Press and hold.';
    state.hold = null;
  } else if (wasHeld) {
    run.phase = 'paused';
    run.reason = 'The held cycle is done. Resume to go on without holding.';
    state.hold = null;
  } else if (run.single) run.phase = 'stepWaiting';
}
