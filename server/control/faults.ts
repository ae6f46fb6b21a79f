import { may } from '../../shared/team/roles';
import { stillGripper } from './gripper';
import { isMoving, letGo } from './moves';
import type { Actor } from './process-messages';
import { audit, type Refusal, refusal, tell } from './report';
import { endRun } from './runner';
import type { Arm, ControllerState, Outputs } from './state';

/** A board gets this long to show that a fault was cleared, s. */
const CLEARING_S = 0.5;

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
  stillGripper(state);
  // The first fault is the cause; only a harder one takes its place.
  if (state.fault && (state.fault.hard || !fault.hard)) return;
  state.fault = { ...fault, atMs: state.wallMs };
  tell(state, outputs, 'fault', fault.code, fault.message);
  audit(state, outputs, null, 'fault', `${fault.code}: ${fault.message}`);
}

export function acknowledge(arm: Arm, state: ControllerState, outputs: Outputs, actor: Actor): Refusal {
  const { fault, sample } = state;
  if (!fault) return refusal('noFault', 'There is no fault to acknowledge.');
  if (isMoving(state) || sample?.moving) return refusal('moving', 'Wait until the arm stands.');
  if (fault.hard && !may(actor.role, 'fault.acknowledgeHard'))
    return refusal('needsBuilder', 'A builder has to look at the arm and acknowledge this fault.');
  if (state.link !== 'steady') return refusal('noLink', 'The link is still lost.');
  state.fault = null;
  outputs.orders.push({ kind: 'clear' });
  state.clearingUntilS = state.nowS + CLEARING_S;
  adoptBoard(arm, state);
  audit(state, outputs, actor, 'fault.acknowledge', fault.code);
  return null;
}

/** The board may have stopped short of what it was told: the arm is where the board counts it. */
export function adoptBoard(arm: Arm, state: ControllerState): void {
  const { sample } = state;
  if (!sample) return;
  for (let i = 0; i < arm.chain.n; i++) if (state.energised[i]) state.q[i] = sample.q[i]!;
  state.move = null;
  state.qd.fill(0);
  state.qdd.fill(0);
  state.astraySinceS = null;
}
