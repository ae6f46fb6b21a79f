import type { Chain, Vec3 } from './chain';
import { sweepFrames } from './frames';
import { type IkMemory, ikMemory } from './ik-memory';
import { boundedStep, cost, freeStep, normalEquations } from './ik-step';
import { positionErrorOf, rotationErrorOf, taskError } from './ik-task';
import { type LineTarget, type MovingTask, movingTask, placeTask } from './line-task';

export interface LineOptions {
  /** Even steps of the fraction of the way at which the path is given. */
  samples?: number;
  /** How long a step may get where it is tight before the line counts as refused, as a fraction of the way. */
  shortestStep?: number;
}

/** Why a line cannot be followed, and how far it could. */
export interface LineRefusal {
  /** Index of the joint in the way: the one at its limit, or the one that would have to turn fastest. */
  joint: number;
  /** Fraction of the way (0 … 1) up to which the line can be followed. */
  fraction: number;
  /** A joint limit; or a singular configuration, the edge of the reach included. */
  reason: 'limit' | 'singularity';
}

/** A straight tool move in joint space. Fraction s runs from 0 to 1; there are `samples` + 1 entries of n joints. */
export interface LinePath {
  samples: number;
  /** Joint values at s = k / samples, rad or m, row by row. */
  q: Float64Array;
  /** dq/ds there, rad or m. */
  tangent: Float64Array;
  /** Way of the tool point, m, and angle it turns by, rad. */
  length: number;
  angle: number;
}

export type LineResult = { path: LinePath; refusal: null } | { path: null; refusal: LineRefusal };

const SAMPLES = 100;
/** A step that failed is halved until it is this short: the fraction of a refusal is good to about this. */
const SHORTEST_STEP = 1e-6;
/** Farthest a joint may go in one step, rad (share of the arm's size), and farthest beside its prediction. */
const LONGEST_MOVE = 0.2;
const LARGEST_SURPRISE = 0.02;
const SETTLING_ITERATIONS = 10;
/** What the path may be off the line, m and rad: the size of rounding, with room for near-singular places. */
const TOLERANCE = 1e-9;
const ROUNDING_COST = 1e-25;
/** Just enough for arms with more joints than the task needs, where least squares alone has no unique answer. */
const DAMPING = 1e-11;

/**
 * Follows a straight line of the tool point, turning about one fixed axis at an even rate, from a
 * configuration on without a jump: predictor along the tangent, corrector onto the line, halved steps where
 * it gets tight. Joint limits count; an arm with joints to spare goes on with the others when one is at its limit.
 *
 * @param from - start configuration, rad (m); the line starts at its tool pose
 * @returns the joint path, or the refusal with the joint and the fraction of the way
 * @throws RangeError if the target has numbers that are not finite
 * @see Allgower & Georg, Introduction to Numerical Continuation Methods, ch. 2 (predictor–corrector)
 */
export function followLine(
  chain: Chain,
  from: ArrayLike<number>,
  target: LineTarget,
  options: LineOptions = {},
): LineResult {
  const { n } = chain;
  const memory = ikMemory(chain);
  const moving = movingTask(chain, from, target);
  const outside = firstOutside(chain, from);
  if (outside >= 0) return refuse(outside, 0, 'limit');
  const samples = options.samples ?? SAMPLES;
  const path = newPath(n, samples, moving);
  for (let i = 0; i < n; i++) memory.q[i] = from[i]!;
  const rates = new Float64Array(n);
  tangentAt(chain, memory, moving, 0, rates);
  store(path, 0, memory.q, rates);
  const walker: Walker = { chain, memory, moving, rates, at: 0, before: new Float64Array(n) };
  for (let k = 1; k <= samples; k++) {
    const refusal = walkTo(walker, k / samples, options.shortestStep ?? SHORTEST_STEP);
    if (refusal) return { path: null, refusal };
    store(path, k, memory.q, rates);
  }
  return { path, refusal: null };
}

/**
 * Joint values at a fraction of the way, by cubic interpolation between the samples (off the line by the
 * fourth power of their distance: below a micrometre for usual moves and 100 samples).
 */
export function sampleLine(path: LinePath, fraction: number, out?: Float64Array): Float64Array {
  const n = path.q.length / (path.samples + 1);
  const to = out ?? new Float64Array(n);
  const x = Math.min(Math.max(fraction, 0), 1) * path.samples;
  const k = Math.min(Math.floor(x), path.samples - 1);
  const u = x - k;
  const h = 1 / path.samples;
  for (let i = 0; i < n; i++) {
    const a = path.q[k * n + i]!;
    const b = path.q[(k + 1) * n + i]!;
    const da = path.tangent[k * n + i]! * h;
    const db = path.tangent[(k + 1) * n + i]! * h;
    to[i] = a + u * (da + u * (3 * (b - a) - 2 * da - db + u * (2 * (a - b) + da + db)));
  }
  return to;
}

interface Walker {
  chain: Chain;
  memory: IkMemory;
  moving: MovingTask;
  /** dq/ds at `at`. */
  rates: Float64Array;
  at: number;
  before: Float64Array;
}

