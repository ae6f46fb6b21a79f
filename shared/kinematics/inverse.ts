import type { Chain, Vec3 } from './chain';
import { checkLength, sweepFrames } from './frames';
import { attempt } from './ik-attempt';
import { type IkMemory, ikMemory } from './ik-memory';
import { slideTowardsSeed } from './ik-spare';
import { drawAnywhere, drawAroundSeed, largestMove, squaredDistance, unwindTowardsSeed } from './ik-starts';
import { compileTask, type IkTask, POSE, positionErrorOf, rotationErrorOf, taskError } from './ik-task';
import { wristSolutions } from './ik-wrist';
import { seededRandom } from './random';

export interface IkOptions {
  /** Position error that counts as reached, m. */
  positionTolerance?: number;
  /** Rotation (or axis) error that counts as reached, rad. */
  rotationTolerance?: number;
  /** Iterations of one attempt, at most. */
  iterations?: number;
  /** Further starts when the seed does not lead to a solution; 0 = only from the seed. */
  restarts?: number;
  /**
   * Further starts once a solution is known that lies far (over half a radian in a joint) from the seed, to find a
   * nearer one. More cost more time and find the nearest one more surely.
   */
  alternatives?: number;
  /** Numbers in [0, 1) for the starts; the same deterministic ones at every call unless given. */
  random?: () => number;
  /** Filled and returned when given. */
  out?: IkResult;
}

export interface IkResult {
  /** Both errors are within tolerance and every joint is within its limits. Always checked, never assumed. */
  converged: boolean;
  /** Within the joint limits, whether converged or not. */
  q: Float64Array;
  /** m */
  positionError: number;
  /** rad; 0 for a position task */
  rotationError: number;
  iterations: number;
  /** Why there is no solution, in words; absent when converged. */
  reason?: string;
}

const POSITION_TOLERANCE_M = 1e-6;
const ROTATION_TOLERANCE_RAD = 1e-5;
const ITERATIONS = 60;
/** At 2 to 4 attempts per solved task, so many are for targets whose solutions all hug the limits. */
const RESTARTS = 400;
const ALTERNATIVES = 4;
/** A solution that moves no joint farther than this from the seed is taken without looking for a nearer one; rad. */
const NEAR = 0.5;
/** Every so many starts one is followed to the bottom, solution or not. */
const PATIENT_EVERY = 6;
/** Starts for a target that is certainly out of reach. */
const HOPELESS_RESTARTS = 80;
const BOTTOM_ITERATIONS = 300;
const START_SEED = 20_240_229;

/**
 * Joint values that bring the tool where a task wants it: bounded damped least squares from the seed, then
 * from further starts. With no solution the result is the nearest one found: least
 * (position error / arm length)² + (0.35 · rotation error)².
 *
 * @param task - full pose, position only, or position and the direction of one tool axis; base frame
 * @param seed - where to start, rad (sliding joints m); clamped into the limits. Solutions near it are preferred
 * @returns `converged: false` with the errors when nothing within tolerance was found
 * @throws RangeError on numbers that are not finite, missing ones, or a task with rotation and axis
 * @see Siciliano et al., Robotics: Modelling, Planning and Control, §3.7; Levenberg–Marquardt with damping
 *   by the size of the error: Sugihara, "Solvability-unconcerned inverse kinematics by the
 *   Levenberg–Marquardt method" (2011)
 */
export function solveInverseKinematics(
  chain: Chain,
  task: IkTask,
  seed: ArrayLike<number>,
  options: IkOptions = {},
): IkResult {
  const memory = ikMemory(chain);
  compileTask(task, memory.task);
  takeSeed(chain, memory, seed);
  memory.iterations = 0;
  search(chain, memory, options);
  return report(chain, memory, options);
}

function takeSeed(chain: Chain, memory: IkMemory, seed: ArrayLike<number>): void {
  checkLength(chain, seed, 'seed');
  for (let i = 0; i < chain.n; i++) {
    const value = seed[i]!;
    if (Number.isNaN(value)) throw new RangeError(`seed: joint ${i + 1} (${chain.names[i]}) is not a number`);
    memory.seed[i] = Math.min(Math.max(value, memory.drawLower[i]!), memory.drawUpper[i]!);
    memory.q[i] = memory.seed[i]!;
  }
}

