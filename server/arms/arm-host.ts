import type { ChildProcess } from 'node:child_process';
import type { ArmModel } from '../../shared/arm/model';
import type { EventMessage, StateMessage, TelemetryMessage } from '../../shared/live/server-messages';
import type { ArmRecord, FromArmProcess, ToArmProcess, TrustMemory } from '../control/process-messages';

/** What the web side hears of one arm. Called in the order in which things happened. */
export interface ArmListener {
  answer(socketId: string, id: string, refused: null | { code: string; message: string }): void;
  state(state: StateMessage): void;
  telemetry(telemetry: TelemetryMessage): void;
  event(event: EventMessage, socketId: string | null): void;
  record(record: ArmRecord): void;
}

export interface ArmHostOptions {
  armId: string;
  model: ArmModel;
  seed: number;
  unattended: boolean;
  lastSeen: TrustMemory | null;
  /** Starts the child; a test may start a fake. */
  fork: () => ChildProcess;
  listener: ArmListener;
  wallMs: () => number;
  log: { warn(message: string): void };
}

/** Waits before starting a dead arm process again, ms; the last one repeats. */
const RESTART_WAITS_MS = [200, 1000, 5000];
/** An arm process that lived this long counts as healthy again. */
const HEALTHY_AFTER_MS = 30_000;

/**
 * One arm's process, watched: started, restarted when it dies, spoken to. A restarted process begins
 * resting with its position unknown; nothing that was under way is resumed.
 */
export class ArmHost {
  state: StateMessage | null = null;
  telemetry: TelemetryMessage | null = null;
  private child: ChildProcess | null = null;
  private restartTimer: NodeJS.Timeout | null = null;
  private startedAtMs = 0;
  private deaths = 0;
  private closing = false;
  /** The process id, for tests that kill it. */
  get pid(): number | undefined {
    return this.child?.pid;
  }

  constructor(private readonly options: ArmHostOptions) {
    this.start();
  }

  private start(): void {
    const { armId, model, seed, unattended, lastSeen } = this.options;
    const child = this.options.fork();
    this.child = child;
    this.startedAtMs = this.options.wallMs();
    child.on('message', (message) => this.hear(message as FromArmProcess));
    child.on('error', (error) => this.complain(error));
    child.on('exit', (code, signal) => this.died(child, signal ?? `exit code ${code}`));
    this.send({
      kind: 'open',
      armId,
      model,
      seed,
      unattended,
      trustMemory: this.telemetry ? { q: this.telemetry.q, atMs: this.startedAtMs } : lastSeen,
    });
  }

  /** Returns whether there was a process to tell. */
  send(message: ToArmProcess): boolean {
    const child = this.child;
    if (!child?.connected) return false;
    child.send(message, (error) => {
      if (error) this.complain(error);
    });
    return true;
  }

  /** That a message found the process gone is no news: its end is told by `died`. */
  private complain(error: Error & { code?: string }): void {
    if (error.code === 'EPIPE' || error.code === 'ERR_IPC_CHANNEL_CLOSED') return;
    this.options.log.warn(`arm process of ${this.options.model.name}: ${error.message}`);
  }

  setUnattended(unattended: boolean): void {
    this.options.unattended = unattended;
    this.send({ kind: 'settings', unattended });
  }

  private hear(message: FromArmProcess): void {
    const { listener } = this.options;
    switch (message.kind) {
      case 'ready':
        break;
      case 'answer':
        listener.answer(message.socketId, message.id, message.refused);
        break;
      case 'state':
        this.state = message.state;
        listener.state(message.state);
        break;
      case 'telemetry':
        this.telemetry = message.telemetry;
        listener.telemetry(message.telemetry);
        break;
      case 'event':
        listener.event(message.event, message.socketId);
        break;
      case 'record':
        listener.record(message.record);
        break;
    }
  }

  private died(child: ChildProcess, how: string): void {
    if (this.child !== child) return;
    this.child = null;
    if (this.closing) return;
    const atMs = this.options.wallMs();
    this.deaths = atMs - this.startedAtMs > HEALTHY_AFTER_MS ? 1 : this.deaths + 1;
    const name = this.options.model.name;
    this.options.log.warn(`arm process of ${name} ended (${how}); starting it again`);
    this.reportDeath(atMs);
    const wait = RESTART_WAITS_MS[Math.min(this.deaths, RESTART_WAITS_MS.length) - 1] ?? 0;
    this.restartTimer = setTimeout(() => {
      this.restartTimer = null;
      this.start();
    }, wait);
  }

  /** Tells the pages at once, and closes a run that nobody will finish. */
  private reportDeath(atMs: number): void {
    const { listener, model } = this.options;
    const before = this.state;
    if (before) {
      if (before.run)
        listener.record({
          kind: 'runEnded',
          runId: before.run.runId,
          how: 'faulted',
          detail: 'The control process ended.',
          cyclesDone: before.run.cycle - 1,
          endedAtMs: atMs,
        });
      this.state = {
        ...before,
        link: { ...before.link, state: 'restarting', answerMs: null },
        motors: 'resting',
        motorsSinceMs: atMs,
        energised: before.energised.map(() => false),
        trust: before.trust.map(() => 'unknown' as const),
        trustNote: 'The control process ended; nobody watched the arm meanwhile.',
        trustSinceMs: atMs,
        control: null,
        hold: null,
        run: null,
      };
      listener.state(this.state);
    }
    listener.event(
      {
        type: 'event',
        atMs,
        level: 'fault',
        code: 'armProcessEnded',
        message: `The control process of ${model.name} ended, and the arm with it. It comes back resting, position unknown. Look at the arm, then energise and declare.`,
      },
      null,
    );
  }

  /** Ends the process for good; resolves when it is gone. */
  async close(): Promise<void> {
    this.closing = true;
    if (this.restartTimer) clearTimeout(this.restartTimer);
    const child = this.child;
    if (!child || child.exitCode !== null || child.signalCode !== null) return;
    const gone = new Promise<void>((resolve) => child.once('exit', () => resolve()));
    this.send({ kind: 'shutDown' });
    const force = setTimeout(() => child.kill('SIGKILL'), 2000);
    await gone;
    clearTimeout(force);
  }
}