/** Goes on to fraction `to` in as many steps as it takes. */
function walkTo(walker: Walker, to: number, shortest: number): LineRefusal | null {
  const { memory, before, rates } = walker;
  let step = to - walker.at;
  while (walker.at < to) {
    const aim = Math.min(walker.at + step, to);
    before.set(memory.q);
    const blocked = stepTo(walker, aim);
    if (blocked === null) {
      walker.at = aim;
      tangentAt(walker.chain, memory, walker.moving, aim, rates);
      step *= 2;
      continue;
    }
    memory.q.set(before);
    step = (aim - walker.at) / 2;
    if (step < shortest) return { ...blocked, fraction: walker.at };
  }
  return null;
}

/** One step onto the line at `aim`; null when it came out well, otherwise what was in the way. */
function stepTo(walker: Walker, aim: number): Omit<LineRefusal, 'fraction'> | null {
  const { chain, memory, moving, rates, before } = walker;
  const { q, unit } = memory;
  const ds = aim - walker.at;
  const fastest = fastestJoint(memory, rates);
  if (Math.abs(rates[fastest]! / unit[fastest]!) * ds > LONGEST_MOVE)
    return { joint: fastest, reason: 'singularity' };
  for (let i = 0; i < chain.n; i++)
    q[i] = Math.min(Math.max(before[i]! + ds * rates[i]!, chain.lower[i]!), chain.upper[i]!);
  placeTask(moving, aim, memory.task);
  const settled = settle(chain, memory);
  if (!settled) {
    const joint = atLimit(chain, memory, before, rates, ds);
    return joint >= 0 ? { joint, reason: 'limit' } : { joint: fastest, reason: 'singularity' };
  }
  for (let i = 0; i < chain.n; i++)
    if (Math.abs(q[i]! - before[i]! - ds * rates[i]!) > LARGEST_SURPRISE * unit[i]!)
      return { joint: i, reason: 'singularity' };
  return null;
}

/** Newton's method onto the task, inside the limits, from a point close to it. */
function settle(chain: Chain, memory: IkMemory): boolean {
  const { q, trial, error, task } = memory;
  sweepFrames(chain, q);
  taskError(chain, task, error);
  let now = cost(memory, error);
  for (let iteration = 0; iteration < SETTLING_ITERATIONS && now > ROUNDING_COST; iteration++) {
    normalEquations(chain, memory);
    if (boundedStep(chain, memory, DAMPING, LONGEST_MOVE) === 0) break;
    sweepFrames(chain, trial);
    taskError(chain, task, memory.trialError);
    const then = cost(memory, memory.trialError);
    // Rounding is the floor: a step that no longer helps is not taken.
    if (then >= now && iteration > 0) break;
    now = then;
    q.set(trial);
    error.set(memory.trialError);
  }
  return positionErrorOf(error) <= TOLERANCE && rotationErrorOf(error) <= TOLERANCE;
}

function tangentAt(
  chain: Chain,
  memory: IkMemory,
  moving: MovingTask,
  fraction: number,
  rates: Float64Array,
): void {
  placeTask(moving, fraction, memory.task);
  sweepFrames(chain, memory.q);
  memory.error.set(moving.twist);
  normalEquations(chain, memory);
  freeStep(chain, memory, DAMPING);
  for (let i = 0; i < chain.n; i++) rates[i] = memory.step[i]! * memory.unit[i]!;
}

/** The joint that stands at a limit after a failed step and was heading there hardest, or −1. */
function atLimit(
  chain: Chain,
  memory: IkMemory,
  before: Float64Array,
  rates: Float64Array,
  ds: number,
): number {
  let worst = -1;
  let most = Number.NEGATIVE_INFINITY;
  for (let i = 0; i < chain.n; i++) {
    const at = memory.q[i]!;
    if (at > chain.lower[i]! && at < chain.upper[i]!) continue;
    const aimed = before[i]! + ds * rates[i]!;
    const beyond = Math.max(chain.lower[i]! - aimed, aimed - chain.upper[i]!) / memory.unit[i]!;
    if (beyond <= most) continue;
    most = beyond;
    worst = i;
  }
  return worst;
}

function fastestJoint(memory: IkMemory, rates: Float64Array): number {
  let fastest = 0;
  for (let i = 1; i < rates.length; i++)
    if (Math.abs(rates[i]! / memory.unit[i]!) > Math.abs(rates[fastest]! / memory.unit[fastest]!))
      fastest = i;
  return fastest;
}

function firstOutside(chain: Chain, q: ArrayLike<number>): number {
  for (let i = 0; i < chain.n; i++) if (!(q[i]! >= chain.lower[i]! && q[i]! <= chain.upper[i]!)) return i;
  return -1;
}

const refuse = (joint: number, fraction: number, reason: LineRefusal['reason']): LineResult => ({
  path: null,
  refusal: { joint, fraction, reason },
});

function newPath(n: number, samples: number, moving: MovingTask): LinePath {
  const [x, y, z] = moving.way as Vec3;
  return {
    samples,
    q: new Float64Array(n * (samples + 1)),
    tangent: new Float64Array(n * (samples + 1)),
    length: Math.hypot(x, y, z),
    angle: Math.abs(moving.angle),
  };
}

function store(path: LinePath, k: number, q: Float64Array, rates: Float64Array): void {
  path.q.set(q, k * q.length);
  path.tangent.set(rates, k * q.length);
}
