import { z } from 'zod';
import {
  Id,
  Rehearsal,
  Sequence,
  SequenceChange,
  SequenceDraft,
  SequenceSummary,
  SequenceVersion,
} from '../../shared/api/resources';
import type { Context } from '../context';
import type { StoredArm } from '../db/arm-store';
import type { StoredVersion } from '../db/sequence-store';
import { approvalOf, prepare, rehearsePatiently } from '../sequences/programs';
import { armParams } from './arms';
import { HttpProblem } from './problem';
import { defineRoute, type Route } from './route';

const sequenceParams = armParams.extend({ sequenceId: Id });

function summary(context: Context, arm: StoredArm, newest: StoredVersion): z.input<typeof SequenceSummary> {
  const approved = context.sequences.approved(newest.sequenceId);
  return {
    id: newest.sequenceId,
    name: newest.name,
    note: newest.note,
    version: newest.version,
    stepCount: newest.steps.length,
    updatedAtMs: newest.atMs,
    by: newest.by,
    approvedVersion: approved?.version ?? null,
    approval: approved ? approvalOf(approved, prepare(context.poses, arm, approved)) : null,
  };
}

function whole(context: Context, arm: StoredArm, shown: StoredVersion): z.input<typeof Sequence> {
  const newest = context.sequences.get(arm.id, shown.sequenceId);
  const prepared = prepare(context.poses, arm, shown);
  return {
    ...summary(context, arm, newest),
    name: shown.name,
    note: shown.note,
    steps: shown.steps,
    shownVersion: shown.version,
    proven: context.sequences.isProven(arm.id, prepared.fingerprint),
  };
}

