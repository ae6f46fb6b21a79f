import { may, roleIncludes } from '../../shared/team/roles';
import { newId } from '../auth/tokens';
import type { Resolved } from '../control/process-messages';
import type { ArmStore } from '../db/arm-store';
import type { PoseStore } from '../db/pose-store';
import type { SequenceStore } from '../db/sequence-store';
import { HttpProblem } from '../routes/problem';
import { approvalOf, prepare, rehearsePrepared } from '../sequences/programs';
import type { Resolve } from './gateway';

export interface Stores {
  arms: ArmStore;
  poses: PoseStore;
  sequences: SequenceStore;
}

type Outcome = ReturnType<Resolve>;
const refused = (code: string, message: string): Outcome => ({ refused: { code, message } });

/** Looks up poses, programs and people for the arm process, which has no database. */
export function resolveWith(stores: Stores): Resolve {
  return (armId, actor, message, others) => {
    try {
      if (message.type === 'hold.start' && message.motion.kind === 'pose') {
        const { id, name, q, gripper, deleted } = stores.poses.get(armId, message.motion.poseId);
        return deleted
          ? refused('noSuchPose', `“${name}” was deleted.`)
          : { resolved: { pose: { id, name, q, gripper } } };
      }
      if (message.type === 'run.start')
        return program(stores, armId, message, may(actor.role, 'sequence.runUnapproved'));
      if (message.type === 'control.handOver') {
        const person = others.find((o) => o.userId === message.toUserId && roleIncludes(o.role, 'operator'));
        return { resolved: person ? { person } : {} };
      }
      return { resolved: {} };
    } catch (error) {
      if (error instanceof HttpProblem) return refused(error.code, error.detail);
      throw error;
    }
  };
}

/** A version becomes a program when it rehearses without a blocking problem and, for operators, its approval holds. */
function program(
  stores: Stores,
  armId: string,
  message: { sequenceId: string; version?: number },
  mayRunUnapproved: boolean,
): { resolved: Resolved } | { refused: { code: string; message: string } } {
  const arm = stores.arms.get(armId);
  const approved = stores.sequences.approved(message.sequenceId);
  const wanted = message.version ?? (mayRunUnapproved ? undefined : approved?.version);
  const version = stores.sequences.get(armId, message.sequenceId, wanted);
  const prepared = prepare(stores.poses, arm, version);
  if (!mayRunUnapproved && !approvalOf(version, prepared)?.holds)
    return refused(
      'notApproved',
      `Version ${version.version} of “${version.name}” is not approved for operators. Ask a teacher.`,
    );
  const blocking = rehearsePrepared(arm, prepared, 1).problems.find((p) => p.severity === 'blocks');
  if (blocking) return refused('doesNotRehearse', `Step ${blocking.path || '–'}: ${blocking.message}`);
  return {
    resolved: {
      program: {
        runId: newId(),
        sequenceId: version.sequenceId,
        sequenceName: version.name,
        version: version.version,
        steps: prepared.steps,
        proven: stores.sequences.isProven(armId, prepared.fingerprint),
        fingerprint: prepared.fingerprint,
      },
    },
  };
}
