import type { Chain } from './chain';
import { sweepFrames } from './frames';
import { attempt } from './ik-attempt';
import type { IkMemory } from './ik-memory';
import { squaredDistance } from './ik-starts';
import { boundedStep, normalEquations } from './ik-step';
import { taskError } from './ik-task';

/** Weight of the seed against the task: the task comes first by six orders of magnitude. */
const PULL = 1e-6;
const STEPS = 8;
const LONGEST_MOVE = 0.5;
/** A pull that moves no joint farther than this has nothing to slide along, or has arrived; rad. */
const STUCK = 1e-3;

/**
 * Moves a solution in `memory.q` along the solutions around it, as near to the seed as they come: Gauss–Newton on
 * |task error|² + PULL·|q − seed|². Most arms have none around it; the first step shows that. (Counting joints does
 * not: a flat arm has one to spare with three, a tool axis that is a joint's own axis leaves that joint free.)
 * Leaves q as it was where nothing is gained.
 * @see Siciliano et al., Robotics, §3.5.1 (redundancy: secondary objective in the null space)
 */
export function slideTowardsSeed(
  chain: Chain,
  memory: IkMemory,
  positionTolerance: number,
  rotationTolerance: number,
): void {
  const { q, seed, gradient, unit, trial, error, task, spare } = memory;
  spare.set(q);
  for (let step = 0; step < STEPS; step++) {
    sweepFrames(chain, q);
    taskError(chain, task, error);
    normalEquations(chain, memory);
    for (let i = 0; i < chain.n; i++) gradient[i] = gradient[i]! + (PULL * (seed[i]! - q[i]!)) / unit[i]!;
    const moved = boundedStep(chain, memory, PULL, LONGEST_MOVE);
    if (step === 0 && moved < STUCK) return;
    q.set(trial);
    if (moved < STUCK) break;
  }
  const reached = attempt(chain, memory, positionTolerance, rotationTolerance, 20, false);
  if (!reached || squaredDistance(memory, q, seed) >= squaredDistance(memory, spare, seed)) q.set(spare);
}
