import { setImmediate as nextTurn } from 'node:timers/promises';
import type { Approval, Rehearsal, RehearsalProblem } from '../../shared/api/resources';
import { expandSequence } from '../../shared/sequence/expand';
import { fingerprint } from '../../shared/sequence/fingerprint';
import type { ProgramStep } from '../../shared/sequence/program';
import { rehearse, rehearseInTurns } from '../../shared/sequence/rehearse';
import type { StoredArm } from '../db/arm-store';
import type { PoseStore } from '../db/pose-store';
import type { StoredVersion } from '../db/sequence-store';

/** A version of a sequence with today's poses on today's arm. */
export interface Prepared {
  steps: ProgramStep[];
  problems: RehearsalProblem[];
  fingerprint: string;
}

export function prepare(poses: PoseStore, arm: StoredArm, version: StoredVersion): Prepared {
  const { steps, problems } = expandSequence({
    steps: version.steps,
    poses: poses.list(arm.id, true),
    model: arm.model,
  });
  return { steps, problems, fingerprint: fingerprint(steps, arm.model) };
}

/** A long cycle takes seconds to compute; a Stop that comes in meanwhile must not wait longer than this, ms. */
const TURN_MS = 10;

/** As `rehearsePrepared`, in turns with everything else that this process has to do. */
export async function rehearsePatiently(
  arm: StoredArm,
  prepared: Prepared,
  ceiling: number,
): Promise<Rehearsal> {
  let turnBegan = performance.now();
  const breathe = () => {
    if (performance.now() - turnBegan < TURN_MS) return undefined;
    return nextTurn().then(() => {
      turnBegan = performance.now();
    });
  };
  const rehearsal = await rehearseInTurns({ model: arm.model, steps: prepared.steps, ceiling }, breathe);
  return { ...rehearsal, problems: [...prepared.problems, ...rehearsal.problems] };
}

/** Expansion and physics together; what expansion cannot make sense of is not rehearsed. */
export function rehearsePrepared(arm: StoredArm, prepared: Prepared, ceiling: number): Rehearsal {
  const rehearsal = rehearse({ model: arm.model, steps: prepared.steps, ceiling });
  return { ...rehearsal, problems: [...prepared.problems, ...rehearsal.problems] };
}

/** An approval holds for what was approved: these steps, with these poses, on this arm. */
export function approvalOf(version: StoredVersion, prepared: Prepared): Approval | null {
  if (!version.approval) return null;
  const { by, atMs } = version.approval;
  const holds = version.approval.fingerprint === prepared.fingerprint;
  return { by, atMs, holds, why: holds ? null : 'A pose or the arm was changed since. Approve it again.' };
}
