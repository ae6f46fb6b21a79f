import { networkInterfaces } from 'node:os';
import { join } from 'node:path';
import type { ArmsService } from './arms/arms-service';
import { AuditLog } from './audit/audit-log';
import { Invitations } from './auth/invitations';
import { PeopleStore } from './auth/people-store';
import { Sessions } from './auth/sessions';
import { SetupCode } from './auth/setup-code';
import { ArmStore } from './db/arm-store';
import { type Database, openDatabase } from './db/database';
import { PoseStore } from './db/pose-store';
import { RunStore } from './db/run-store';
import { SequenceStore } from './db/sequence-store';
import { WorkshopStore } from './db/workshop-store';
import { Mailer } from './mail/mailer';
import { Origins } from './origins';
import type { Settings } from './settings';

/** Everything a route may use; made once in index.ts, or by a test. */
export interface Context {
  db: Database;
  sessions: Sessions;
  people: PeopleStore;
  invitations: Invitations;
  setupCode: SetupCode;
  workshop: WorkshopStore;
  arms: ArmStore;
  poses: PoseStore;
  sequences: SequenceStore;
  runs: RunStore;
  live: ArmsService;
  audit: AuditLog;
  mailer: Mailer;
  origins: Origins;
  /** For links in mails, never taken from a request. */
  publicUrl: () => string;
  signInLimit: { perAddress: number; perAccount: number };
  log: Log;
}

export interface Log {
  info(message: string): void;
  warn(message: string): void;
  error(details: object, message: string): void;
}

/** Sign-in attempts in a minute. */
const SIGN_IN_LIMIT = { perAddress: 20, perAccount: 8 };

export interface ContextOptions {
  settings: Settings;
  migrationsFolder: string;
  wallMs: () => number;
  log: Log;
  /** For links; known only once the server listens, so asked each time. */
  publicUrl: () => string;
  /** Arms that move, made on top of what is stored. */
  live: (stores: Omit<Context, 'live'>) => ArmsService;
  signInLimit?: Context['signInLimit'];
}

/** Opens the data folder and everything that stands on it. */
export function openContext(options: ContextOptions): Context {
  const { settings, wallMs, log, publicUrl } = options;
  const db = openDatabase(
    join(settings.dataFolder, 'elbowroom.sqlite'),
    options.migrationsFolder,
    (message) => log.info(message),
  );
  const stores: Omit<Context, 'live'> = {
    db,
    sessions: new Sessions(db, wallMs, settings.secure, log),
    people: new PeopleStore(db, wallMs),
    invitations: new Invitations(db, wallMs),
    setupCode: new SetupCode(),
    workshop: new WorkshopStore(db),
    arms: new ArmStore(db, wallMs),
    poses: new PoseStore(db, wallMs),
    sequences: new SequenceStore(db, wallMs),
    runs: new RunStore(db, wallMs),
    audit: new AuditLog(db, wallMs, log),
    mailer: new Mailer(db, { smtpUrl: settings.smtpUrl, from: settings.mailFrom, wallMs, log }),
    origins: new Origins({ ...settings, ownAddresses: ownAddresses() }),
    publicUrl,
    signInLimit: options.signInLimit ?? SIGN_IN_LIMIT,
    log,
  };
  return { ...stores, live: options.live(stores) };
}

/** IP addresses of this machine on its networks, the likeliest to be typed first. */
export function ownAddresses(): string[] {
  const all = Object.values(networkInterfaces()).flatMap((list) => list ?? []);
  return all
    .filter((at) => !at.internal)
    .sort((a, b) => a.family.localeCompare(b.family))
    .map((at) => at.address);
}
