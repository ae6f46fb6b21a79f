import {
  alongPath,
  jointPath,
  type MotionPath,
  pathLimits,
  pathRates,
  planPosition,
  planVelocity,
  restPosition,
  sampleProfile,
} from '../../shared/motion';
import { capsFor, reachToUse } from './ceiling';
import type { Arm, ControllerState, Move } from './state';

/** The limits of s that hold for this move now. */
function limitsOf(arm: Arm, state: ControllerState, move: Move) {
  return pathLimits(arm.chain, move.path, capsFor(state, move.fraction), move.s.velocity);
}

/** The same for coming to rest from here: only the stretch that takes counts, and so the arm stops as hard as it may. */
function stoppingLimits(arm: Arm, state: ControllerState, move: Move) {
  const limits = limitsOf(arm, state, move);
  if (move.path.kind === 'joint') return limits;
  const { position, velocity } = move.s;
  const stretch = [position, restPosition(move.s, limits)] as const;
  return pathLimits(arm.chain, move.path, capsFor(state, move.fraction), velocity, stretch);
}

/** Starts a move of all joints together from where the arm stands to `to`; `fraction` is the speed the act itself asks for. */
export function startMove(
  arm: Arm,
  state: ControllerState,
  to: readonly number[],
  act: Pick<Move, 'by' | 'fraction' | 'target'>,
): void {
  startOnPath(arm, state, jointPath(arm.chain, state.q, to, reachToUse(arm, state)), act);
}

/** Starts a move along a path that begins where the arm stands. */
export function startOnPath(
  arm: Arm,
  state: ControllerState,
  path: MotionPath,
  act: Pick<Move, 'by' | 'fraction' | 'target'>,
): void {
  const s = { position: 0, velocity: 0, acceleration: 0 };
  const move: Move = {
    ...act,
    path,
    profile: { duration: 0, phases: [], end: s },
    t: 0,
    s,
    ending: false,
  };
  move.profile = planPosition(s, path.length, limitsOf(arm, state, move));
  state.move = move;
}

/** Goes on to the path's end from wherever on it the move is; after a pause, or under a lower ceiling. */
export function replanMove(arm: Arm, state: ControllerState, move: Move): void {
  const start = { ...move.s };
  move.profile = move.ending
    ? planVelocity(start, 0, stoppingLimits(arm, state, move))
    : planPosition(start, move.path.length, limitsOf(arm, state, move));
  move.t = 0;
}

/** Ramps down on the path and comes to rest as soon as the limits allow. */
export function letGo(arm: Arm, state: ControllerState): void {
  const { move } = state;
  if (!move || move.ending) return;
  move.ending = true;
  replanMove(arm, state, move);
}

/** Whether the move got to the end of its path and was not let go before. */
export function hasArrived(state: ControllerState): boolean {
  return state.move !== null && !state.move.ending && !isMoving(state);
}

export function isMoving(state: ControllerState): boolean {
  return state.move !== null && state.move.t < state.move.profile.duration;
}

/** Brings the move `dt` further and writes q, qd, qdd. A finished move stays for a resume until it is dropped. */
export function advanceMove(state: ControllerState, dt: number): void {
  const { move } = state;
  if (!move) return;
  const wasMoving = isMoving(state);
  move.t += dt;
  sampleProfile(move.profile, move.t, move.s);
  pathRates(move.path, move.s, state.qd, state.qdd);
  // Once at rest the last position is kept as it was sent: no further set-point differs by a rounding.
  if (wasMoving) alongPath(move.path, move.s.position, state.q);
}

/** Where each joint would come to rest if let go in this tick. */
export function stopAt(arm: Arm, state: ControllerState): number[] {
  const { move } = state;
  if (!move || !isMoving(state)) return [...state.q];
  const rest = restPosition(move.s, stoppingLimits(arm, state, move));
  return alongPath(move.path, rest, [...state.q]);
}
