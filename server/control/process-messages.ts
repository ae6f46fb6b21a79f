import type { ArmModel } from '../../shared/arm/model';
import type { Trust } from '../../shared/arm/trust';
import type { ClientMessage } from '../../shared/live/client-messages';
import type { EventMessage, StateMessage, TelemetryMessage } from '../../shared/live/server-messages';
import type { Program } from '../../shared/sequence/program';
import type { Role } from '../../shared/team/roles';

/** Who sent a message: filled in by the gateway from the session, never by the page. */
export interface Actor {
  userId: string;
  name: string;
  role: Role;
  sessionId: string;
  socketId: string;
}

/** What the web side looked up for a message, so that the arm process needs no database. */
export interface Resolved {
  /** For `hold.start` with a pose. rad, m; gripper 0 to 1 or null. */
  pose?: { id: string; name: string; q: number[]; gripper: number | null };
  /** For `run.start`. */
  program?: Program;
  /** For `control.handOver`: the person asked for; their sockets on this arm. */
  person?: { userId: string; name: string; role: Role; sessionId: string; socketId: string };
}

/** Web side → arm process. */
export type ToArmProcess =
  | {
      kind: 'open';
      armId: string;
      model: ArmModel;
      seed: number;
      unattended: boolean;
      trustMemory: TrustMemory | null;
    }
  | { kind: 'command'; actor: Actor; message: ClientMessage; resolved: Resolved }
  | { kind: 'socketClosed'; socketId: string }
  /** The session itself ended (signed out, disabled, expired): control goes, and the arm stops if it moves. */
  | { kind: 'sessionEnded'; sessionId: string }
  | { kind: 'stop'; by: string }
  | { kind: 'settings'; unattended: boolean }
  | { kind: 'shutDown' };

/** Last believed position, to draw "as last seen"; never believed after a restart. */
export interface TrustMemory {
  q: number[];
  atMs: number;
}

/** What the arm process wants kept. */
export type ArmRecord =
  | {
      kind: 'runStarted';
      runId: string;
      sequenceId: string;
      sequenceName: string;
      version: number;
      userId: string;
      who: string;
      trust: Trust;
      cyclesAsked: number | null;
      fingerprint: string;
      startedAtMs: number;
    }
  | { kind: 'runCycle'; runId: string; cycle: number; seconds: number; held: boolean; endedAtMs: number }
  /** This program was watched through one whole held cycle. */
  | { kind: 'programProven'; sequenceId: string; version: number; fingerprint: string; who: string }
  | {
      kind: 'runEnded';
      runId: string;
      how: 'finished' | 'ended' | 'stopped' | 'faulted' | 'lost control';
      detail: string;
      cyclesDone: number;
      endedAtMs: number;
    }
  | { kind: 'lastSeen'; q: number[]; atMs: number }
  /** For the audit log: an act of a person or of the arm itself. */
  | {
      kind: 'audit';
      userId: string | null;
      who: string;
      act: string;
      detail: string;
      result: string;
      atMs: number;
    };

/** Arm process → web side. Telemetry and state go to every page; `frame` is encoded once. */
export type FromArmProcess =
  | { kind: 'ready' }
  | { kind: 'answer'; socketId: string; id: string; refused: null | { code: string; message: string } }
  | { kind: 'state'; state: StateMessage }
  | { kind: 'telemetry'; telemetry: TelemetryMessage }
  | { kind: 'event'; event: EventMessage; socketId: string | null }
  | { kind: 'record'; record: ArmRecord };
