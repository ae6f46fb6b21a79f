import { z } from 'zod';
import {
  Arm,
  ArmModelChange,
  ArmRevision,
  ArmSettings,
  ArmSummary,
  Id,
  NewArm,
} from '../../shared/api/resources';
import { DEMO_ARMS } from '../../shared/arm/demo-arms';
import { ArmModel } from '../../shared/arm/model';
import type { Context } from '../context';
import type { StoredArm } from '../db/arm-store';
import { HttpProblem } from './problem';
import { defineRoute, type Route } from './route';

export const armParams = z.object({ armId: Id });

function summary(context: Context, arm: StoredArm): z.input<typeof ArmSummary> {
  const live = context.live.snapshot(arm.id)?.state ?? null;
  return {
    id: arm.id,
    name: arm.name,
    note: arm.model.note,
    jointCount: arm.model.joints.length,
    revision: arm.revision,
    updatedAtMs: arm.updatedAtMs,
    unattended: arm.unattended,
    motors: live?.motors ?? null,
    inControl: live?.control?.name ?? null,
  };
}

const whole = (context: Context, arm: StoredArm): z.input<typeof Arm> => ({
  ...summary(context, arm),
  model: arm.model,
});

/** A changed arm starts afresh, so it has to be resting. */
function refuseUnlessResting(context: Context, armId: string): void {
  const motors = context.live.snapshot(armId)?.state.motors;
  if (motors && motors !== 'resting')
    throw new HttpProblem(
      409,
      'notResting',
      'Switch the motors off first: a changed arm starts afresh, resting.',
    );
}

export const armRoutes: Route[] = [
  defineRoute({
    method: 'post',
    path: '/stop',
    needs: 'arm.stop',
    summary: 'Stop every arm that runs',
    response: null,
    handle({ context, you, address }) {
      context.live.stopAll(you.person.name);
      context.audit.append({ who: you.person.name, act: 'stop', detail: 'every arm', address });
    },
  }),
  defineRoute({
    method: 'get',
    path: '/arms',
    needs: 'arm.watch',
    summary: 'All arms',
    response: z.array(ArmSummary),
    handle: ({ context }) => context.arms.list().map((arm) => summary(context, arm)),
  }),
  defineRoute({
    method: 'get',
    path: '/arms/starting-points',
    needs: 'arm.build',
    summary: 'Arms to start a new one from',
    response: z.array(z.object({ key: z.string(), name: z.string(), note: z.string() })),
    handle: ({ context }) => [
      ...Object.entries(DEMO_ARMS).map(([key, { name, note }]) => ({ key, name, note })),
      ...context.arms.list().map(({ id, name }) => ({ key: id, name: `A copy of ${name}`, note: '' })),
    ],
  }),
  defineRoute({
    method: 'post',
    path: '/arms',
    needs: 'arm.build',
    summary: 'Make an arm from a starting point',
    body: NewArm,
    response: Arm,
    status: 201,
    handle({ context, body, you, address }) {
      const { startFrom, name } = body;
      const model = Object.hasOwn(DEMO_ARMS, startFrom)
        ? DEMO_ARMS[startFrom as keyof typeof DEMO_ARMS]
        : context.arms.get(startFrom).model;
      const arm = context.arms.add(
        ArmModel.parse({ ...model, name }),
        you.person.name,
        `Started from ${model.name}`,
      );
      context.audit.append({ who: you.person.name, act: 'arm.make', arm: name, address });
      return whole(context, arm);
    },
  }),
  defineRoute({
    method: 'get',
    path: '/arms/:armId',
    needs: 'arm.watch',
    summary: 'One arm with its model',
    params: armParams,
    response: Arm,
    handle: ({ context, params }) => whole(context, context.arms.get(params.armId)),
  }),
  defineRoute({
    method: 'put',
    path: '/arms/:armId/model',
    needs: 'arm.build',
    summary: 'Save a new revision of the arm’s model; it has to be resting',
    params: armParams,
    body: ArmModelChange,
    response: Arm,
    handle({ context, params, body, you, address }) {
      context.arms.get(params.armId);
      refuseUnlessResting(context, params.armId);
      const arm = context.arms.change(
        params.armId,
        body.model,
        body.baseRevision,
        you.person.name,
        body.note,
      );
      context.audit.append({
        who: you.person.name,
        act: 'arm.change',
        arm: arm.name,
        detail: `revision ${arm.revision} ${body.note}`,
        address,
      });
      context.live.modelChanged(arm.id);
      return whole(context, arm);
    },
  }),
  defineRoute({
    method: 'get',
    path: '/arms/:armId/revisions',
    needs: 'arm.watch',
    summary: 'Revisions of the arm’s model, newest first',
    params: armParams,
    response: z.array(ArmRevision),
    handle({ context, params }) {
      context.arms.get(params.armId);
      return context.arms.revisions(params.armId);
    },
  }),
  defineRoute({
    method: 'get',
    path: '/arms/:armId/revisions/:revision',
    needs: 'arm.watch',
    summary: 'An earlier model of the arm',
    params: armParams.extend({ revision: z.coerce.number().int().positive() }),
    response: z.object({ revision: z.int(), model: ArmModel }),
    handle({ context, params }) {
      context.arms.get(params.armId);
      return { revision: params.revision, model: context.arms.modelAt(params.armId, params.revision) };
    },
  }),
  defineRoute({
    method: 'patch',
    path: '/arms/:armId/settings',
    needs: 'arm.unattended',
    summary: 'Whether a run goes on when whoever started it is away',
    params: armParams,
    body: ArmSettings,
    response: Arm,
    handle({ context, params, body, you, address }) {
      const arm = context.arms.get(params.armId);
      context.arms.setUnattended(arm.id, body.unattended);
      context.live.settingsChanged(arm.id);
      context.audit.append({
        who: you.person.name,
        act: 'arm.unattended',
        arm: arm.name,
        detail: String(body.unattended),
        address,
      });
      return whole(context, context.arms.get(arm.id));
    },
  }),
  defineRoute({
    method: 'delete',
    path: '/arms/:armId',
    needs: 'arm.delete',
    summary: 'Take an arm away; it has to be resting',
    params: armParams,
    response: null,
    handle({ context, params, you, address }) {
      const arm = context.arms.get(params.armId);
      refuseUnlessResting(context, arm.id);
      context.arms.remove(arm.id);
      context.live.removed(arm.id);
      context.audit.append({ who: you.person.name, act: 'arm.delete', arm: arm.name, address });
    },
  }),
  defineRoute({
    method: 'post',
    path: '/arms/:armId/stop',
    needs: 'arm.stop',
    summary: 'Stop this arm; a second way beside the socket',
    params: armParams,
    response: null,
    handle({ context, params, you }) {
      const arm = context.arms.get(params.armId);
      context.live.stop(arm.id, you.person.name);
    },
  }),
];
