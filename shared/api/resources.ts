import { z } from 'zod';
import { ArmModel } from '../arm/model';
import { Trust } from '../arm/trust';
import { Step } from '../sequence/steps';
import { Role } from '../team/roles';

/** What the HTTP API answers. Times are wall-clock ms; angles rad, lengths m. */
const text = (max: number) => z.string().trim().max(max);
const name = text(60).min(1);
export const Id = z.string().regex(/^[A-Za-z0-9_-]{1,64}$/);

export const Person = z.object({
  id: z.string(),
  name: z.string(),
  email: z.string(),
  role: Role,
  disabled: z.boolean(),
  lastSeenMs: z.number().nullable(),
});
export type Person = z.infer<typeof Person>;

export const SessionInfo = z.object({
  /** No owner yet: the page shows the first-owner form. */
  setupNeeded: z.boolean(),
  workshop: z.string(),
  /** True for a demo data folder: the sign-in page may show the demo sign-ins. */
  demo: z.boolean(),
  you: Person.nullable(),
});
export type SessionInfo = z.infer<typeof SessionInfo>;

export const SignIn = z.strictObject({ email: z.email().max(254), password: z.string().min(1).max(200) });
/** At least 10 characters; common passwords are refused by the server. */
export const NewPassword = z.string().min(10, 'use at least 10 characters').max(200);
export const FirstOwner = z.strictObject({
  code: z.string().min(1).max(64),
  workshop: name,
  name,
  email: z.email().max(254),
  password: NewPassword,
});
export const NewInvitation = z.strictObject({ email: z.email().max(254), name, role: Role });
export const Invitation = z.object({
  id: z.string(),
  email: z.string(),
  name: z.string(),
  role: Role,
  invitedBy: z.string(),
  createdAtMs: z.number(),
  expiresAtMs: z.number(),
});
export type Invitation = z.infer<typeof Invitation>;
export const AcceptInvitation = z.strictObject({ token: z.string().min(20).max(200), password: NewPassword });
export const PersonChange = z.strictObject({ role: Role.optional(), disabled: z.boolean().optional() });

export const Mail = z.object({
  id: z.string(),
  to: z.string(),
  subject: z.string(),
  body: z.string(),
  createdAtMs: z.number(),
  sent: z.boolean(),
});
export type Mail = z.infer<typeof Mail>;

export const AuditEntry = z.object({
  seq: z.int(),
  atMs: z.number(),
  who: z.string(),
  act: z.string(),
  arm: z.string().nullable(),
  detail: z.string(),
  result: z.string(),
  address: z.string(),
});
export type AuditEntry = z.infer<typeof AuditEntry>;

export const ArmSummary = z.object({
  id: z.string(),
  name: z.string(),
  note: z.string(),
  jointCount: z.int(),
  revision: z.int(),
  updatedAtMs: z.number(),
  unattended: z.boolean(),
  /** Live, in a word; null when its process is not running. */
  motors: z.string().nullable(),
  inControl: z.string().nullable(),
});
export type ArmSummary = z.infer<typeof ArmSummary>;
export const Arm = ArmSummary.extend({ model: ArmModel });
export type Arm = z.infer<typeof Arm>;
export const NewArm = z.strictObject({ name, startFrom: z.string().min(1).max(64) });
export const ArmModelChange = z.strictObject({
  model: ArmModel,
  /** The revision the change started from: a newer one on the server is a conflict, never overwritten. */
  baseRevision: z.int(),
  note: text(200).default(''),
});
export const ArmSettings = z.strictObject({ unattended: z.boolean() });
export const ArmRevision = z.object({
  revision: z.int(),
  note: z.string(),
  by: z.string(),
  atMs: z.number(),
});
export type ArmRevision = z.infer<typeof ArmRevision>;

export const Pose = z.object({
  id: z.string(),
  name: z.string(),
  note: z.string(),
  tags: z.array(z.string()),
  revision: z.int(),
  q: z.array(z.number()),
  /** 0 to 1, null without a gripper. */
  gripper: z.number().nullable(),
  trust: Trust,
  /** captured: read from the controller; typed: a person's numbers; imported. */
  origin: z.enum(['captured', 'typed', 'imported']),
  by: z.string(),
  atMs: z.number(),
  armRevision: z.int(),
  deleted: z.boolean(),
});
export type Pose = z.infer<typeof Pose>;
export const CapturePose = z.strictObject({
  name: name.optional(),
  tags: z.array(text(24).min(1)).max(10).optional(),
  note: text(500).optional(),
});
export const TypedPose = z.strictObject({
  name,
  q: z.array(z.number()).min(1).max(8),
  gripper: z.number().min(0).max(1).nullable().optional(),
  tags: z.array(text(24).min(1)).max(10).optional(),
  note: text(500).optional(),
});
export const PoseChange = z.strictObject({
  name: name.optional(),
  note: text(500).optional(),
  tags: z.array(text(24).min(1)).max(10).optional(),
});
export const PoseRevision = z.object({
  revision: z.int(),
  q: z.array(z.number()),
  gripper: z.number().nullable(),
  trust: Trust,
  origin: z.enum(['captured', 'typed', 'imported']),
  by: z.string(),
  atMs: z.number(),
});
export type PoseRevision = z.infer<typeof PoseRevision>;
/** The file that poses travel in: degrees and millimetres never appear in it, `units` says so. */
export const PoseFile = z.strictObject({
  format: z.literal('elbowroom-poses'),
  version: z.literal(1),
  arm: z.string().max(60),
  units: z.strictObject({ revolute: z.literal('rad'), prismatic: z.literal('m') }),
  joints: z.array(z.string().max(60)),
  poses: z
    .array(
      z.strictObject({
        name,
        tags: z.array(text(24)).max(10),
        note: text(500),
        q: z.array(z.number()).min(1).max(8),
        gripper: z.number().min(0).max(1).nullable(),
      }),
    )
    .max(1000),
});
export type PoseFile = z.infer<typeof PoseFile>;

