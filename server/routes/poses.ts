import { z } from 'zod';
import {
  CapturePose,
  Id,
  Pose,
  PoseChange,
  PoseFile,
  PoseRevision,
  TypedPose,
} from '../../shared/api/resources';
import type { ArmModel } from '../../shared/arm/model';
import { worstTrust } from '../../shared/arm/trust';
import { shownUnit, shownValue, toShown } from '../../shared/arm/units';
import type { Context } from '../context';
import type { StoredArm } from '../db/arm-store';
import type { PosePosition } from '../db/pose-store';
import { armParams } from './arms';
import { fileName, toCsv } from './csv';
import { HttpProblem } from './problem';
import { defineRoute, type Route } from './route';

const poseParams = armParams.extend({ poseId: Id });

/** Where the controller says the arm is: never numbers from a page. */
function capture(context: Context, arm: StoredArm, by: string): PosePosition {
  const live = context.live.snapshot(arm.id);
  if (live?.state.motors !== 'standing')
    throw new HttpProblem(409, 'notStanding', `${arm.name} has to stand, energised, to capture a pose.`);
  const trust = worstTrust(live.state.trust);
  if (trust === 'unknown' || trust === 'doubtful')
    throw new HttpProblem(
      409,
      'positionUnknown',
      `The position of ${arm.name} is ${trust}. Declare or reference it first.`,
    );
  return {
    q: [...live.telemetry.q],
    gripper: live.state.gripper?.opening ?? null,
    trust,
    origin: 'captured',
    by,
    armRevision: arm.revision,
  };
}

/** @throws HttpProblem naming the joint that is out of its soft limits */
function checkInside(model: ArmModel, q: readonly number[], where: string): void {
  if (q.length !== model.joints.length)
    throw new HttpProblem(
      400,
      'wrongLength',
      `${where}: ${model.name} has ${model.joints.length} joints, not ${q.length}.`,
    );
  for (const [i, joint] of model.joints.entries()) {
    const { lower, upper } = joint.limits;
    if (q[i]! < lower - 1e-9 || q[i]! > upper + 1e-9)
      throw new HttpProblem(
        400,
        'beyondLimit',
        `${where}: ${joint.name} at ${shownValue(joint.type, q[i]!)} is outside ${shownValue(joint.type, lower)} to ${shownValue(joint.type, upper)}.`,
        [{ path: `q.${i}`, message: 'outside the soft limits' }],
      );
  }
}

function nextName(context: Context, armId: string): string {
  const taken = new Set(context.poses.list(armId, true).map((p) => p.name));
  for (let n = 1; ; n++) if (!taken.has(`Pose ${n}`)) return `Pose ${n}`;
}

