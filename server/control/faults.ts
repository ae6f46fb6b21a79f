import { may } from '../../shared/team/roles';
import { nowResting } from './motors';
import { isMoving, letGo } from './moves';
import type { Actor } from './process-messages';
import { audit, type Refusal, refusal, tell } from './report';
import { endRun } from './runner';
import type { Arm, ControllerState, Inputs, Outputs } from './state';
import { setTrust } from './trust-keeping';

/** Ends what is under way, ramps down, and waits for a person. */
export function raiseFault(
  arm: Arm,
  state: ControllerState,
  outputs: Outputs,
  fault: { code: string; message: string; hard: boolean },
): void {
  endRun(state, outputs, 'faulted', fault.message);
  state.hold = null;
  state.energising = [];
  letGo(arm, state);
  if (state.fault?.hard && !fault.hard) return;
  state.fault = { ...fault, atMs: state.wallMs };
  tell(state, outputs, 'fault', fault.code, fault.message);
  audit(state, outputs, null, 'fault', `${fault.code}: ${fault.message}`);
}

export function acknowledge(arm: Arm, state: ControllerState, outputs: Outputs, actor: Actor): Refusal {
  const { fault } = state;
  if (!fault) return refusal('noFault', 'There is no fault to acknowledge.');
  if (isMoving(state)) return refusal('moving', 'Wait until the arm stands.');
  if (fault.hard && !may(actor.role, 'fault.acknowledgeHard'))
    return refusal('needsBuilder', 'A builder has to look at the arm and acknowledge this fault.');
  if (state.link === 'lost') return refusal('noLink', 'The link is still lost.');
  state.fault = null;
  outputs.orders.push({ kind: 'clear' });
  // The board may have stopped short of what it was told: go on from where it says it is.
  if (state.sample) for (let i = 0; i < arm.chain.n; i++) state.q[i] = state.sample.q[i]!;
  state.move = null;
  audit(state, outputs, actor, 'fault.acknowledge', fault.code);
  return null;
}

/** What the board and the link report. */
export function watchLink(arm: Arm, state: ControllerState, outputs: Outputs, inputs: Inputs): void {
  const { sample } = inputs;
  state.answerMs = inputs.answerMs;
  if (inputs.linkClosed) {
    if (state.link === 'lost') return;
    const moved = isMoving(state);
    state.link = 'lost';
    if (state.energised.some(Boolean)) {
      setTrust(state, known(state), 'doubtful', 'The link was lost.');
      raiseFault(arm, state, outputs, {
        code: 'linkLost',
        hard: false,
        message: `The link to ${arm.model.name} was lost${moved ? ' while it moved, and its board stops it' : ''}. Its position is doubtful. Check the cable and the supply, then acknowledge.`,
      });
    }
    return;
  }
  if (!sample) return;
  if (state.bootId !== null && sample.bootId !== state.bootId) boardRestarted(arm, state, outputs);
  if (state.link !== 'steady' && state.bootId === null)
    // First contact: the board's count is all there is to draw, though nobody vouches for it.
    for (let i = 0; i < arm.chain.n; i++) if (sample.energised[i]) state.q[i] = sample.q[i]!;
  state.bootId = sample.bootId;
  state.link = 'steady';
  state.sample = sample;
  if (state.stop && !state.stop.acknowledged && state.nowS > state.stop.atS) state.stop.acknowledged = true;
  if (sample.faults.length > 0 && !state.fault) {
    const hard = sample.faults.includes('driver') || sample.faults.includes('brownOut');
    raiseFault(arm, state, outputs, {
      code: 'boardFault',
      hard,
      message: `The board of ${arm.model.name} stopped it (${sample.faults.join(', ')}). Look at the arm, then acknowledge.`,
    });
  }
}

function boardRestarted(arm: Arm, state: ControllerState, outputs: Outputs): void {
  nowResting(state);
  setTrust(
    state,
    state.trust.map((_, i) => i),
    'unknown',
    'The board restarted.',
  );
  raiseFault(arm, state, outputs, {
    code: 'boardRestarted',
    hard: true,
    message: `The board of ${arm.model.name} restarted, so its motors are off and its position is unknown. Look for a sagging supply; a builder acknowledges.`,
  });
}

function known(state: ControllerState): number[] {
  return state.trust.flatMap((t, i) => (t === 'unknown' ? [] : [i]));
}