export const sequenceRoutes: Route[] = [
  defineRoute({
    method: 'get',
    path: '/arms/:armId/sequences',
    needs: 'arm.watch',
    summary: 'Sequences of the arm',
    params: armParams,
    response: z.array(SequenceSummary),
    handle({ context, params }) {
      const arm = context.arms.get(params.armId);
      return context.sequences.list(arm.id).map((newest) => summary(context, arm, newest));
    },
  }),
  defineRoute({
    method: 'post',
    path: '/arms/:armId/sequences',
    needs: 'sequence.edit',
    summary: 'Save a new sequence',
    params: armParams,
    body: SequenceDraft,
    response: Sequence,
    status: 201,
    handle({ context, params, body, you, address }) {
      const arm = context.arms.get(params.armId);
      const saved = context.sequences.add(arm.id, body, you.person.name);
      context.audit.append({
        who: you.person.name,
        act: 'sequence.make',
        arm: arm.name,
        detail: body.name,
        address,
      });
      context.live.changed(arm.id, 'sequences');
      return whole(context, arm, saved);
    },
  }),
  defineRoute({
    method: 'get',
    path: '/arms/:armId/sequences/:sequenceId',
    needs: 'arm.watch',
    summary: 'A sequence, newest version unless another is asked for',
    params: sequenceParams,
    query: z.object({ version: z.coerce.number().int().positive().optional() }),
    response: Sequence,
    handle({ context, params, query }) {
      const arm = context.arms.get(params.armId);
      return whole(context, arm, context.sequences.get(arm.id, params.sequenceId, query.version));
    },
  }),
  defineRoute({
    method: 'put',
    path: '/arms/:armId/sequences/:sequenceId',
    needs: 'sequence.edit',
    summary: 'Save a new version',
    params: sequenceParams,
    body: SequenceChange,
    response: Sequence,
    handle({ context, params, body, you, address }) {
      const arm = context.arms.get(params.armId);
      const { baseVersion, ...draft } = body;
      const saved = context.sequences.change(arm.id, params.sequenceId, draft, baseVersion, you.person.name);
      context.audit.append({
        who: you.person.name,
        act: 'sequence.save',
        arm: arm.name,
        detail: `${saved.name}, version ${saved.version}`,
        address,
      });
      context.live.changed(arm.id, 'sequences');
      return whole(context, arm, saved);
    },
  }),
  defineRoute({
    method: 'delete',
    path: '/arms/:armId/sequences/:sequenceId',
    needs: 'sequence.edit',
    summary: 'Take a sequence away',
    params: sequenceParams,
    response: null,
    handle({ context, params, you, address }) {
      const arm = context.arms.get(params.armId);
      const { name } = context.sequences.get(arm.id, params.sequenceId);
      context.sequences.remove(arm.id, params.sequenceId);
      context.audit.append({
        who: you.person.name,
        act: 'sequence.delete',
        arm: arm.name,
        detail: name,
        address,
      });
      context.live.changed(arm.id, 'sequences');
    },
  }),
  defineRoute({
    method: 'get',
    path: '/arms/:armId/sequences/:sequenceId/versions',
    needs: 'arm.watch',
    summary: 'Every version, newest first',
    params: sequenceParams,
    response: z.array(SequenceVersion),
    handle({ context, params }) {
      const arm = context.arms.get(params.armId);
      return context.sequences.versions(arm.id, params.sequenceId).map((v) => ({
        version: v.version,
        by: v.by,
        atMs: v.atMs,
        stepCount: v.steps.length,
        approval: v.approval ? approvalOf(v, prepare(context.poses, arm, v)) : null,
      }));
    },
  }),
  defineRoute({
    method: 'post',
    path: '/arms/:armId/sequences/:sequenceId/approve',
    needs: 'sequence.approve',
    summary: 'Mark one version as fit for operators; it has to rehearse without a blocking problem',
    params: sequenceParams,
    body: z.strictObject({ version: z.int().positive() }),
    response: Sequence,
    async handle({ context, params, body, you, address }) {
      const arm = context.arms.get(params.armId);
      const version = context.sequences.get(arm.id, params.sequenceId, body.version);
      // Should a pose be re-taught while this is computed, the fingerprint is the old one, and does not hold.
      const prepared = prepare(context.poses, arm, version);
      const { problems } = await rehearsePatiently(arm, prepared, 1);
      const blocking = problems.find((p) => p.severity === 'blocks');
      if (blocking)
        throw new HttpProblem(409, 'doesNotRehearse', `Step ${blocking.path || '–'}: ${blocking.message}`);
      context.sequences.approve(
        arm.id,
        version.sequenceId,
        version.version,
        you.person.name,
        prepared.fingerprint,
      );
      context.audit.append({
        who: you.person.name,
        act: 'sequence.approve',
        arm: arm.name,
        detail: `${version.name}, version ${version.version}`,
        address,
      });
      context.live.changed(arm.id, 'sequences');
      return whole(context, arm, version);
    },
  }),
  defineRoute({
    method: 'post',
    path: '/arms/:armId/sequences/:sequenceId/withdraw',
    needs: 'sequence.approve',
    summary: 'Withdraw the approval',
    params: sequenceParams,
    response: Sequence,
    handle({ context, params, you, address }) {
      const arm = context.arms.get(params.armId);
      context.sequences.withdraw(arm.id, params.sequenceId);
      const newest = context.sequences.get(arm.id, params.sequenceId);
      context.audit.append({
        who: you.person.name,
        act: 'sequence.withdraw',
        arm: arm.name,
        detail: newest.name,
        address,
      });
      context.live.changed(arm.id, 'sequences');
      return whole(context, arm, newest);
    },
  }),
  defineRoute({
    method: 'post',
    path: '/arms/:armId/sequences/:sequenceId/rehearse',
    needs: 'arm.watch',
    summary: 'Compute one cycle against the arm’s model',
    params: sequenceParams,
    body: z.strictObject({
      version: z.int().positive().optional(),
      ceiling: z.number().min(0.01).max(1).optional(),
    }),
    response: Rehearsal,
    handle({ context, params, body }) {
      const arm = context.arms.get(params.armId);
      const version = context.sequences.get(arm.id, params.sequenceId, body.version);
      return rehearsePatiently(arm, prepare(context.poses, arm, version), body.ceiling ?? 1);
    },
  }),
];
