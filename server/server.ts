import { fork } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { createServer, type Server } from 'node:http';
import { createServer as createTlsServer } from 'node:https';
import type { AddressInfo } from 'node:net';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { pino } from 'pino';
import { createApp } from './app';
import { Arms } from './arms/arms';
import { recordKeeper } from './arms/keep-records';
import { AuditLog } from './audit/audit-log';
import { Invitations } from './auth/invitations';
import { PeopleStore } from './auth/people-store';
import { Sessions } from './auth/sessions';
import { SetupCode } from './auth/setup-code';
import type { Context } from './context';
import { ArmStore } from './db/arm-store';
import { openDatabase } from './db/database';
import { PoseStore } from './db/pose-store';
import { RunStore } from './db/run-store';
import { SequenceStore } from './db/sequence-store';
import { WorkshopStore } from './db/workshop-store';
import { seedDemo } from './demo';
import { LiveGateway } from './live/gateway';
import { resolveWith } from './live/resolve';
import { Mailer } from './mail/mailer';
import { Origins } from './origins';
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
  const db = openDatabase(
    join(settings.dataFolder, 'elbowroom.sqlite'),
    join(here, '..', 'drizzle'),
    (message) => log.info(message),
  );
  const armStore = new ArmStore(db, wallMs);
  const runs = new RunStore(db, wallMs);
  const sequences = new SequenceStore(db, wallMs);
  const poses = new PoseStore(db, wallMs);
  const audit = new AuditLog(db, wallMs, log);
  const sessions = new Sessions(db, wallMs, settings.secure);
  const origins = new Origins(settings);
  runs.closeOpen();
  const arms = new Arms({
    loadArm: (armId) => armStore.find(armId),
    fork: forkArmProcess,
    keepRecord: recordKeeper({ arms: armStore, runs, sequences, audit }),
    wallMs,
    log,
  });
  let url = '';
  const context: Context = {
    db,
    sessions,
    people: new PeopleStore(db, wallMs),
    invitations: new Invitations(db, wallMs),
    setupCode: new SetupCode(),
    workshop: new WorkshopStore(db),
    arms: armStore,
    poses,
    sequences,
    runs,
    live: arms,
    audit,
    mailer: new Mailer(db, { smtpUrl: settings.smtpUrl, from: settings.mailFrom, wallMs, log }),
    origins,
    publicUrl: () => settings.publicUrl ?? url,
    signInLimit: options.signInLimit ?? { perAddress: 20, perAccount: 8 },
    log,
  };
  if (settings.demo) await seedDemo(context, settings.dataFolder);
  const app = createApp(context, {
    clientFolder: built ? join(here, '..', 'client') : join(here, '..', 'dist', 'client'),
    secure: settings.secure,
    trustProxy: settings.publicUrl !== null && settings.tls === null,
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
      const arm = armStore.find(armId);
      return arm ? { id: arm.id, revision: arm.revision, model: arm.model } : null;
    },
    resolve: resolveWith({ arms: armStore, poses, sequences }),
    monotonicMs: () => performance.now(),
    log,
  });
  gateway.attach(http);
  await new Promise<void>((resolve, reject) => {
    http.once('error', reject);
    http.listen(settings.port, settings.host, resolve);
  });
  const { port } = http.address() as AddressInfo;
  const shownHost = settings.host === '127.0.0.1' ? 'localhost' : settings.host;
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
      db.$client.close();
    },
  };
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
