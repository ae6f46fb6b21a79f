import type { Chain } from './chain';
import { type CompiledTask, emptyTask } from './ik-task';
import { type SphericalWrist, sphericalWristOf } from './ik-wrist';

/** Working memory of inverse kinematics for one chain, made once. */
export interface IkMemory {
  task: CompiledTask;
  iterations: number;
  cost: number;
  seed: Float64Array;
  /** The configuration an attempt stands at, and the one it tries. */
  q: Float64Array;
  trial: Float64Array;
  error: Float64Array;
  trialError: Float64Array;
  /** Best configuration that was not good enough, over all attempts. */
  best: Float64Array;
  /** A solution kept while a better one is looked for. */
  spare: Float64Array;
  /** Columns of the Jacobian, six numbers per joint, in scaled units (below). */
  columns: Float64Array;
  /** JᵀJ, its factor, Jᵀe, the step and what is pinned at a limit. */
  normal: Float64Array;
  factor: Float64Array;
  gradient: Float64Array;
  step: Float64Array;
  pinned: Uint8Array;
  /** Free joints, for the reduced system. */
  free: Uint8Array;
  /** 1/m: lengths are divided by the arm's own size, so that arms of all sizes are solved alike. */
  perLength: number;
  /** Joint units per scaled unit: 1 rad, or the arm's size in m for a sliding joint. */
  unit: Float64Array;
  /** Where random starts are drawn, rad or m. */
  drawLower: Float64Array;
  drawUpper: Float64Array;
  /** m: no point of the tool is ever farther from the first joint's frame at 0. */
  reach: number;
  /** The arm's closed form, where it has one, and room for its solutions. */
  wrist: SphericalWrist | null;
  solutions: Float64Array;
}

export function ikMemory(chain: Chain): IkMemory {
  const known = chain.memory.get('ik') as IkMemory | undefined;
  if (known) return known;
  const made = newMemory(chain);
  chain.memory.set('ik', made);
  return made;
}

function newMemory(chain: Chain): IkMemory {
  const { n } = chain;
  const size = armSize(chain);
  const unit = Float64Array.from(chain.prismatic, (sliding) => (sliding === 1 ? size : 1));
  const bounded = (value: number, otherwise: number) => (Number.isFinite(value) ? value : otherwise);
  const span = (i: number) => (chain.prismatic[i] === 1 ? size : Math.PI);
  return {
    task: emptyTask(),
    iterations: 0,
    cost: 0.5,
    seed: new Float64Array(n),
    q: new Float64Array(n),
    trial: new Float64Array(n),
    error: new Float64Array(6),
    trialError: new Float64Array(6),
    best: new Float64Array(n),
    spare: new Float64Array(n),
    columns: new Float64Array(6 * n),
    normal: new Float64Array(n * n),
    factor: new Float64Array(n * n),
    gradient: new Float64Array(n),
    step: new Float64Array(n),
    pinned: new Uint8Array(n),
    free: new Uint8Array(n),
    perLength: 1 / size,
    unit,
    drawLower: chain.lower.map((value, i) => bounded(value, bounded(chain.upper[i]!, span(i)) - 2 * span(i))),
    drawUpper: chain.upper.map((value, i) =>
      bounded(value, bounded(chain.lower[i]!, -span(i)) + 2 * span(i)),
    ),
    reach: reachOf(chain),
    wrist: sphericalWristOf(chain, size),
    solutions: new Float64Array(8 * 6),
  };
}

/** Triangle inequality over all links and the whole travel of sliding joints. */
function reachOf(chain: Chain): number {
  let reach = Math.hypot(chain.tool[9]!, chain.tool[10]!, chain.tool[11]!);
  for (let i = 0; i < chain.n; i++) {
    const o = 12 * i + 9;
    if (i > 0) reach += Math.hypot(chain.fixed[o]!, chain.fixed[o + 1]!, chain.fixed[o + 2]!);
    if (chain.prismatic[i] === 1) reach += Math.max(Math.abs(chain.lower[i]!), Math.abs(chain.upper[i]!));
  }
  return reach;
}

/** Length of the whole arm laid out, m; 1 where it has no length at all. */
function armSize(chain: Chain): number {
  let size = Math.hypot(chain.tool[9]!, chain.tool[10]!, chain.tool[11]!);
  for (let i = 0; i < chain.n; i++) {
    const o = 12 * i + 9;
    // The base's own height does not make an arm longer.
    if (i > 0) size += Math.hypot(chain.fixed[o]!, chain.fixed[o + 1]!, chain.fixed[o + 2]!);
    if (chain.prismatic[i] === 1) {
      const travel = chain.upper[i]! - chain.lower[i]!;
      if (Number.isFinite(travel)) size += travel;
    }
  }
  return size > 0 ? size : 1;
}