export const Approval = z.object({
  by: z.string(),
  atMs: z.number(),
  /** False when a pose or the arm changed since: operators may not run it until it is approved again. */
  holds: z.boolean(),
  /** What changed, when it no longer holds. */
  why: z.string().nullable(),
});
export type Approval = z.infer<typeof Approval>;
export const SequenceSummary = z.object({
  id: z.string(),
  name: z.string(),
  note: z.string(),
  version: z.int(),
  stepCount: z.int(),
  updatedAtMs: z.number(),
  by: z.string(),
  approvedVersion: z.int().nullable(),
  approval: Approval.nullable(),
});
export type SequenceSummary = z.infer<typeof SequenceSummary>;
export const Sequence = SequenceSummary.extend({
  steps: z.array(Step),
  /** The version in `steps`. */
  shownVersion: z.int(),
  /** Whether this version, with today's poses and arm, was held through one cycle. */
  proven: z.boolean(),
});
export type Sequence = z.infer<typeof Sequence>;
export const SequenceDraft = z.strictObject({
  name,
  note: text(500).default(''),
  steps: z.array(Step).max(500),
});
export type SequenceDraft = z.infer<typeof SequenceDraft>;
export const SequenceChange = SequenceDraft.extend({ baseVersion: z.int() });
export const SequenceVersion = z.object({
  version: z.int(),
  by: z.string(),
  atMs: z.number(),
  stepCount: z.int(),
  approval: Approval.nullable(),
});
export type SequenceVersion = z.infer<typeof SequenceVersion>;

/** One thing a rehearsal found, attached to its step. */
export const RehearsalProblem = z.object({
  stepId: z.string(),
  path: z.string(),
  severity: z.enum(['blocks', 'caution']),
  code: z.string(),
  message: z.string(),
});
export type RehearsalProblem = z.infer<typeof RehearsalProblem>;
export const Rehearsal = z.object({
  /** s for one cycle at the ceiling given. */
  duration: z.number(),
  ceiling: z.number(),
  stepDurations: z.record(z.string(), z.number()),
  problems: z.array(RehearsalProblem),
  /** Nearest soft limit over the cycle: joint index, rad or m left, step. */
  nearestLimit: z.object({ joint: z.int(), margin: z.number(), path: z.string() }).nullable(),
  highestTorque: z.object({ joint: z.int(), used: z.number(), path: z.string() }).nullable(),
  /** Highest speed of the fastest modelled point, m/s. */
  highestSpeed: z.number(),
  /** Torque used per joint over time, for the plot. */
  plot: z.object({ t: z.array(z.number()), torqueUsed: z.array(z.array(z.number())) }),
});
export type Rehearsal = z.infer<typeof Rehearsal>;

export const RUN_ENDINGS = [
  'finished',
  'ended',
  'stopped',
  'faulted',
  'lost control',
  'server restarted',
] as const;
export const RunSummary = z.object({
  id: z.string(),
  sequenceId: z.string(),
  sequenceName: z.string(),
  version: z.int(),
  who: z.string(),
  trust: Trust,
  armRevision: z.int(),
  startedAtMs: z.number(),
  endedAtMs: z.number().nullable(),
  cyclesAsked: z.int().nullable(),
  cyclesDone: z.int(),
  /** Null while it runs. */
  how: z.enum(RUN_ENDINGS).nullable(),
  detail: z.string(),
});
export type RunSummary = z.infer<typeof RunSummary>;
export const RunCycle = z.object({
  cycle: z.int(),
  seconds: z.number(),
  held: z.boolean(),
  endedAtMs: z.number(),
});
export type RunCycle = z.infer<typeof RunCycle>;
export const Run = RunSummary.extend({ cycles: z.array(RunCycle) });
export type Run = z.infer<typeof Run>;

/** Errors: RFC 9457 problem details. `code` is for programs, `detail` for people. */
export const Problem = z.object({
  type: z.string(),
  title: z.string(),
  status: z.int(),
  code: z.string(),
  detail: z.string(),
  errors: z.array(z.object({ path: z.string(), message: z.string() })).optional(),
});
export type Problem = z.infer<typeof Problem>;
