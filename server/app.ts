import { existsSync } from 'node:fs';
import express, { type Express, type Request, type RequestHandler } from 'express';
import helmet from 'helmet';
import type { Context } from './context';
import { routes } from './routes';
import { admitRequests, mountRoutes } from './routes/mount';
import { HttpProblem, noSuchRoute, problemHandler } from './routes/problem';
import { signInLimits } from './routes/session';

export interface AppOptions {
  /** Built client, or null where something else serves it. */
  clientFolder: string | null;
  /** Served over TLS (by us or by a proxy in front). */
  secure: boolean;
  /** Proxies in front whose X-Forwarded-For is believed. */
  trustProxy: boolean;
  /** Notes what was asked and how it went. */
  requestLog?: RequestHandler;
}

/** The Express app without a listening server, so that tests can mount it. */
export function createApp(context: Context, options: AppOptions): Express {
  const app = express();
  app.disable('x-powered-by');
  app.set('trust proxy', options.trustProxy ? 1 : false);
  if (options.requestLog) app.use(options.requestLog);
  app.use((request, _response, next) =>
    next(
      context.origins.hostAllowed(request.headers.host)
        ? undefined
        : new HttpProblem(421, 'wrongHost', 'This server does not answer to that name.'),
    ),
  );
  app.use(
    helmet({
      strictTransportSecurity: options.secure,
      contentSecurityPolicy: {
        useDefaults: false,
        directives: {
          defaultSrc: ["'self'"],
          scriptSrc: ["'self'"],
          // Travel bars and plots place things by style attributes.
          styleSrc: ["'self'", "'unsafe-inline'"],
          imgSrc: ["'self'", 'data:', 'blob:'],
          // Older browsers do not take 'self' for the socket of the same place. The host was checked above.
          connectSrc: [
            "'self'",
            (request) => `${options.secure ? 'wss' : 'ws'}://${(request as Request).headers.host}`,
          ],
          objectSrc: ["'none'"],
          baseUri: ["'none'"],
          frameAncestors: ["'none'"],
          formAction: ["'self'"],
        },
      },
      referrerPolicy: { policy: 'same-origin' },
    }),
  );
  app.use('/api', ...admitRequests(context));
  app.post('/api/session', ...signInLimits(context));
  app.post(['/api/setup', '/api/invitations/accept'], signInLimits(context)[0]!);
  mountRoutes(app, context, routes);
  app.use('/api', noSuchRoute);
  const { clientFolder } = options;
  if (clientFolder && existsSync(clientFolder)) {
    app.use(
      express.static(clientFolder, {
        index: false,
        setHeaders: (response, path) =>
          response.set(
            'Cache-Control',
            path.includes('/assets/') ? 'public, max-age=31536000, immutable' : 'no-cache',
          ),
      }),
    );
    app.use('/assets', noSuchRoute);
    // With a root, a dot in the path of the install folder is nobody's business.
    app.get('/{*page}', (_request, response) =>
      response.set('Cache-Control', 'no-cache').sendFile('index.html', { root: clientFolder }),
    );
  }
  app.use(problemHandler(context.log));
  return app;
}
