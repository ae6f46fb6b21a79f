import { z } from 'zod';
import { armRoutes } from './arms';
import { openApi } from './openapi';
import { poseRoutes } from './poses';
import { defineRoute, type Route } from './route';
import { runRoutes } from './runs';
import { sequenceRoutes } from './sequences';
import { sessionRoutes } from './session';
import { teamRoutes } from './team';

const ownRoutes: Route[] = [
  defineRoute({
    method: 'get',
    path: '/health',
    needs: 'anyone',
    summary: 'Whether the server is up and its database answers',
    response: z.object({ status: z.literal('ok') }),
    handle({ context }) {
      context.workshop.get();
      return { status: 'ok' as const };
    },
  }),
  defineRoute({
    method: 'get',
    path: '/openapi.json',
    needs: 'anyone',
    summary: 'This description',
    response: z.record(z.string(), z.unknown()),
    handle: () => openApi(routes) as Record<string, unknown>,
  }),
];

/** Every route there is. */
export const routes: Route[] = [
  ...ownRoutes,
  ...sessionRoutes,
  ...teamRoutes,
  ...armRoutes,
  ...poseRoutes,
  ...sequenceRoutes,
  ...runRoutes,
];
