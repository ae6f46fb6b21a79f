import { z } from 'zod';
import { Id, Run, RunSummary } from '../../shared/api/resources';
import { armParams } from './arms';
import { fileName, toCsv } from './csv';
import { defineRoute, type Route } from './route';

export const runRoutes: Route[] = [
  defineRoute({
    method: 'get',
    path: '/arms/:armId/runs',
    needs: 'arm.watch',
    summary: 'Runs of the arm, newest first',
    params: armParams,
    response: z.array(RunSummary),
    handle: ({ context, params }) => context.runs.list(context.arms.get(params.armId).id),
  }),
  defineRoute({
    method: 'get',
    path: '/arms/:armId/runs/export',
    needs: 'arm.watch',
    summary: 'All runs with their cycles as a file',
    params: armParams,
    query: z.object({ format: z.enum(['json', 'csv']).default('csv') }),
    response: null,
    handle({ context, params, query, response, you, address }) {
      const arm = context.arms.get(params.armId);
      context.audit.append({
        who: you.person.name,
        act: 'run.export',
        arm: arm.name,
        detail: query.format,
        address,
      });
      const runs = context.runs.list(arm.id).map((r) => context.runs.get(arm.id, r.id));
      response.attachment(`${fileName(arm.name, 'runs')}.${query.format}`);
      if (query.format === 'json') {
        response.type('application/json').send(JSON.stringify(runs, null, 2));
        return;
      }
      const head = [
        'started',
        'sequence',
        'version',
        'who',
        'trust',
        'how it ended',
        'cycle',
        'seconds',
        'held',
      ];
      const rows = runs.flatMap((r) =>
        r.cycles.map((c) => [
          new Date(r.startedAtMs).toISOString(),
          r.sequenceName,
          r.version,
          r.who,
          r.trust,
          r.how ?? 'under way',
          c.cycle,
          Math.round(c.seconds * 1000) / 1000,
          c.held ? 'yes' : 'no',
        ]),
      );
      response.type('text/csv; charset=utf-8').send(toCsv(head, rows));
    },
  }),
  defineRoute({
    method: 'get',
    path: '/arms/:armId/runs/:runId',
    needs: 'arm.watch',
    summary: 'One run with every cycle timed',
    params: armParams.extend({ runId: Id }),
    response: Run,
    handle: ({ context, params }) => context.runs.get(context.arms.get(params.armId).id, params.runId),
  }),
];
