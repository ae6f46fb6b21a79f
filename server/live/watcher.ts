import type { WebSocket } from 'ws';
import type { ServerMessage } from '../../shared/live/server-messages';
import type { Actor } from '../control/process-messages';
import { RateLimits } from './rate-limits';

/** Above this a socket misses telemetry; it gets the newest sample once it has caught up. */
const SKIP_TELEMETRY_BYTES = 256 * 1024;
/** Above this, or behind for this long, a socket is ended: it would only ever show the past. */
const END_BYTES = 1024 * 1024;
const END_AFTER_BEHIND_MS = 5000;

/** One page that watches one arm: a socket, whose it is, and how far it lags. */
export class Watcher {
  readonly limits = new RateLimits();
  /** Answered the last heartbeat ping. */
  alive = true;
  private behindSinceMs: number | null = null;

  constructor(
    readonly socket: WebSocket,
    readonly armId: string,
    readonly actor: Actor,
    readonly address: string,
  ) {}

  send(message: ServerMessage): void {
    this.sendText(JSON.stringify(message));
  }

  /** State, events and answers are never left out. */
  sendText(text: string): void {
    if (this.socket.readyState === this.socket.OPEN) this.socket.send(text);
  }

  /** Returns false when the socket is too far behind to be worth keeping. */
  sendTelemetry(text: string, nowMs: number): boolean {
    if (this.socket.readyState !== this.socket.OPEN) return true;
    const waiting = this.socket.bufferedAmount + text.length;
    if (waiting <= SKIP_TELEMETRY_BYTES) {
      this.behindSinceMs = null;
      this.socket.send(text);
      return true;
    }
    this.behindSinceMs ??= nowMs;
    return waiting <= END_BYTES && nowMs - this.behindSinceMs <= END_AFTER_BEHIND_MS;
  }
}
