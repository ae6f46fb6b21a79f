import { shownValue } from '../../shared/arm/units';
import {
  type LineRefusal,
  pointPlaces,
  type ToolAxis,
  type ToolFrame,
  toolAxisOffer,
  toolLine,
} from '../../shared/kinematics';
import { alongPath, type LineEnd, lineWords, type ToolPath, toolPath } from '../../shared/motion';
import { capsFor, positionKnown } from './ceiling';
import { startOnPath } from './moves';
import { type Refusal, refusal } from './report';
import type { Arm, ControllerState, Move } from './state';

/** Shorter than this (s at the full ceiling) there is nothing left to go. */
const NO_WAY = 1e-4;
/** A short way is looked at in so many places. */
const LOOKS = 8;

/**
 * Moves the tool point along, or the tool about, one axis of the base or of the tool itself.
 *
 * @param amount - m or rad, signed
 * @param act.asFar - as far as it goes, when it does not go all the way; otherwise that is refused
 * @param act.farthest - refused when any point of the arm would travel farther than this, m
 */
export function moveTool(
  arm: Arm,
  state: ControllerState,
  frame: ToolFrame,
  axis: ToolAxis,
  amount: number,
  act: { by: Move['by']; asFar: boolean; fraction?: number; farthest?: number },
): Refusal {
  const { name } = arm.model;
  if (!positionKnown(state))
    return refusal(
      'positionUnknown',
      'The tool can only be moved where every joint is known. Declare or reference the position first.',
    );
  const line = toolLine(arm.chain, state.q, frame, axis, amount);
  if (!line || toolAxisOffer(arm.chain, frame, axis) === null)
    return refusal('notEnoughJoints', `${name} has not the joints to move its tool so.`);
  const fraction = act.fraction ?? 1;
  const { path, refusal: end } = toolPath(arm.chain, state.q, line, {
    asFar: act.asFar,
    fraction: capsFor(state, fraction).fraction,
  });
  if (!path || path.length < NO_WAY) {
    const why = path ? path.end : end;
    if (why) state.blocked = blockedBy(why);
    return refusal('atLimit', why ? `No farther: ${inWords(arm, why, !act.asFar)}` : 'No farther that way.');
  }
  if (act.farthest !== undefined && farthestTravel(arm, path) > act.farthest)
    return refusal(
      'tooFar',
      `A point of ${name} would travel more than ${shownValue('prismatic', act.farthest, 0)}. Choose a smaller nudge.`,
    );
  const to = act.asFar ? null : alongPath(path, path.length, [...state.q]);
  startOnPath(arm, state, path, { by: act.by, fraction, target: to });
  return null;
}

/** How far any modelled point gets from where it is, m. */
function farthestTravel(arm: Arm, path: ToolPath): number {
  const q = new Float64Array(arm.chain.n);
  const from = pointPlaces(arm.chain, alongPath(path, 0, q));
  const at = new Float64Array(from.length);
  let most = 0;
  for (let look = 1; look <= LOOKS; look++) {
    pointPlaces(arm.chain, alongPath(path, (path.length * look) / LOOKS, q), at);
    for (let k = 0; k < at.length; k += 3)
      most = Math.max(
        most,
        Math.hypot(at[k]! - from[k]!, at[k + 1]! - from[k + 1]!, at[k + 2]! - from[k + 2]!),
      );
  }
  return most;
}

export function inWords(arm: Arm, end: LineEnd, whole: boolean): string {
  return lineWords(
    arm.model.joints.map((joint) => joint.name),
    end,
    whole,
  );
}

/** What the page shows at the joint that is in the way. */
export function blockedBy(end: LineRefusal): { joint: number; reason: string } {
  return {
    joint: end.joint,
    reason:
      end.reason === 'limit'
        ? 'at its soft limit'
        : 'would have to turn faster than it can; the arm is nearly stretched, folded or lined up',
  };
}
