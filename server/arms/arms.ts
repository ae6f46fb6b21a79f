import type { ChildProcess } from 'node:child_process';
import type { ArmModel } from '../../shared/arm/model';
import type {
  ChangedMessage,
  EventMessage,
  StateMessage,
  TelemetryMessage,
} from '../../shared/live/server-messages';
import type { ArmRecord, ToArmProcess, TrustMemory } from '../control/process-messages';
import { ArmHost } from './arm-host';
import type { ArmsService } from './arms-service';

/** What the pages that watch an arm are told; the live gateway is the one subscriber in the product. */
export interface ArmAudience {
  answer(
    armId: string,
    socketId: string,
    id: string,
    refused: null | { code: string; message: string },
  ): void;
  state(armId: string, state: StateMessage): void;
  telemetry(armId: string, telemetry: TelemetryMessage): void;
  event(armId: string, event: EventMessage, socketId: string | null): void;
  changed(armId: string, what: ChangedMessage['what']): void;
  /** The arm is gone, or its model changed so much that pages must start over. */
  closed(armId: string, why: 'removed' | 'modelChanged'): void;
}

export interface ArmsOptions {
  /** Null when there is no such arm. */
  loadArm(armId: string): { model: ArmModel; unattended: boolean; lastSeen: TrustMemory | null } | null;
  fork(armId: string): ChildProcess;
  keepRecord(armId: string, record: ArmRecord): void;
  wallMs(): number;
  log: { warn(message: string): void };
}

/** All arms whose process runs. A process starts when the first page looks at its arm and then stays. */
export class Arms implements ArmsService {
  private readonly hosts = new Map<string, ArmHost>();
  private audience: ArmAudience | null = null;

  constructor(private readonly options: ArmsOptions) {}

  setAudience(audience: ArmAudience): void {
    this.audience = audience;
  }

  /** Returns null when there is no such arm. */
  open(armId: string): ArmHost | null {
    const running = this.hosts.get(armId);
    if (running) return running;
    const arm = this.options.loadArm(armId);
    if (!arm) return null;
    const host = new ArmHost({
      armId,
      ...arm,
      seed: seedFrom(armId),
      fork: () => this.options.fork(armId),
      wallMs: this.options.wallMs,
      log: this.options.log,
      listener: {
        answer: (socketId, id, refused) => this.audience?.answer(armId, socketId, id, refused),
        state: (state) => this.audience?.state(armId, state),
        telemetry: (telemetry) => this.audience?.telemetry(armId, telemetry),
        event: (event, socketId) => this.audience?.event(armId, event, socketId),
        record: (record) => this.keep(armId, record),
      },
    });
    this.hosts.set(armId, host);
    return host;
  }

  private keep(armId: string, record: ArmRecord): void {
    try {
      this.options.keepRecord(armId, record);
    } catch (error) {
      this.options.log.warn(`a record of ${armId} could not be kept: ${String(error)}`);
      this.audience?.event(
        armId,
        {
          type: 'event',
          atMs: this.options.wallMs(),
          level: 'fault',
          code: 'recordNotKept',
          message: 'What the arm just did could not be written down. Check the disk of the server.',
        },
        null,
      );
      return;
    }
    if (record.kind === 'runStarted' || record.kind === 'runCycle' || record.kind === 'runEnded')
      this.audience?.changed(armId, 'runs');
    if (record.kind === 'programProven') this.audience?.changed(armId, 'sequences');
  }

  /** Returns whether an arm process was there to hear it. */
  send(armId: string, message: ToArmProcess): boolean {
    return this.hosts.get(armId)?.send(message) ?? false;
  }

  snapshot(armId: string): { state: StateMessage; telemetry: TelemetryMessage } | null {
    const host = this.hosts.get(armId);
    return host?.state && host.telemetry ? { state: host.state, telemetry: host.telemetry } : null;
  }

  stop(armId: string, by: string): void {
    this.send(armId, { kind: 'stop', by });
  }

  stopAll(by: string): void {
    for (const host of this.hosts.values()) host.send({ kind: 'stop', by });
  }

  sessionEnded(sessionId: string): void {
    for (const host of this.hosts.values()) host.send({ kind: 'sessionEnded', sessionId });
  }

  changed(armId: string, what: ChangedMessage['what']): void {
    this.audience?.changed(armId, what);
  }

  settingsChanged(armId: string): void {
    const arm = this.options.loadArm(armId);
    if (arm) this.hosts.get(armId)?.setUnattended(arm.unattended);
  }

  /** The new model is a new arm to the process: it starts afresh, resting, position unknown. */
  modelChanged(armId: string): void {
    this.drop(armId, 'modelChanged');
  }

  removed(armId: string): void {
    this.drop(armId, 'removed');
  }

  private drop(armId: string, why: 'removed' | 'modelChanged'): void {
    const host = this.hosts.get(armId);
    if (!host) return;
    this.hosts.delete(armId);
    void host.close();
    this.audience?.closed(armId, why);
  }

  async close(): Promise<void> {
    await Promise.all([...this.hosts.values()].map((host) => host.close()));
    this.hosts.clear();
  }
}

/** The simulated arm's small peculiarities stay the same from start to start: its seed is its name. */
function seedFrom(armId: string): number {
  let seed = 7;
  for (const letter of armId) seed = (Math.imul(seed, 31) + letter.charCodeAt(0)) | 0;
  return seed;
}
