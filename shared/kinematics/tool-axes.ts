import type { Chain, Vec3 } from './chain';
import { checkLength, forwardKinematics, sweepFrames } from './frames';
import { ikMemory } from './ik-memory';
import { freeStep, normalEquations, ROTATION_WEIGHT } from './ik-step';
import { POSE, POSITION, TILT } from './ik-task';
import type { LineTarget } from './line-task';
import { seededRandom } from './random';
import { tiltAxisOf } from './tilt';

/** Along or about an axis of the base or of the tool. */
export type ToolAxis = 'x' | 'y' | 'z' | 'rx' | 'ry' | 'rz';
export type ToolFrame = 'base' | 'tool';

/** What stays as it is while the tool point moves along an axis: how the tool is turned, how it leans, or neither. */
export type ToolKeeps = 'rotation' | 'tilt' | 'nothing';

const LOOKS = 8;
/** Share of the looks at which the arm has to manage: some may be near a singular place. */
const ENOUGH = 0.75;
const DAMPING = 1e-11;
/** Of a twist that was asked for, the part that may be missing. */
const MISSING = 1e-5;

/**
 * Whether an arm's joints suffice to move its tool along (x, y, z) or about (rx, ry, rz) an axis, and what
 * can be kept meanwhile; null where they do not. A property of the arm, not of where it stands; remembered.
 */
export function toolAxisOffer(chain: Chain, frame: ToolFrame, axis: ToolAxis): ToolKeeps | null {
  const key = `offer ${frame} ${axis}`;
  const known = chain.memory.get(key) as { keeps: ToolKeeps | null } | undefined;
  if (known) return known.keeps;
  const keeps = workOut(chain, frame, axis);
  chain.memory.set(key, { keeps });
  return keeps;
}

/**
 * The straight line (or the turn in place) of one press on an axis of the base or the tool, from configuration q.
 *
 * @param amount - m or rad, signed
 * @returns null where the arm cannot do it at all
 */
export function toolLine(
  chain: Chain,
  q: ArrayLike<number>,
  frame: ToolFrame,
  axis: ToolAxis,
  amount: number,
): LineTarget | null {
  checkLength(chain, q, 'q');
  const keeps = toolAxisOffer(chain, frame, axis);
  if (keeps === null) return null;
  const { position, rotation } = forwardKinematics(chain, q);
  const way = direction(rotation, frame, axis);
  if (axis.length === 2) return { position, turn: { axis: way, angle: amount } };
  const to = position.map((value, k) => value + amount * way[k]!);
  if (keeps === 'rotation') return { position: to, turn: { axis: [0, 0, 1], angle: 0 } };
  return keeps === 'tilt' ? { position: to, tilt: 0 } : { position: to };
}

/** Unit direction of an axis in the base frame. */
function direction(rotation: ArrayLike<number>, frame: ToolFrame, axis: ToolAxis): Vec3 {
  const k = 'xyz'.indexOf(axis.at(-1)!);
  if (frame === 'tool') return [rotation[k]!, rotation[3 + k]!, rotation[6 + k]!];
  return [k === 0 ? 1 : 0, k === 1 ? 1 : 0, k === 2 ? 1 : 0];
}

function workOut(chain: Chain, frame: ToolFrame, axis: ToolAxis): ToolKeeps | null {
  if (managed(chain, frame, axis, POSE)) return 'rotation';
  if (axis.length === 2) return null;
  if (tiltAxisOf(chain) && managed(chain, frame, axis, TILT)) return 'tilt';
  return managed(chain, frame, axis, POSITION) ? 'nothing' : null;
}

function managed(
  chain: Chain,
  frame: ToolFrame,
  axis: ToolAxis,
  kind: typeof POSE | typeof TILT | typeof POSITION,
): boolean {
  const memory = ikMemory(chain);
  const { n } = chain;
  const random = seededRandom(11);
  const tilt = kind === TILT ? tiltAxisOf(chain) : null;
  let good = 0;
  for (let look = 0; look < LOOKS; look++) {
    for (let i = 0; i < n; i++)
      memory.q[i] =
        memory.drawLower[i]! + (0.2 + 0.6 * random()) * (memory.drawUpper[i]! - memory.drawLower[i]!);
    sweepFrames(chain, memory.q);
    const rotation = [0, 1, 2, 3, 4, 5, 6, 7, 8].map((k) => chain.frames[12 * n + k]!);
    const way = direction(rotation, frame, axis);
    const turning = axis.length === 2;
    memory.task.kind = kind;
    memory.task.tiltJoint = tilt?.joint ?? 0;
    memory.error.fill(0);
    for (let k = 0; k < 3; k++) memory.error[turning ? 3 + k : k] = way[k]!;
    normalEquations(chain, memory);
    freeStep(chain, memory, DAMPING);
    if (missing(chain, memory.columns, memory.step, memory.error, memory.perLength) < MISSING) good++;
  }
  return good >= ENOUGH * LOOKS;
}

/** Length of twist − J·rates against that of the twist, in scaled units. */
function missing(
  { n }: Chain,
  columns: Float64Array,
  step: Float64Array,
  error: Float64Array,
  perLength: number,
): number {
  let off = 0;
  let all = 0;
  for (let row = 0; row < 6; row++) {
    const asked = error[row]! * (row < 3 ? perLength : ROTATION_WEIGHT);
    let got = 0;
    for (let i = 0; i < n; i++) got += columns[6 * i + row]! * step[i]!;
    off += (asked - got) ** 2;
    all += asked * asked;
  }
  return Math.sqrt(off / all);
}
