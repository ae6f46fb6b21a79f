import type { MotorsState } from '../../shared/live/server-messages';
import { isMoving } from './moves';
import type { ControllerState } from './state';

export function motorsState(state: ControllerState): MotorsState {
  if (isMoving(state)) return state.move?.ending ? 'stopping' : 'moving';
  if (state.fault) return 'faulted';
  if (state.energising.length > 0) return 'energising';
  return state.energised.some(Boolean) ? 'standing' : 'resting';
}

export function allEnergised(state: ControllerState): boolean {
  return state.energised.every(Boolean) && state.energising.length === 0;
}
