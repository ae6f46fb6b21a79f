import { index, integer, primaryKey, sqliteTable, text, uniqueIndex } from 'drizzle-orm/sqlite-core';

/** Tables. Times are wall-clock ms; JSON columns hold what the schemas of shared/ describe. */
const id = () => text('id').primaryKey();
const ms = (name: string) => integer(name).notNull();

export const workshop = sqliteTable('workshop', {
  /** Always 1: there is one workshop. */
  id: integer('id').primaryKey(),
  name: text('name').notNull(),
  demo: integer('demo', { mode: 'boolean' }).notNull(),
});

export const people = sqliteTable('people', {
  id: id(),
  name: text('name').notNull(),
  /** Lower case. */
  email: text('email').notNull().unique(),
  role: text('role').notNull(),
  passwordHash: text('password_hash').notNull(),
  disabled: integer('disabled', { mode: 'boolean' }).notNull().default(false),
  createdAtMs: ms('created_at_ms'),
  lastSeenMs: integer('last_seen_ms'),
});

export const sessions = sqliteTable(
  'sessions',
  {
    id: id(),
    /** SHA-256 of the cookie's token: a copy of the database opens no session. */
    tokenHash: text('token_hash').notNull().unique(),
    personId: text('person_id')
      .notNull()
      .references(() => people.id, { onDelete: 'cascade' }),
    createdAtMs: ms('created_at_ms'),
    usedAtMs: ms('used_at_ms'),
    expiresAtMs: ms('expires_at_ms'),
    address: text('address').notNull(),
  },
  (t) => [index('sessions_person').on(t.personId)],
);

export const invitations = sqliteTable('invitations', {
  id: id(),
  tokenHash: text('token_hash').notNull().unique(),
  email: text('email').notNull(),
  name: text('name').notNull(),
  role: text('role').notNull(),
  invitedBy: text('invited_by').notNull(),
  createdAtMs: ms('created_at_ms'),
  expiresAtMs: ms('expires_at_ms'),
  usedAtMs: integer('used_at_ms'),
});

export const mails = sqliteTable('mails', {
  id: id(),
  to: text('to').notNull(),
  subject: text('subject').notNull(),
  body: text('body').notNull(),
  createdAtMs: ms('created_at_ms'),
  sent: integer('sent', { mode: 'boolean' }).notNull(),
});

/** Append-only; each entry's hash covers the one before it. */
export const auditLog = sqliteTable('audit_log', {
  seq: integer('seq').primaryKey({ autoIncrement: true }),
  atMs: ms('at_ms'),
  who: text('who').notNull(),
  act: text('act').notNull(),
  arm: text('arm'),
  detail: text('detail').notNull(),
  result: text('result').notNull(),
  address: text('address').notNull(),
  hash: text('hash').notNull(),
});

export const arms = sqliteTable('arms', {
  id: id(),
  name: text('name').notNull(),
  revision: integer('revision').notNull(),
  unattended: integer('unattended', { mode: 'boolean' }).notNull().default(false),
  /** Last believed position, JSON, for "as last seen". */
  lastSeen: text('last_seen', { mode: 'json' }),
  deleted: integer('deleted', { mode: 'boolean' }).notNull().default(false),
  updatedAtMs: ms('updated_at_ms'),
});

export const armRevisions = sqliteTable(
  'arm_revisions',
  {
    armId: text('arm_id')
      .notNull()
      .references(() => arms.id),
    revision: integer('revision').notNull(),
    model: text('model', { mode: 'json' }).notNull(),
    note: text('note').notNull(),
    by: text('by').notNull(),
    atMs: ms('at_ms'),
  },
  (t) => [primaryKey({ columns: [t.armId, t.revision] })],
);

export const poses = sqliteTable(
  'poses',
  {
    id: id(),
    armId: text('arm_id')
      .notNull()
      .references(() => arms.id),
    name: text('name').notNull(),
    note: text('note').notNull(),
    tags: text('tags', { mode: 'json' }).$type<string[]>().notNull(),
    revision: integer('revision').notNull(),
    deleted: integer('deleted', { mode: 'boolean' }).notNull().default(false),
  },
  (t) => [index('poses_arm').on(t.armId)],
);

export const poseRevisions = sqliteTable(
  'pose_revisions',
  {
    poseId: text('pose_id')
      .notNull()
      .references(() => poses.id),
    revision: integer('revision').notNull(),
    q: text('q', { mode: 'json' }).$type<number[]>().notNull(),
    gripper: text('gripper', { mode: 'json' }).$type<number | null>(),
    trust: text('trust').notNull(),
    origin: text('origin').notNull(),
    by: text('by').notNull(),
    atMs: ms('at_ms'),
    armRevision: integer('arm_revision').notNull(),
  },
  (t) => [primaryKey({ columns: [t.poseId, t.revision] })],
);

export const sequences = sqliteTable(
  'sequences',
  {
    id: id(),
    armId: text('arm_id')
      .notNull()
      .references(() => arms.id),
    version: integer('version').notNull(),
    deleted: integer('deleted', { mode: 'boolean' }).notNull().default(false),
  },
  (t) => [index('sequences_arm').on(t.armId)],
);

export const sequenceVersions = sqliteTable(
  'sequence_versions',
  {
    sequenceId: text('sequence_id')
      .notNull()
      .references(() => sequences.id),
    version: integer('version').notNull(),
    name: text('name').notNull(),
    note: text('note').notNull(),
    steps: text('steps', { mode: 'json' }).notNull(),
    by: text('by').notNull(),
    atMs: ms('at_ms'),
    approvedBy: text('approved_by'),
    approvedAtMs: integer('approved_at_ms'),
    /** Fingerprint of what was approved: steps, poses and arm. */
    approvedFingerprint: text('approved_fingerprint'),
  },
  (t) => [primaryKey({ columns: [t.sequenceId, t.version] })],
);

/** Programs that were watched through one whole held cycle on this arm. */
export const provenPrograms = sqliteTable(
  'proven_programs',
  {
    armId: text('arm_id').notNull(),
    fingerprint: text('fingerprint').notNull(),
    who: text('who').notNull(),
    atMs: ms('at_ms'),
  },
  (t) => [primaryKey({ columns: [t.armId, t.fingerprint] })],
);

export const runs = sqliteTable(
  'runs',
  {
    id: id(),
    armId: text('arm_id').notNull(),
    sequenceId: text('sequence_id').notNull(),
    sequenceName: text('sequence_name').notNull(),
    version: integer('version').notNull(),
    who: text('who').notNull(),
    trust: text('trust').notNull(),
    armRevision: integer('arm_revision').notNull(),
    startedAtMs: ms('started_at_ms'),
    endedAtMs: integer('ended_at_ms'),
    cyclesAsked: integer('cycles_asked'),
    cyclesDone: integer('cycles_done').notNull().default(0),
    how: text('how'),
    detail: text('detail').notNull().default(''),
  },
  (t) => [index('runs_arm').on(t.armId, t.startedAtMs)],
);

export const runCycles = sqliteTable(
  'run_cycles',
  {
    runId: text('run_id')
      .notNull()
      .references(() => runs.id),
    cycle: integer('cycle').notNull(),
    seconds: text('seconds', { mode: 'json' }).$type<number>().notNull(),
    held: integer('held', { mode: 'boolean' }).notNull(),
    endedAtMs: ms('ended_at_ms'),
  },
  (t) => [uniqueIndex('run_cycles_one').on(t.runId, t.cycle)],
);