/** Leaves the chosen configuration in `memory.best`. */
function search(chain: Chain, memory: IkMemory, options: IkOptions): void {
  const { q, best, seed } = memory;
  const positionTolerance = options.positionTolerance ?? POSITION_TOLERANCE_M;
  const rotationTolerance = options.rotationTolerance ?? ROTATION_TOLERANCE_RAD;
  const iterations = options.iterations ?? ITERATIONS;
  const alternatives = options.alternatives ?? ALTERNATIVES;
  let solved = attempt(chain, memory, positionTolerance, rotationTolerance, iterations, false);
  if (solved) unwindTowardsSeed(chain, q, seed);
  if (solved) slideTowardsSeed(chain, memory, positionTolerance, rotationTolerance);
  best.set(q);
  if (solved && largestMove(memory, q, seed) <= NEAR) return;
  let bestCost = memory.cost;
  let bestDistance = solved ? squaredDistance(memory, q, seed) : Number.POSITIVE_INFINITY;
  // The closed form knows all solutions; the attempt takes out its rounding and checks it.
  if (
    nearestClosedForm(chain, memory) &&
    attempt(chain, memory, positionTolerance, rotationTolerance, iterations, false)
  ) {
    // Only in a singular configuration, where angles trade, can the first attempt have been nearer.
    if (squaredDistance(memory, q, seed) < bestDistance) best.set(q);
    return;
  }
  const most = options.restarts ?? RESTARTS;
  let left = solved
    ? Math.min(alternatives, most)
    : outOfReach(chain, memory)
      ? Math.min(HOPELESS_RESTARTS, most)
      : most;
  const random = options.random ?? seededRandom(START_SEED);
  for (let start = 1; left > 0; start++, left--) {
    if (start % 2 === 1) drawAroundSeed(chain, memory, random);
    else drawAnywhere(chain, memory, random);
    const patient = !solved && start % PATIENT_EVERY === 0;
    if (attempt(chain, memory, positionTolerance, rotationTolerance, iterations, patient)) {
      unwindTowardsSeed(chain, q, seed);
      const distance = squaredDistance(memory, q, seed);
      if (distance < bestDistance) {
        bestDistance = distance;
        best.set(q);
      }
      if (!solved) left = Math.min(left, alternatives + 1);
      solved = true;
    } else if (!solved && memory.cost < bestCost) {
      bestCost = memory.cost;
      best.set(q);
    }
  }
  q.set(best);
  if (solved) {
    slideTowardsSeed(chain, memory, positionTolerance, rotationTolerance);
    best.set(q);
    return;
  }
  attempt(chain, memory, positionTolerance, rotationTolerance, BOTTOM_ITERATIONS, true);
  best.set(q);
}

/** Leaves in `memory.q` the solution nearest to the seed of an arm with a closed form; false when it has none in its limits. */
function nearestClosedForm(chain: Chain, memory: IkMemory): boolean {
  const { wrist, task, seed, solutions, q, trial } = memory;
  if (!wrist || task.kind !== POSE) return false;
  const count = wristSolutions(wrist, task, seed, solutions);
  let nearest = Number.POSITIVE_INFINITY;
  for (let k = 0; k < count; k++) {
    trial.set(solutions.subarray(6 * k, 6 * k + 6));
    if (!unwindTowardsSeed(chain, trial, seed)) continue;
    const distance = squaredDistance(memory, trial, seed);
    if (distance >= nearest) continue;
    nearest = distance;
    q.set(trial);
  }
  return nearest < Number.POSITIVE_INFINITY;
}

/** Surely out of reach: then starts only serve to find the nearest result, and few will do. */
function outOfReach(chain: Chain, { task, reach }: IkMemory): boolean {
  const [x, y, z] = [9, 10, 11].map((k) => task.position[k - 9]! - chain.fixed[k]!) as Vec3;
  return Math.hypot(x, y, z) > reach;
}

/** Looks at the chosen configuration afresh and says what is true of it. */
function report(chain: Chain, memory: IkMemory, options: IkOptions): IkResult {
  const { best, error, task } = memory;
  sweepFrames(chain, best);
  taskError(chain, task, error);
  const result = options.out ?? {
    converged: false,
    q: new Float64Array(chain.n),
    positionError: 0.5,
    rotationError: 0.5,
    iterations: 0,
  };
  let inside = true;
  for (let i = 0; i < chain.n; i++) {
    result.q[i] = best[i]!;
    inside &&= best[i]! >= chain.lower[i]! && best[i]! <= chain.upper[i]!;
  }
  result.positionError = positionErrorOf(error);
  result.rotationError = rotationErrorOf(error);
  result.iterations = memory.iterations;
  result.converged =
    inside &&
    result.positionError <= (options.positionTolerance ?? POSITION_TOLERANCE_M) &&
    result.rotationError <= (options.rotationTolerance ?? ROTATION_TOLERANCE_RAD);
  result.reason = result.converged ? undefined : reasonOf(chain, result);
  return result;
}

function reasonOf(chain: Chain, { q, positionError, rotationError }: IkResult): string {
  const atLimit = chain.names.filter((_, i) => q[i]! <= chain.lower[i]! || q[i]! >= chain.upper[i]!);
  const off = `the nearest result is ${positionError.toPrecision(3)} m and ${rotationError.toPrecision(3)} rad off`;
  return atLimit.length > 0 ? `${off}, with ${atLimit.join(', ')} at a limit` : `${off}: out of reach`;
}
