import { setPriority } from 'node:os';
import { BuiltInLink } from '../links/built-in-link';
import type { ArmLink } from './arm-link';
import { step } from './controller';
import { isMoving } from './moves';
import type { FromArmProcess, ToArmProcess } from './process-messages';
import { stateMessage, telemetryMessage } from './snapshot';
import { type Controller, createController, type Incoming, type Outputs } from './state';
import { warmUp } from './warm-up';

/** One arm's process: the 100 Hz loop around the pure controller, its link, and the web side over IPC. */
const TICK_S = 0.01;
const TICK_MS = TICK_S * 1000;
/** After this much lateness the missed ticks are skipped, never run in a burst. */
const SKIP_AFTER_MS = 30;
/** Telemetry goes out every second tick: 50 Hz. */
const TELEMETRY_TICKS = 2;
/** The position is remembered this often, to be drawn "as last seen" after a restart. */
const LAST_SEEN_TICKS = 500;
/** When the web side is gone the arm gets this long to ramp down before the process ends, ms. */
const FAREWELL_MS = 1500;

const monotonicS = (): number => performance.now() / 1000;

function say(message: FromArmProcess): void {
  if (process.connected) process.send?.(message);
}

class ArmProcess {
  private readonly controller: Controller;
  private readonly link: ArmLink;
  private incoming: Incoming[] = [];
  private ticks = 0;
  private linkClosed = false;
  private lastState = '';
  private deadlineMs = performance.now() + TICK_MS;

  constructor(open: Extract<ToArmProcess, { kind: 'open' }>) {
    this.link = new BuiltInLink({ model: open.model, seed: open.seed, tickS: TICK_S });
    this.link.onClosed(() => {
      this.linkClosed = true;
    });
    this.controller = createController(open.model, {
      linkKind: this.link.kind,
      unattended: open.unattended,
      lastSeen: open.trustMemory?.q ?? null,
      nowS: monotonicS(),
      wallMs: Date.now(),
    });
    warmUp(open.model);
    this.deadlineMs = performance.now() + TICK_MS;
    say({ kind: 'ready' });
    this.schedule();
  }

  hear(message: Incoming): void {
    this.incoming.push(message);
  }

  /** Nobody listens any more: ramp down, then leave. */
  farewell(): void {
    this.hear({ kind: 'stop', by: 'The server' });
    const untilMs = performance.now() + FAREWELL_MS;
    const leave = () => {
      if (isMoving(this.controller.state) && performance.now() < untilMs) setTimeout(leave, TICK_MS);
      else process.exit(0);
    };
    setTimeout(leave, 2 * TICK_MS);
  }

  /** Absolute deadlines, so that lateness never adds up. */
  private schedule(): void {
    setTimeout(() => this.tick(), Math.max(0, this.deadlineMs - performance.now()));
  }

  private tick(): void {
    const nowMs = performance.now();
    this.deadlineMs += TICK_MS;
    if (nowMs - this.deadlineMs > SKIP_AFTER_MS) this.deadlineMs = nowMs + TICK_MS;
    this.link.advance(TICK_S);
    const incoming = this.incoming;
    this.incoming = [];
    const outputs = step(
      this.controller,
      {
        nowS: nowMs / 1000,
        wallMs: Date.now(),
        incoming,
        sample: this.link.latestSample(),
        linkClosed: this.linkClosed,
        answerMs: this.link.answerMs(),
        lead: this.link.lead(),
      },
      TICK_S,
    );
    this.toLink(outputs);
    this.toWeb(outputs);
    this.ticks++;
    this.schedule();
  }

  private toLink(outputs: Outputs): void {
    for (const order of outputs.orders) this.link.order(order);
    if (outputs.linkStop) this.link.stop();
    if (!outputs.setpoint) return;
    if (outputs.replace) this.link.replaceFrom(outputs.setpoint);
    else this.link.send(outputs.setpoint);
  }

  private toWeb(outputs: Outputs): void {
    for (const { socketId, id, refused } of outputs.answers) say({ kind: 'answer', socketId, id, refused });
    for (const { event, socketId } of outputs.events) say({ kind: 'event', event, socketId });
    for (const record of outputs.records) say({ kind: 'record', record });
    const { arm, state } = this.controller;
    if (this.ticks % TELEMETRY_TICKS === 0) {
      const next = stateMessage(arm, state);
      const text = JSON.stringify({ ...next, t: 0 });
      if (text !== this.lastState) {
        this.lastState = text;
        say({ kind: 'state', state: next });
      }
      say({ kind: 'telemetry', telemetry: telemetryMessage(arm, state) });
    }
    if (this.ticks % LAST_SEEN_TICKS === LAST_SEEN_TICKS - 1)
      say({ kind: 'record', record: { kind: 'lastSeen', q: [...state.q], atMs: state.wallMs } });
  }
}

let running: ArmProcess | null = null;

process.on('message', (message: ToArmProcess) => {
  if (message.kind === 'open') running ??= new ArmProcess(message);
  else if (message.kind === 'shutDown') running ? running.farewell() : process.exit(0);
  else running?.hear(message);
});
process.on('disconnect', () => (running ? running.farewell() : process.exit(0)));
// The terminal's Ctrl-C reaches the whole group; the web side decides when an arm process ends.
process.on('SIGINT', () => {});

try {
  // A tick should not wait for a page being built. Not everybody may raise a priority.
  setPriority(-5);
} catch {
  // The default priority serves.
}
