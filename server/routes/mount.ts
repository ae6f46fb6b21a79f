import express, { type Express, type RequestHandler } from 'express';
import { may } from '../../shared/team/roles';
import type { Context } from '../context';
import { HttpProblem } from './problem';
import type { Route } from './route';

/** Far above any arm or sequence, far below what could hurt. */
const MAX_BODY = '1mb';

/** Deeper than any sequence or arm; the checks that follow walk bodies recursively. */
const MAX_DEPTH = 40;

/** What every request under /api passes first: where it comes from, and the form of its body. */
export function admitRequests(context: Context): RequestHandler[] {
  return [
    sameOriginOnly(context),
    express.json({ limit: MAX_BODY, strict: true, type: 'application/json' }),
    (request, _response, next) =>
      next(
        deeperThan(request.body, MAX_DEPTH)
          ? new HttpProblem(400, 'tooDeep', 'That is nested deeper than anything this server knows.')
          : undefined,
      ),
  ];
}

/** Never goes deeper than `depth` itself. */
function deeperThan(value: unknown, depth: number): boolean {
  if (typeof value !== 'object' || value === null) return false;
  return depth === 0 || Object.values(value).some((inner) => deeperThan(inner, depth - 1));
}

/** Puts the route table onto the app: who may, what comes in, what goes out. */
export function mountRoutes(app: Express, context: Context, routes: readonly Route[]): void {
  for (const route of routes) app[route.method](`/api${route.path}`, handler(context, route));
}

function handler(context: Context, route: Route): RequestHandler {
  return async (request, response) => {
    const visitor = context.sessions.find(request.headers);
    if (route.needs !== 'anyone') {
      if (!visitor) throw new HttpProblem(401, 'notSignedIn', 'Sign in first.');
      if (route.needs !== 'signedIn' && !may(visitor.person.role, route.needs))
        throw new HttpProblem(403, 'notAllowed', `Your role, ${visitor.person.role}, does not allow this.`);
    }
    const answer = await route.handle({
      context,
      params: route.params.parse(request.params) as never,
      query: route.query.parse(request.query) as never,
      body: (route.body ? route.body.parse(request.body) : null) as never,
      you: visitor as NonNullable<typeof visitor>,
      visitor,
      address: request.ip ?? '',
      request,
      response,
    });
    if (route.response === null) {
      if (!response.headersSent) response.status(route.status === 200 ? 204 : route.status).end();
      return;
    }
    response.set('Cache-Control', 'no-store').status(route.status).json(route.response.parse(answer));
  };
}

/**
 * A change may only come from our own page: JSON, and an Origin (or, from a browser that leaves it out, a
 * Sec-Fetch-Site) that is ours. A program without cookies sends neither and is nobody.
 */
function sameOriginOnly(context: Context): RequestHandler {
  return (request, _response, next) => {
    if (request.method === 'GET' || request.method === 'HEAD') return next();
    const { origin, cookie } = request.headers;
    const site = request.headers['sec-fetch-site'];
    const ours = origin !== undefined ? context.origins.allows(request) : site === 'same-origin';
    if (!ours && (origin !== undefined || site !== undefined || cookie !== undefined))
      return next(
        new HttpProblem(403, 'foreignOrigin', 'This change did not come from Elbowroom’s own page.'),
      );
    const hasBody =
      Number(request.headers['content-length'] ?? 0) > 0 || request.headers['transfer-encoding'];
    if (hasBody && !request.is('application/json'))
      return next(new HttpProblem(415, 'notJson', 'Send application/json.'));
    next();
  };
}
