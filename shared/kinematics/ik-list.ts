import type { Chain } from './chain';
import { attempt } from './ik-attempt';
import { type IkMemory, ikMemory } from './ik-memory';
import { drawAnywhere, largestMove, squaredDistance, unwindTowardsSeed } from './ik-starts';
import { AXIS, compileTask, type IkTask, POSE } from './ik-task';
import { wristSolutions } from './ik-wrist';
import { seededRandom } from './random';

export interface IkListOptions {
  /** Where solutions shall be near; the middle of the limits unless given. */
  seed?: ArrayLike<number>;
  positionTolerance?: number;
  rotationTolerance?: number;
  /** Random starts in all. More find rarer solutions. */
  starts?: number;
  /** Longest list. */
  most?: number;
  /**
   * Solutions whose joints all differ by less count as one, rad (sliding joints: shares of the arm's length).
   * An arm with more joints than the task needs has endlessly many; there the default is coarse.
   */
  separation?: number;
  random?: () => number;
}

const SEPARATION = 1e-3;
const COARSE_SEPARATION = 0.7;

/**
 * Distinct solutions of a task (elbow up or down, wrist flipped …) within the joint limits, nearest to the
 * seed first. Whole turns do not make a solution distinct. Found from many starts: each one listed has been
 * checked, but a rare one may be missing.
 */
export function listInverseKinematics(
  chain: Chain,
  task: IkTask,
  options: IkListOptions = {},
): Float64Array[] {
  const memory = ikMemory(chain);
  compileTask(task, memory.task);
  const { q, seed, drawLower, drawUpper } = memory;
  for (let i = 0; i < chain.n; i++) seed[i] = options.seed?.[i] ?? (drawLower[i]! + drawUpper[i]!) / 2;
  const separation = options.separation ?? (chain.n > taskSize(memory) ? COARSE_SEPARATION : SEPARATION);
  const random = options.random ?? seededRandom(1);
  const found: Float64Array[] = [];
  const closed = closedForms(chain, memory);
  const starts = closed.length > 0 ? 0 : (options.starts ?? 400);
  for (let start = -closed.length; start <= starts && found.length < (options.most ?? 32); start++) {
    if (start < 0) q.set(closed[start + closed.length]!);
    else if (start === 0) q.set(seed);
    else drawAnywhere(chain, memory, random);
    if (
      !attempt(chain, memory, options.positionTolerance ?? 1e-6, options.rotationTolerance ?? 1e-5, 60, false)
    )
      continue;
    unwindTowardsSeed(chain, q, seed);
    if (!found.some((known) => sameUpToTurns(chain, memory, known, q, separation))) found.push(q.slice());
  }
  return found.sort((a, b) => squaredDistance(memory, a, seed) - squaredDistance(memory, b, seed));
}

/** Every solution within the limits of an arm that has a closed form; none for others. */
function closedForms(chain: Chain, memory: IkMemory): Float64Array[] {
  const { wrist, task, seed, solutions } = memory;
  if (!wrist || task.kind !== POSE) return [];
  const count = wristSolutions(wrist, task, seed, solutions);
  return Array.from({ length: count }, (_, k) => solutions.slice(6 * k, 6 * k + 6)).filter((q) =>
    unwindTowardsSeed(chain, q, seed),
  );
}

function taskSize(memory: IkMemory): number {
  return memory.task.kind === POSE ? 6 : memory.task.kind === AXIS ? 5 : 3;
}

const shifted = new Map<number, Float64Array>();
function sameUpToTurns(
  chain: Chain,
  memory: IkMemory,
  a: Float64Array,
  b: Float64Array,
  separation: number,
): boolean {
  // Compared by the remainder of whole turns: two windings of one solution are one.
  const c = shifted.get(chain.n) ?? new Float64Array(chain.n);
  shifted.set(chain.n, c);
  for (let i = 0; i < chain.n; i++)
    c[i] =
      chain.prismatic[i] === 1 ? b[i]! : b[i]! + 2 * Math.PI * Math.round((a[i]! - b[i]!) / (2 * Math.PI));
  return largestMove(memory, a, c) < separation;
}
