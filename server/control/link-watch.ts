import type { BoardSample } from './arm-link';
import { adoptBoard, raiseFault } from './faults';
import { nowResting } from './motors';
import { isMoving } from './moves';
import { tell } from './report';
import type { Arm, ControllerState, Inputs, Outputs } from './state';
import { dropsNow } from './torque';
import { loseTrust, setTrust, trustAfterMotorsOff } from './trust-keeping';

/** A board whose clock stands still for this long is not heard any more, s (SAFETY: 250 ms). */
const QUIET_S = 0.25;
/** How long a board may be away from where, or how, it was told to be before that is a fault, s. */
const ASTRAY_S = 0.15;
/** Counts may differ from set-points by this much, rad or m, and by what the lead hides while moving. */
const ASTRAY_RAD = 0.01;
const ASTRAY_M = 0.001;
const LEAD_DOUBT_S = 0.05;

/** What the board and the link report. */
export function watchLink(arm: Arm, state: ControllerState, outputs: Outputs, inputs: Inputs): void {
  const { sample } = inputs;
  state.answerMs = inputs.answerMs;
  if (sample && sample.t !== state.sample?.t) state.heardS = state.nowS;
  if (inputs.linkClosed) return lose(arm, state, outputs, 'closed');
  if (!sample) return;
  if (state.nowS - state.heardS > QUIET_S) return lose(arm, state, outputs, 'quiet');
  const restarted = state.bootId !== null && sample.bootId !== state.bootId;
  state.sample = sample;
  state.bootId = sample.bootId;
  if (restarted) boardRestarted(arm, state, outputs);
  if (state.link === 'lost') {
    // Meanwhile the board has ramped down by itself: go on from where it says it is, once it stands.
    if (sample.moving) return;
    adoptBoard(arm, state);
  }
  state.link = 'steady';
  if (sample.latched && !isMoving(state)) adoptBoard(arm, state);
  watchFaults(arm, state, outputs, sample);
  watchAstray(arm, state, outputs, sample, inputs.lead);
}

function lose(arm: Arm, state: ControllerState, outputs: Outputs, how: 'closed' | 'quiet'): void {
  if (state.link === 'lost') return;
  const moved = isMoving(state);
  state.link = 'lost';
  if (!state.energised.some(Boolean)) return;
  const { name } = arm.model;
  loseTrust(arm, state, everyJoint(state), 'The link was lost.');
  const what =
    how === 'quiet' ? `The link was quiet for ${QUIET_S * 1000} ms` : `The link to ${name} was lost`;
  raiseFault(arm, state, outputs, {
    code: how === 'quiet' ? 'linkQuiet' : 'linkLost',
    hard: false,
    message: `${what}${moved ? ' while it moved, and its board stops it' : ''}. Its position is doubtful. Check the cable and the supply, then acknowledge.`,
  });
}

function boardRestarted(arm: Arm, state: ControllerState, outputs: Outputs): void {
  nowResting(state);
  setTrust(state, everyJoint(state), 'unknown', 'The board restarted.');
  raiseFault(arm, state, outputs, {
    code: 'boardRestarted',
    hard: true,
    message: `The board of ${arm.model.name} restarted, so its motors are off and its position is unknown. Look for a sagging supply; a builder acknowledges.`,
  });
}

/** The board stopped the arm by itself. */
function watchFaults(arm: Arm, state: ControllerState, outputs: Outputs, sample: BoardSample): void {
  if (state.fault || state.nowS < state.clearingUntilS) return;
  if (sample.faults.length === 0 && !sample.latched) return;
  const why = sample.faults.length > 0 ? ` (${sample.faults.join(', ')})` : '';
  raiseFault(arm, state, outputs, {
    code: 'boardFault',
    hard: sample.faults.includes('driver') || sample.faults.includes('brownOut'),
    message: `The board of ${arm.model.name} stopped it${why}. It stands. Look at the arm, then acknowledge.`,
  });
}

/** A board that is not where it was told to be, or whose drivers went off by themselves. */
function watchAstray(
  arm: Arm,
  state: ControllerState,
  outputs: Outputs,
  sample: BoardSample,
  lead: number,
): void {
  const off = state.energised.findIndex((on, i) => on && !sample.energised[i]);
  const away = arm.model.joints.findIndex(({ type }, i) => {
    const allowed = type === 'revolute' ? ASTRAY_RAD : ASTRAY_M;
    const moving = Math.abs(state.qd[i]!) * (lead + LEAD_DOUBT_S);
    return state.energised[i] && Math.abs(sample.q[i]! - state.q[i]!) > allowed + moving;
  });
  if ((off < 0 && away < 0) || sample.latched || state.energising.length > 0) {
    state.astraySinceS = null;
    return;
  }
  state.astraySinceS ??= state.nowS;
  if (state.nowS - state.astraySinceS < ASTRAY_S) return;
  state.astraySinceS = null;
  if (off >= 0) driversOff(arm, state, outputs);
  else deviated(arm, state, outputs, away);
}

function driversOff(arm: Arm, state: ControllerState, outputs: Outputs): void {
  const { name } = arm.model;
  trustAfterMotorsOff(state, dropsNow(arm, state), 'by the board');
  nowResting(state);
  outputs.orders.push({ kind: 'motorsOff' });
  raiseFault(arm, state, outputs, {
    code: 'driversOff',
    hard: true,
    message: `Drivers of ${name} went off by themselves, so it is resting and may have dropped. Look at the supply and the wiring; a builder acknowledges.`,
  });
}

function deviated(arm: Arm, state: ControllerState, outputs: Outputs, joint: number): void {
  const { name, joints } = arm.model;
  outputs.linkStop = true;
  loseTrust(arm, state, [joint], `${joints[joint]!.name} was not where it was told to be.`);
  raiseFault(arm, state, outputs, {
    code: 'deviation',
    hard: true,
    message: `${joints[joint]!.name} was not where it was told to be, so ${name} was stopped. Its position is doubtful. Look at the arm; a builder acknowledges.`,
  });
  tell(state, outputs, 'caution', 'trustLost', `The position of ${joints[joint]!.name} is doubtful.`);
}

function everyJoint(state: ControllerState): number[] {
  return state.trust.map((_, i) => i);
}
