import type { Chain } from '../kinematics';
import { alongPath, blendPaths, jointPath, type LineEnd, type MotionPath, straightPath } from '../motion';
import type { ProgramStep } from './program';

export type GoToProgramStep = Extract<ProgramStep, { kind: 'goTo' }>;

/** Steps done in one go: a single move, or several whose corners are blended. */
export interface Stretch {
  path: MotionPath;
  /** Index of its last step. */
  last: number;
  /** Where on the path each step but the last gives way to the next, in the path's parameter. */
  corners: number[];
  /** The lowest speed of its steps: one law of time drives them all. */
  speed: number;
}
export type StretchResult =
  | { stretch: Stretch; refused: null }
  | { stretch: null; refused: { step: GoToProgramStep; end: LineEnd } };

const LOOKS = 400;

/** Whether the arm goes on from this step into the next without standing. */
export function goesOn(steps: readonly ProgramStep[], index: number): boolean {
  const step = steps[index];
  return step?.kind === 'goTo' && step.blend > 0 && step.settle === 0 && steps[index + 1]?.kind === 'goTo';
}

/** Index of the last step of the stretch that begins at `index`. */
export function lastOfStretch(steps: readonly ProgramStep[], index: number): number {
  let last = index;
  while (goesOn(steps, last)) last++;
  return last;
}

/**
 * The move that begins at step `index`, together with the steps it goes on into. Used by the run and by the
 * rehearsal alike, so that what was rehearsed is what is done.
 *
 * @param from - where the arm stands, rad (m)
 * @param single - one step at a time: nothing is gone on into
 * @param ceiling - the ceiling it is planned for; the steps' own speeds come on top
 */
export function stretchFrom(
  chain: Chain,
  from: readonly number[],
  steps: readonly ProgramStep[],
  index: number,
  options: { ceiling: number; single: boolean },
): StretchResult {
  const wanted = options.single ? index : lastOfStretch(steps, index);
  let run = steps.slice(index, wanted + 1) as GoToProgramStep[];
  const fraction = Math.min(...run.map((step) => step.speed), options.ceiling);
  let path: MotionPath | null = null;
  let at: readonly number[] = from;
  for (const [k, step] of run.entries()) {
    const next = wayTo(chain, at, step, fraction);
    if (!next.path) return { stretch: null, refused: { step, end: next.refusal } };
    const on: MotionPath | null = path
      ? blendPaths(chain, path, next.path, run[k - 1]!.blend, fraction)
      : next.path;
    if (!on) {
      // In the bend a joint would leave its limits: it stands at this corner after all.
      run = run.slice(0, k);
      break;
    }
    path = on;
    at = step.q;
  }
  const speed = Math.min(...run.map((step) => step.speed));
  const last = index + run.length - 1;
  return { stretch: { path: path!, last, corners: cornersOf(path!, run), speed }, refused: null };
}

function wayTo(chain: Chain, from: readonly number[], step: GoToProgramStep, fraction: number) {
  if (step.straight) return straightPath(chain, from, step.q, fraction);
  return { path: jointPath(chain, from, step.q), refusal: null };
}

/** Where the path comes nearest to each pose it does not stand at, one after the other. */
function cornersOf(path: MotionPath, run: readonly GoToProgramStep[]): number[] {
  const q = new Array<number>(run[0]!.q.length).fill(0);
  const corners: number[] = [];
  let from = 0;
  for (const step of run.slice(0, -1)) {
    let least = Infinity;
    let nearest = from;
    for (let k = 0; k <= LOOKS; k++) {
      const s = from + ((path.length - from) * k) / LOOKS;
      alongPath(path, s, q);
      const off = q.reduce((sum, value, i) => sum + (value - step.q[i]!) ** 2, 0);
      // The first time it comes near: a sequence may pass the same pose twice.
      if (off < least - 1e-12) {
        least = off;
        nearest = s;
      } else if (off > least + 0.01) break;
    }
    corners.push(nearest);
    from = nearest;
  }
  return corners;
}