export const poseRoutes: Route[] = [
  defineRoute({
    method: 'get',
    path: '/arms/:armId/poses',
    needs: 'arm.watch',
    summary: 'Poses of the arm, newest first',
    params: armParams,
    response: z.array(Pose),
    handle: ({ context, params }) => context.poses.list(context.arms.get(params.armId).id),
  }),
  defineRoute({
    method: 'post',
    path: '/arms/:armId/poses',
    needs: 'pose.edit',
    summary: 'Capture a pose where the controller says the arm stands',
    params: armParams,
    body: CapturePose,
    response: Pose,
    status: 201,
    handle({ context, params, body, you, address }) {
      const arm = context.arms.get(params.armId);
      const position = capture(context, arm, you.person.name);
      const label = {
        name: body.name ?? nextName(context, arm.id),
        note: body.note ?? '',
        tags: body.tags ?? [],
      };
      const pose = context.poses.add(arm.id, label, position);
      context.audit.append({
        who: you.person.name,
        act: 'pose.capture',
        arm: arm.name,
        detail: pose.name,
        address,
      });
      context.live.changed(arm.id, 'poses');
      return pose;
    },
  }),
  defineRoute({
    method: 'post',
    path: '/arms/:armId/poses/typed',
    needs: 'pose.edit',
    summary: 'A pose from typed joint values, inside the soft limits',
    params: armParams,
    body: TypedPose,
    response: Pose,
    status: 201,
    handle({ context, params, body, you, address }) {
      const arm = context.arms.get(params.armId);
      checkInside(arm.model, body.q, body.name);
      const pose = context.poses.add(
        arm.id,
        { name: body.name, note: body.note ?? '', tags: body.tags ?? [] },
        {
          q: body.q,
          gripper: arm.model.gripper ? (body.gripper ?? null) : null,
          trust: 'declared',
          origin: 'typed',
          by: you.person.name,
          armRevision: arm.revision,
        },
      );
      context.audit.append({
        who: you.person.name,
        act: 'pose.type',
        arm: arm.name,
        detail: pose.name,
        address,
      });
      context.live.changed(arm.id, 'poses');
      return pose;
    },
  }),
  defineRoute({
    method: 'get',
    path: '/arms/:armId/poses/export',
    needs: 'arm.watch',
    summary: 'All poses as a file: JSON (rad, m) to import again, CSV (°, mm) to read',
    params: armParams,
    query: z.object({ format: z.enum(['json', 'csv']).default('json') }),
    response: null,
    handle({ context, params, query, response, you, address }) {
      const arm = context.arms.get(params.armId);
      const poses = context.poses.list(arm.id);
      context.audit.append({
        who: you.person.name,
        act: 'pose.export',
        arm: arm.name,
        detail: query.format,
        address,
      });
      const { joints } = arm.model;
      response.attachment(`${fileName(arm.name, 'poses')}.${query.format}`);
      if (query.format === 'csv') {
        const head = [
          'name',
          ...joints.map((j) => `${j.name} (${shownUnit(j.type)})`),
          'gripper (0-1)',
          'tags',
          'note',
          'trust',
          'by',
          'at',
        ];
        const rows = poses.map((p) => [
          p.name,
          ...p.q.map((value, i) => round(toShown(joints[i]?.type ?? 'revolute', value))),
          p.gripper,
          p.tags.join(' '),
          p.note,
          p.trust,
          p.by,
          new Date(p.atMs).toISOString(),
        ]);
        response.type('text/csv; charset=utf-8').send(toCsv(head, rows));
        return;
      }
      const file: PoseFile = {
        format: 'elbowroom-poses',
        version: 1,
        arm: arm.name,
        units: { revolute: 'rad', prismatic: 'm' },
        joints: joints.map((j) => j.name),
        poses: poses.map(({ name, tags, note, q, gripper }) => ({ name, tags, note, q, gripper })),
      };
      response.type('application/json').send(JSON.stringify(file, null, 2));
    },
  }),
  defineRoute({
    method: 'post',
    path: '/arms/:armId/poses/import',
    needs: 'pose.edit',
    summary: 'Add the poses of a file; all or none',
    params: armParams,
    body: PoseFile,
    response: z.array(Pose),
    status: 201,
    handle({ context, params, body, you, address }) {
      const arm = context.arms.get(params.armId);
      for (const pose of body.poses) checkInside(arm.model, pose.q, pose.name);
      const poses = context.poses.addAll(
        arm.id,
        body.poses.map(({ name, tags, note, q, gripper }) => ({
          label: { name, tags, note },
          position: {
            q,
            gripper: arm.model.gripper ? gripper : null,
            trust: 'declared' as const,
            origin: 'imported' as const,
            by: you.person.name,
            armRevision: arm.revision,
          },
        })),
      );
      context.audit.append({
        who: you.person.name,
        act: 'pose.import',
        arm: arm.name,
        detail: `${poses.length} poses`,
        address,
      });
      context.live.changed(arm.id, 'poses');
      return poses;
    },
  }),
  defineRoute({
    method: 'patch',
    path: '/arms/:armId/poses/:poseId',
    needs: 'pose.edit',
    summary: 'Rename a pose, change its tags or note',
    params: poseParams,
    body: PoseChange,
    response: Pose,
    handle({ context, params, body }) {
      const pose = context.poses.relabel(context.arms.get(params.armId).id, params.poseId, body);
      context.live.changed(params.armId, 'poses');
      return pose;
    },
  }),
  defineRoute({
    method: 'post',
    path: '/arms/:armId/poses/:poseId/reteach',
    needs: 'pose.edit',
    summary: 'Re-teach: the pose is where the arm stands now; the old position stays as a revision',
    params: poseParams,
    response: Pose,
    handle({ context, params, you, address }) {
      const arm = context.arms.get(params.armId);
      const pose = context.poses.reteach(arm.id, params.poseId, capture(context, arm, you.person.name));
      context.audit.append({
        who: you.person.name,
        act: 'pose.reteach',
        arm: arm.name,
        detail: pose.name,
        address,
      });
      context.live.changed(arm.id, 'poses');
      context.live.changed(arm.id, 'sequences');
      return pose;
    },
  }),
  defineRoute({
    method: 'get',
    path: '/arms/:armId/poses/:poseId/revisions',
    needs: 'arm.watch',
    summary: 'Every position the pose has had, newest first',
    params: poseParams,
    response: z.array(PoseRevision),
    handle: ({ context, params }) =>
      context.poses.revisions(context.arms.get(params.armId).id, params.poseId),
  }),
  defineRoute({
    method: 'post',
    path: '/arms/:armId/poses/:poseId/restore',
    needs: 'pose.edit',
    summary: 'Bring an old position back, as a new revision',
    params: poseParams,
    body: z.strictObject({ revision: z.int().positive() }),
    response: Pose,
    handle({ context, params, body, you, address }) {
      const arm = context.arms.get(params.armId);
      const pose = context.poses.restore(arm.id, params.poseId, body.revision, you.person.name, arm.revision);
      context.audit.append({
        who: you.person.name,
        act: 'pose.restore',
        arm: arm.name,
        detail: pose.name,
        address,
      });
      context.live.changed(arm.id, 'poses');
      context.live.changed(arm.id, 'sequences');
      return pose;
    },
  }),
  defineRoute({
    method: 'delete',
    path: '/arms/:armId/poses/:poseId',
    needs: 'pose.edit',
    summary: 'Take a pose away; it can be brought back',
    params: poseParams,
    response: null,
    handle({ context, params, you, address }) {
      const arm = context.arms.get(params.armId);
      const pose = context.poses.setDeleted(arm.id, params.poseId, true);
      context.audit.append({
        who: you.person.name,
        act: 'pose.delete',
        arm: arm.name,
        detail: pose.name,
        address,
      });
      context.live.changed(arm.id, 'poses');
    },
  }),
  defineRoute({
    method: 'post',
    path: '/arms/:armId/poses/:poseId/undelete',
    needs: 'pose.edit',
    summary: 'Bring a deleted pose back',
    params: poseParams,
    response: Pose,
    handle({ context, params }) {
      const pose = context.poses.setDeleted(context.arms.get(params.armId).id, params.poseId, false);
      context.live.changed(params.armId, 'poses');
      return pose;
    },
  }),
];

function round(value: number): number {
  return Math.round(value * 1e6) / 1e6;
}
