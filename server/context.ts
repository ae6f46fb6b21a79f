import type { ArmsService } from './arms/arms-service';
import type { AuditLog } from './audit/audit-log';
import type { Invitations } from './auth/invitations';
import type { PeopleStore } from './auth/people-store';
import type { Sessions } from './auth/sessions';
import type { SetupCode } from './auth/setup-code';
import type { ArmStore } from './db/arm-store';
import type { Database } from './db/database';
import type { PoseStore } from './db/pose-store';
import type { RunStore } from './db/run-store';
import type { SequenceStore } from './db/sequence-store';
import type { WorkshopStore } from './db/workshop-store';
import type { Mailer } from './mail/mailer';
import type { Origins } from './origins';

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
  log: {
    info(message: string): void;
    warn(message: string): void;
    error(details: object, message: string): void;
  };
}
