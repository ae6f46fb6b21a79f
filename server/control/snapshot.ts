import { forwardKinematics, type Transform } from '../../shared/kinematics';
import type { RunState, StateMessage, TelemetryMessage } from '../../shared/live/server-messages';
import { ceilingState } from './ceiling';
import { motorsState } from './motors-state';
import { isMoving, stopAt } from './moves';
import type { Arm, ControllerState, Run } from './state';
import { dropsNow } from './torque';

/** What every page is told when something changes. */
export function stateMessage(arm: Arm, state: ControllerState): StateMessage {
  const { control, request, stop, hold, run, gripper, sample } = state;
  return {
    type: 'state',
    t: state.nowS,
    link: { kind: state.linkKind, state: state.link, answerMs: state.answerMs },
    motors: motorsState(state),
    motorsSinceMs: state.motorsSinceMs,
    motorsBy: state.motorsBy,
    energised: [...state.energised],
    trust: [...state.trust],
    trustNote: state.trustNote,
    trustSinceMs: state.trustSinceMs,
    ceiling: ceilingState(state),
    turn: state.turn,
    control: control
      ? {
          userId: control.userId,
          name: control.name,
          sinceMs: control.sinceMs,
          away: control.awaySinceS !== null,
          request: request
            ? { userId: request.holder.userId, name: request.holder.name, untilMs: request.untilMs }
            : null,
        }
      : null,
    fault: state.fault,
    stop: stop ? { by: stop.by, atMs: stop.atMs, acknowledged: stop.acknowledged } : null,
    hold: hold ? { holdId: hold.holdId, userId: hold.userId, motion: hold.motion } : null,
    run: run ? runState(run) : null,
    wouldDrop: isMoving(state) ? [] : dropsNow(arm, state),
    gripper: gripper
      ? {
          opening: gripper.opening,
          target: gripper.target,
          energised: state.gripperEnergised,
          moving: gripper.opening !== gripper.target,
        }
      : null,
    inputs: [...(sample?.inputs ?? [])],
    outputs: [...(sample?.outputs ?? [])],
  };
}

function runState(run: Run): RunState {
  const step = run.program.steps[Math.min(run.stepIndex, run.program.steps.length - 1)]!;
  return {
    runId: run.program.runId,
    sequenceId: run.program.sequenceId,
    sequenceName: run.program.sequenceName,
    version: run.program.version,
    phase: run.phase,
    held: run.held,
    single: run.single,
    cycle: run.cycle,
    cycles: run.cycles,
    stepId: step.stepId,
    stepPath: step.path,
    stepIndex: run.stepIndex,
    stepCount: run.program.steps.length,
    countdownS: Math.ceil(run.countdownS),
    cycleTimes: run.cycleTimes,
    startedAtMs: run.startedAtMs,
    reason: run.reason,
  };
}

const tool: Transform = { position: [0, 0, 0], rotation: new Float64Array(9) };

/** What every page is shown 50 times a second. */
export function telemetryMessage(arm: Arm, state: ControllerState): TelemetryMessage {
  const { sample, move, blocked } = state;
  forwardKinematics(arm.chain, state.q, tool);
  return {
    type: 'telemetry',
    t: state.nowS,
    q: [...state.q],
    qd: isMoving(state) ? [...state.qd] : state.qd.map(() => 0),
    stopAt: stopAt(arm, state),
    torqueUsed: [...state.torqueUsed],
    tool: { position: [...tool.position], rotation: Array.from(tool.rotation) },
    ...(move?.target && isMoving(state) ? { target: move.target } : {}),
    ...(sample?.measured.some((m) => m !== null) ? { measured: [...sample.measured] } : {}),
    ...(sample?.truth ? { truth: [...sample.truth] } : {}),
    ...(blocked ? { blocked } : {}),
  };
}
