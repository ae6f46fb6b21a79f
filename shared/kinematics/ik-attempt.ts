import type { Chain } from './chain';
import { sweepFrames } from './frames';
import type { IkMemory } from './ik-memory';
import { boundedStep, cost, normalEquations } from './ik-step';
import { positionErrorOf, rotationErrorOf, taskError } from './ik-task';

/** Damping is this share of the cost: strong far away, gone at the end, where convergence is quadratic. */
const FIRST_DAMPING = 1;
/** Least damping, for steps in singular configurations; far below any curvature that matters. */
const LEAST_DAMPING = 1e-12;
/** Longest move of a joint in one step, rad (or share of the arm's size): beyond it the linear picture is fiction. */
const LONGEST_MOVE = 1;
/** An attempt that did not bring its cost down to this share … */
const ENOUGH_PROGRESS = 0.6;
/** … in so many iterations has come near a minimum that is no solution; another start is the better use of time. */
const PROGRESS_WINDOW = 3;
/** Steps after the tolerance is met: convergence is quadratic there, so two make rounding out of it. */
const POLISHING_STEPS = 3;
/** Cost of pure rounding: error 1e-12 of the arm's size. */
const ROUNDING_COST = 1e-24;
const DAMPING_FACTOR = 2;
const TRIES_PER_STEP = 8;

/**
 * Walks from `memory.q` downhill to the task, within the joint limits, and leaves the best configuration in
 * `memory.q`, its error in `memory.error`, its cost in `memory.cost`.
 *
 * @param patient - go on to the bottom of a minimum that is no solution (to know the nearest result)
 * @returns whether both tolerances are met
 */
export function attempt(
  chain: Chain,
  memory: IkMemory,
  positionTolerance: number,
  rotationTolerance: number,
  mostIterations: number,
  patient: boolean,
): boolean {
  const { q, trial, error, trialError, task } = memory;
  const { n } = chain;
  sweepFrames(chain, q);
  taskError(chain, task, error);
  let now = cost(memory, error);
  let marked = now;
  let damping = FIRST_DAMPING;
  let polished = 0;
  let iteration = 0;
  let reached = positionErrorOf(error) <= positionTolerance && rotationErrorOf(error) <= rotationTolerance;
  while (iteration < mostIterations) {
    if (reached && (now < ROUNDING_COST || polished++ >= POLISHING_STEPS)) break;
    normalEquations(chain, memory);
    const before = now;
    for (let tries = 0; tries < TRIES_PER_STEP && now === before; tries++) {
      iteration++;
      const largest = boundedStep(chain, memory, damping * now + LEAST_DAMPING, LONGEST_MOVE);
      if (largest === 0) break;
      sweepFrames(chain, trial);
      taskError(chain, task, trialError);
      const then = cost(memory, trialError);
      if (then < now) {
        now = then;
        for (let i = 0; i < n; i++) q[i] = trial[i]!;
        for (let k = 0; k < 6; k++) error[k] = trialError[k]!;
        damping /= DAMPING_FACTOR;
      } else damping *= DAMPING_FACTOR * DAMPING_FACTOR;
    }
    if (now === before) break;
    reached ||= positionErrorOf(error) <= positionTolerance && rotationErrorOf(error) <= rotationTolerance;
    if (reached) continue;
    if (iteration % PROGRESS_WINDOW === 0) {
      if (!patient && now > ENOUGH_PROGRESS * marked) break;
      marked = now;
    }
    // A minimum that is no solution: nothing to gain any more, for the patient either.
    if (patient && before - now < 1e-15 * before) break;
  }
  memory.iterations += iteration;
  memory.cost = now;
  return reached;
}
