import { raiseFault } from './faults';
import { stillGripper } from './gripper';
import { letGo } from './moves';
import { audit, tell } from './report';
import { endRun } from './runner';
import type { Arm, ControllerState, Outputs } from './state';

/** After its ramp the board has this long to show the arm standing, s; then it is told to stop by itself. */
const REST_GRACE_S = 0.3;

/** Ramps down on the path, stays energised, drops the run. Anybody's, any time, whatever else is going on. */
export function stop(
  arm: Arm,
  state: ControllerState,
  outputs: Outputs,
  who: { userId: string; name: string },
): void {
  letGo(arm, state);
  state.hold = null;
  state.energising = [];
  stillGripper(state);
  endRun(state, outputs, 'stopped', `${who.name} pressed Stop.`);
  const { move } = state;
  const ramp = move ? Math.max(0, move.profile.duration - move.t) : 0;
  state.stop = {
    by: who.name,
    atMs: state.wallMs,
    boardT: state.sample?.t ?? Number.NEGATIVE_INFINITY,
    acknowledged: false,
    restByS: state.energised.some(Boolean) ? state.nowS + ramp + REST_GRACE_S : null,
  };
  tell(state, outputs, 'caution', 'stopped', `${who.name} stopped ${arm.model.name}. It stays energised.`);
  audit(state, outputs, who, 'stop');
}

/**
 * A stop is acknowledged when the board has been heard since: its ramp has begun by then. Where the board does
 * not show the arm standing in time, it is told to stop by itself, past every queue.
 */
export function tickStop(arm: Arm, state: ControllerState, outputs: Outputs, lead: number): void {
  const { stop: act, sample } = state;
  if (!act) return;
  if (sample && state.link === 'steady' && sample.t > act.boardT + lead / 2) act.acknowledged = true;
  if (act.restByS === null) return;
  const ramped = !state.move || state.move.t >= state.move.profile.duration;
  if (act.acknowledged && ramped && sample && !sample.moving) act.restByS = null;
  else if (state.nowS > act.restByS + lead) {
    act.restByS = null;
    outputs.linkStop = true;
    raiseFault(arm, state, outputs, {
      code: 'stopNotSeen',
      hard: true,
      message: `${arm.model.name} was stopped, but its board does not show it standing. Switch the supply off if it moves. A builder acknowledges.`,
    });
  }
}
