import { z } from 'zod';
import type { Permission } from '../team/roles';

/** Messages from a page to an arm. JSON text frames of at most 16 KiB; unknown fields are refused. SI units. */
export const MAX_MESSAGE_BYTES = 16 * 1024;
/** The page keeps a hold this often, ms; the arm lets go by itself when nothing valid came for HOLD_EXPIRY_MS. */
export const HOLD_KEEP_MS = 50;
export const HOLD_EXPIRY_MS = 250;
/** A keep that saw telemetry older than this (s) is dropped: it was sent before a stall. */
export const KEEP_MAX_AGE_S = 0.3;

const finite = z.number().refine(Number.isFinite, 'must be a finite number');
const id = z.string().min(1).max(64);
const joint = z.int().min(0).max(7);
/** The number of the current turn at the controls; a motion message from an earlier turn is refused. */
const turn = z.int().nonnegative();
/** The newest telemetry time the page has seen, s: an order that was long under way moves nothing. */
const seenT = finite.optional();
const jointVector = z.array(finite).min(1).max(8);
export const TOOL_AXES = ['x', 'y', 'z', 'rx', 'ry', 'rz'] as const;

export const HoldMotion = z.discriminatedUnion('kind', [
  z.strictObject({
    kind: z.literal('jog'),
    frame: z.enum(['joint', 'base', 'tool']),
    axis: z.union([joint, z.enum(TOOL_AXES)]),
    direction: z.union([z.literal(1), z.literal(-1)]),
  }),
  z.strictObject({ kind: z.literal('pose'), poseId: id }),
  z.strictObject({ kind: z.literal('joints'), q: jointVector }),
  z.strictObject({ kind: z.literal('reference'), joint }),
  /** Carries a started run through its first, held cycle. */
  z.strictObject({ kind: z.literal('run') }),
]);
export type HoldMotion = z.infer<typeof HoldMotion>;

const message = <T extends string, S extends z.ZodRawShape>(type: T, shape: S) =>
  z.strictObject({ type: z.literal(type), id, ...shape });

export const ClientMessage = z.discriminatedUnion('type', [
  message('control.take', { force: z.boolean().optional() }),
  message('control.answer', { accept: z.boolean() }),
  message('control.handBack', { turn }),
  message('control.handOver', { turn, toUserId: id }),
  message('motors.energise', {
    turn,
    joints: z.array(joint).max(8).optional(),
    /** Where each servo stands now (rad, m): its first pulse goes there. Required for every servo energised. */
    servoAngles: z.array(z.strictObject({ joint, q: finite })).max(8),
    /** Where the gripper stands, 0 to 1, if the arm has one. */
    gripperOpening: z.number().min(0).max(1).optional(),
    /** The person has read the cautions and ticked that hands and bench are clear. */
    cautionsRead: z.literal(true),
  }),
  /** Motors off never needs control to make things safe, but it may drop the arm: `dropsAccepted` names the joints shown. */
  message('motors.off', { turn, dropsAccepted: z.array(joint).max(8) }),
  message('stop', {}),
  message('fault.acknowledge', { turn }),
  message('ceiling.set', {
    turn,
    fraction: z.number().min(0.01).max(1),
    peopleClear: z.boolean().optional(),
  }),
  /** Where the joints stand, in a person's word; `joints` limits it to some of them. */
  message('trust.declare', { turn, q: jointVector, joints: z.array(joint).max(8).optional() }),
  /** Makes joints doubtful: somebody pushed the arm by hand. */
  message('trust.doubt', { joints: z.array(joint).max(8), reason: z.string().max(200).optional() }),
  message('hold.start', { turn, holdId: id, motion: HoldMotion, seenT }),
  z.strictObject({
    type: z.literal('hold.keep'),
    holdId: id,
    seq: z.int().nonnegative(),
    /** The newest telemetry time the page has seen, s. */
    seenT: finite,
  }),
  z.strictObject({ type: z.literal('hold.end'), holdId: id }),
  message('nudge', {
    turn,
    frame: z.enum(['joint', 'base', 'tool']),
    axis: z.union([joint, z.enum(TOOL_AXES)]),
    /** rad or m, signed; one of the nudge sizes. */
    amount: finite,
    seenT,
  }),
  message('gripper.set', { turn, opening: z.number().min(0).max(1) }),
  message('run.start', {
    turn,
    sequenceId: id,
    version: z.int().positive().optional(),
    /** null = until stopped. */
    cycles: z.int().min(1).max(100_000).nullable(),
    /** A step id; the first cycle begins there. */
    fromStep: id.optional(),
    /** Stop after every step and wait for `run.step`. */
    single: z.boolean().optional(),
  }),
  message('run.pause', { turn }),
  message('run.resume', { turn }),
  message('run.step', { turn }),
  message('run.end', { turn }),
]);
export type ClientMessage = z.infer<typeof ClientMessage>;
export type ClientMessageType = ClientMessage['type'];

/** What each message needs. Control itself is checked by the arm process, for every message but those marked. */
export const MESSAGE_NEEDS: Record<ClientMessageType, Permission> = {
  'control.take': 'arm.control',
  'control.answer': 'arm.control',
  'control.handBack': 'arm.control',
  'control.handOver': 'arm.control',
  'motors.energise': 'arm.control',
  'motors.off': 'arm.control',
  stop: 'arm.stop',
  'fault.acknowledge': 'arm.control',
  'ceiling.set': 'arm.control',
  'trust.declare': 'arm.control',
  'trust.doubt': 'arm.control',
  'hold.start': 'arm.control',
  'hold.keep': 'arm.control',
  'hold.end': 'arm.control',
  nudge: 'arm.control',
  'gripper.set': 'arm.control',
  'run.start': 'sequence.run',
  'run.pause': 'sequence.run',
  'run.resume': 'sequence.run',
  'run.step': 'sequence.run',
  'run.end': 'sequence.run',
};

/** Nudge sizes offered: rad for turning joints and turns of the tool, m for slides; never more than 20 mm at the tool. */
export const NUDGE_ANGLES = [0.5, 1, 5].map((deg) => (deg * Math.PI) / 180);
export const NUDGE_LENGTHS = [0.001, 0.005];
export const NUDGE_MAX_TOOL_TRAVEL = 0.02;
