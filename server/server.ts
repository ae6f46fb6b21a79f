import { fork } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { createServer, type Server } from 'node:http';
import { createServer as createTlsServer } from 'node:https';
import type { AddressInfo } from 'node:net';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { type Logger, pino } from 'pino';
import { pinoHttp } from 'pino-http';
import { createApp } from './app';
import { Arms } from './arms/arms';
import { recordKeeper } from './arms/keep-records';
import { type Context, openContext, ownAddresses } from './context';
import { seedDemo } from './demo';
import { LiveGateway } from './live/gateway';
import { resolveWith } from './live/resolve';
import { EVERY_ADDRESS } from './origins';
import type { Settings } from './settings';

/** Built, we stand in dist/server; from sources, in server/. */
const here = dirname(fileURLToPath(import.meta.url));
const built = !import.meta.url.endsWith('.ts');
const SWEEP_MS = 60_000;

export interface RunningServer {
  url: string;
  context: Context;
  arms: Arms;
  close(): Promise<void>;
}

/** Opens the data folder, starts listening, and opens arms as pages ask for them. */
export async function startServer(
  settings: Settings,
  options: { signInLimit?: Context['signInLimit'] } = {},
): Promise<RunningServer> {
  const log = pino({ level: process.env.LOG_LEVEL ?? 'warn' });
  const wallMs = Date.now;
  let url = '';
  let arms!: Arms;
  const context = openContext({
    settings,
    migrationsFolder: join(here, '..', 'drizzle'),
    wallMs,
    log,
    publicUrl: () => settings.publicUrl ?? url,
    signInLimit: options.signInLimit,
    live: (stores) => {
      arms = new Arms({
        loadArm: (armId) => stores.arms.find(armId),
        fork: forkArmProcess,
        keepRecord: recordKeeper(stores),
        wallMs,
        log,
      });
      return arms;
    },
  });
  const { sessions, origins } = context;
  context.runs.closeOpen();
  warnOfBrokenAudit(context);
  if (settings.demo) await seedDemo(context, settings.dataFolder);
  const app = createApp(context, {
    clientFolder: built ? join(here, '..', 'client') : join(here, '..', 'dist', 'client'),
    secure: settings.secure,
    // Only an https address that is not our own TLS means that there is a proxy; believing its header
    // without one would let anybody choose the address that sign-in is limited by.
    trustProxy: settings.secure && settings.tls === null,
    requestLog: requestLog(log),
  });
  const http: Server = settings.tls
    ? createTlsServer({ cert: readFileSync(settings.tls.cert), key: readFileSync(settings.tls.key) }, app)
    : createServer(app);
  const gateway = new LiveGateway({
    arms,
    findSession: async (headers) => sessions.find(headers),
    onSessionEnded: (listener) => sessions.onEnded(listener),
    originAllowed: (request) => origins.allows(request),
    describeArm(armId) {
      const arm = context.arms.find(armId);
      return arm ? { id: arm.id, revision: arm.revision, model: arm.model } : null;
    },
    resolve: resolveWith(context),
    monotonicMs: () => performance.now(),
    log,
  });
  gateway.attach(http);
  await new Promise<void>((resolve, reject) => {
    http.once('error', reject);
    http.listen(settings.port, settings.host, resolve);
  });
  const { port } = http.address() as AddressInfo;
  const shownHost = shown(settings.host);
  url = `${settings.tls ? 'https' : 'http'}://${shownHost}:${port}`;
  const sweep = setInterval(() => sessions.sweep(), SWEEP_MS).unref();
  return {
    url: settings.publicUrl ?? url,
    context,
    arms,
    async close() {
      clearInterval(sweep);
      arms.stopAll('The server');
      gateway.close();
      await arms.close();
      await new Promise<void>((resolve) => {
        http.close(() => resolve());
        http.closeAllConnections();
      });
      context.db.$client.close();
    },
  };
}

/** An address that a person can open. */
function shown(host: string): string {
  if (host === '127.0.0.1') return 'localhost';
  const address = EVERY_ADDRESS.includes(host) ? (ownAddresses()[0] ?? 'localhost') : host;
  return address.includes(':') ? `[${address}]` : address;
}

function warnOfBrokenAudit({ audit, log }: Context): void {
  const seq = audit.firstBroken();
  if (seq !== null) log.warn(`the audit log was changed by somebody at or before entry ${seq}`);
}

/** Requests that failed on our side; with LOG_LEVEL=debug every one. Never a header or a body: they hold secrets. */
function requestLog(logger: Logger) {
  return pinoHttp({
    logger,
    customLogLevel: (_request, response, error) =>
      error || response.statusCode >= 500 ? 'error' : response.statusCode >= 400 ? 'info' : 'debug',
    serializers: {
      req: ({ method, url, remoteAddress }) => ({ method, url, remoteAddress }),
      res: ({ statusCode }) => ({ statusCode }),
    },
  });
}

function forkArmProcess() {
  const entry = built ? join(here, 'arm-process.js') : join(here, 'control', 'arm-process.ts');
  return fork(entry, [], {
    execArgv: built ? [] : ['--import', 'tsx'],
    // Ctrl-C is for us; we tell the arms.
    detached: process.platform !== 'win32',
    stdio: ['ignore', 'inherit', 'inherit', 'ipc'],
  });
}
