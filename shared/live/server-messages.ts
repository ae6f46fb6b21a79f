import { z } from 'zod';
import { ArmModel } from '../arm/model';
import { Trust } from '../arm/trust';
import { Role } from '../team/roles';
import { HoldMotion } from './client-messages';

/** Messages from an arm to the pages that watch it. SI units; times `t` in s of the arm's own clock, `…Ms` in wall-clock ms. */
export const LIVE_PROTOCOL = 1;

export const MotorsState = z.enum(['resting', 'energising', 'standing', 'moving', 'stopping', 'faulted']);
export type MotorsState = z.infer<typeof MotorsState>;

export const LinkState = z.strictObject({
  kind: z.enum(['builtIn', 'board']),
  /** `restarting`: the arm process died and is coming back. */
  state: z.enum(['connecting', 'steady', 'lost', 'restarting']),
  answerMs: z.number().nullable(),
});

export const FaultState = z.strictObject({
  code: z.string(),
  /** What happened, what it means, what to do. */
  message: z.string(),
  /** A hard fault is acknowledged by a builder, a plain one by whoever has control. */
  hard: z.boolean(),
  atMs: z.number(),
});
export type FaultState = z.infer<typeof FaultState>;

export const ControlState = z.strictObject({
  userId: z.string(),
  name: z.string(),
  sinceMs: z.number(),
  /** The holder's socket is gone; control lapses unless it is reclaimed in time. */
  away: z.boolean(),
  /** Somebody asks for control; silence until `untilMs` with the motors still gives it. */
  request: z.strictObject({ userId: z.string(), name: z.string(), untilMs: z.number() }).nullable(),
});
export type ControlState = z.infer<typeof ControlState>;

export const RUN_PHASES = [
  /** Waiting for a person to hold the first cycle. */
  'heldWaiting',
  'heldRunning',
  /** The 3 s before unheld motion. */
  'countdown',
  'running',
  /** Ramping down to a pause, on the path. */
  'pausing',
  'paused',
  /** Single-step: standing before the next step. */
  'stepWaiting',
] as const;
export const RunState = z.strictObject({
  runId: z.string(),
  sequenceId: z.string(),
  sequenceName: z.string(),
  version: z.int(),
  phase: z.enum(RUN_PHASES),
  /** Whether the present cycle has to be held. */
  held: z.boolean(),
  single: z.boolean(),
  /** 1-based. */
  cycle: z.int(),
  cycles: z.int().nullable(),
  /** The step being done or to be done next. */
  stepId: z.string(),
  stepPath: z.string(),
  stepIndex: z.int(),
  stepCount: z.int(),
  countdownS: z.number(),
  /** Finished cycles, s each; the newest 50. */
  cycleTimes: z.array(z.number()),
  startedAtMs: z.number(),
  /** Why it waits, in words, when it does. */
  reason: z.string().nullable(),
});
export type RunState = z.infer<typeof RunState>;

export const CeilingState = z.strictObject({
  /** In force: the lowest of the three. */
  fraction: z.number(),
  /** What the person asked for. */
  person: z.number(),
  trust: z.number(),
  firstPower: z.number(),
  lowest: z.enum(['person', 'trust', 'first power']),
  peopleClear: z.boolean(),
  /** Limit of the fastest modelled point, m/s; null with people clear at 100 %. */
  toolSpeed: z.number().nullable(),
});
export type CeilingState = z.infer<typeof CeilingState>;

export const StateMessage = z.strictObject({
  type: z.literal('state'),
  t: z.number(),
  link: LinkState,
  motors: MotorsState,
  motorsSinceMs: z.number(),
  /** Who last energised or switched off, by name. */
  motorsBy: z.string().nullable(),
  energised: z.array(z.boolean()),
  trust: z.array(Trust),
  /** Why and when the arm's trust became what it is. */
  trustNote: z.string(),
  trustSinceMs: z.number(),
  ceiling: CeilingState,
  /** Rises at every change of holder; every motion message carries it. */
  turn: z.int(),
  control: ControlState.nullable(),
  fault: FaultState.nullable(),
  /** The last stop: who pressed and whether the board has acknowledged. */
  stop: z.strictObject({ by: z.string(), atMs: z.number(), acknowledged: z.boolean() }).nullable(),
  hold: z.strictObject({ holdId: z.string(), userId: z.string(), motion: HoldMotion }).nullable(),
  run: RunState.nullable(),
  /** Joints (indices) that would drop if the motors went off now. */
  wouldDrop: z.array(z.int()),
  gripper: z
    .strictObject({ opening: z.number(), target: z.number(), energised: z.boolean(), moving: z.boolean() })
    .nullable(),
  inputs: z.array(z.boolean()),
  outputs: z.array(z.boolean()),
});
export type StateMessage = z.infer<typeof StateMessage>;

const Vec3 = z.tuple([z.number(), z.number(), z.number()]);
export const TelemetryMessage = z.strictObject({
  type: z.literal('telemetry'),
  t: z.number(),
  q: z.array(z.number()),
  qd: z.array(z.number()),
  /** Where each joint would come to rest if let go now, link lead included. */
  stopAt: z.array(z.number()),
  /** 0 to 1; above 1 none is left. Null for a joint that is resting. */
  torqueUsed: z.array(z.number().nullable()),
  tool: z.strictObject({ position: Vec3, rotation: z.array(z.number()).length(9) }),
  target: z.array(z.number()).optional(),
  measured: z.array(z.number().nullable()).optional(),
  /** Built-in arm only: where the joints really are. */
  truth: z.array(z.number()).optional(),
  blocked: z.strictObject({ joint: z.int(), reason: z.string() }).optional(),
});
export type TelemetryMessage = z.infer<typeof TelemetryMessage>;

export const HelloMessage = z.strictObject({
  type: z.literal('hello'),
  protocol: z.literal(LIVE_PROTOCOL),
  arm: z.strictObject({ id: z.string(), revision: z.int(), model: ArmModel }),
  you: z.strictObject({ userId: z.string(), name: z.string(), role: Role, mayControl: z.boolean() }),
});
export const EventMessage = z.strictObject({
  type: z.literal('event'),
  atMs: z.number(),
  level: z.enum(['note', 'caution', 'fault']),
  code: z.string(),
  message: z.string(),
});
export type ChangedMessage = z.infer<typeof ChangedMessage>;
export type EventMessage = z.infer<typeof EventMessage>;
export const DoneMessage = z.strictObject({ type: z.literal('done'), id: z.string() });
export const RefusedMessage = z.strictObject({
  type: z.literal('refused'),
  id: z.string(),
  code: z.string(),
  message: z.string(),
});
/** Tells pages that something at rest has changed (poses, sequences, runs, the arm), so they fetch it again. */
export const ChangedMessage = z.strictObject({
  type: z.literal('changed'),
  what: z.enum(['arm', 'poses', 'sequences', 'runs', 'team']),
});

export const ServerMessage = z.discriminatedUnion('type', [
  HelloMessage,
  StateMessage,
  TelemetryMessage,
  EventMessage,
  DoneMessage,
  RefusedMessage,
  ChangedMessage,
]);
export type ServerMessage = z.infer<typeof ServerMessage>;
export type HelloMessage = z.infer<typeof HelloMessage>;
export type RefusedMessage = z.infer<typeof RefusedMessage>;
