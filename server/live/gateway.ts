import { randomUUID } from 'node:crypto';
import type { IncomingHttpHeaders, IncomingMessage, Server } from 'node:http';
import type { Duplex } from 'node:stream';
import { type RawData, type WebSocket, WebSocketServer } from 'ws';
import type { ArmModel } from '../../shared/arm/model';
import { type ClientMessage, MAX_MESSAGE_BYTES } from '../../shared/live/client-messages';
import {
  type ChangedMessage,
  type EventMessage,
  LIVE_PROTOCOL,
  type StateMessage,
  type TelemetryMessage,
} from '../../shared/live/server-messages';
import { may, type Role } from '../../shared/team/roles';
import type { ArmAudience, Arms } from '../arms/arms';
import type { Actor, Resolved } from '../control/process-messages';
import { admit } from './admission';
import { Watcher } from './watcher';

export interface LiveSession {
  sessionId: string;
  person: { id: string; name: string; role: Role };
}

/** Looks up what a message needs from the database, or says why it may not be done. */
export type Resolve = (
  armId: string,
  actor: Actor,
  message: ClientMessage,
  others: readonly Actor[],
) => { resolved: Resolved } | { refused: { code: string; message: string } };

export interface GatewayOptions {
  arms: Arms;
  findSession(headers: IncomingHttpHeaders): Promise<LiveSession | null>;
  onSessionEnded(listener: (sessionId: string) => void): void;
  originAllowed(request: IncomingMessage): boolean;
  /** What `hello` says of the arm; null when there is none. */
  describeArm(armId: string): { id: string; revision: number; model: ArmModel } | null;
  resolve: Resolve;
  monotonicMs(): number;
  log: { warn(message: string): void };
}
const LIVE_PATH = /^\/api\/arms\/([A-Za-z0-9_-]{1,64})\/live$/;
const MAX_SOCKETS = 100;
const MAX_SOCKETS_PER_PERSON = 8;
const HEARTBEAT_MS = 10_000;
const REVALIDATE_MS = 30_000;
/** RFC 6455 close codes: policy violation; going away; try again later. */
const CLOSE_POLICY = 1008;
const CLOSE_GOING_AWAY = 1001;

/** The socket side of every arm: who may watch, who may say what, and everybody sees the same. */
export class LiveGateway implements ArmAudience {
  private readonly server = new WebSocketServer({
    noServer: true,
    maxPayload: MAX_MESSAGE_BYTES,
    perMessageDeflate: false,
  });
  private readonly watchers = new Map<string, Watcher>();
  private readonly timers: NodeJS.Timeout[] = [];

  constructor(private readonly options: GatewayOptions) {
    options.arms.setAudience(this);
    options.onSessionEnded((sessionId) => this.endSession(sessionId));
    this.server.on('error', (error) => options.log.warn(`live server: ${error.message}`));
    this.timers.push(setInterval(() => this.heartbeat(), HEARTBEAT_MS).unref());
    this.timers.push(setInterval(() => void this.revalidate(), REVALIDATE_MS).unref());
  }

  attach(http: Server): void {
    http.on('upgrade', (request, socket, head) => {
      // A raw socket that resets before it is a WebSocket must not end the process.
      socket.on('error', () => socket.destroy());
      void this.upgrade(request, socket, head).catch((error: unknown) => {
        this.options.log.warn(`live upgrade: ${String(error)}`);
        refuse(socket, 500);
      });
    });
  }

  private async upgrade(request: IncomingMessage, socket: Duplex, head: Buffer): Promise<void> {
    const path = new URL(request.url ?? '/', 'http://internal').pathname;
    const armId = LIVE_PATH.exec(path)?.[1];
    if (!armId) return refuse(socket, 404);
    if (!this.options.originAllowed(request)) return refuse(socket, 403);
    const session = await this.options.findSession(request.headers);
    if (!session) return refuse(socket, 401);
    if (!may(session.person.role, 'arm.watch')) return refuse(socket, 403);
    const arm = this.options.describeArm(armId);
    if (!arm) return refuse(socket, 404);
    const own = [...this.watchers.values()].filter((w) => w.actor.userId === session.person.id).length;
    if (this.watchers.size >= MAX_SOCKETS || own >= MAX_SOCKETS_PER_PERSON) return refuse(socket, 429);
    this.server.handleUpgrade(request, socket, head, (ws) => {
      const { id: userId, name, role } = session.person;
      const actor: Actor = { userId, name, role, sessionId: session.sessionId, socketId: randomUUID() };
      this.welcome(new Watcher(ws, armId, actor, request.socket.remoteAddress ?? ''), arm, request.headers);
    });
  }

  private readonly headersOf = new WeakMap<Watcher, IncomingHttpHeaders>();

  private welcome(
    watcher: Watcher,
    arm: { id: string; revision: number; model: ArmModel },
    headers: IncomingHttpHeaders,
  ): void {
    const { socket, actor, armId } = watcher;
    this.watchers.set(actor.socketId, watcher);
    this.headersOf.set(watcher, { cookie: headers.cookie });
    socket.on('error', () => socket.terminate());
    socket.on('pong', () => {
      watcher.alive = true;
    });
    socket.on('close', () => {
      this.watchers.delete(actor.socketId);
      this.options.arms.send(armId, { kind: 'socketClosed', socketId: actor.socketId });
    });
    socket.on('message', (data, isBinary) => this.hear(watcher, data, isBinary));
    watcher.send({
      type: 'hello',
      protocol: LIVE_PROTOCOL,
      arm,
      you: {
        userId: actor.userId,
        name: actor.name,
        role: actor.role,
        mayControl: may(actor.role, 'arm.control'),
      },
    });
    const host = this.options.arms.open(armId);
    if (host?.state) watcher.send(host.state);
    if (host?.telemetry) watcher.send(host.telemetry);
  }

  private hear(watcher: Watcher, data: RawData, isBinary: boolean): void {
    const { actor, armId, limits, socket } = watcher;
    const admission = admit(data, isBinary, actor.role, limits, this.options.monotonicMs());
    if (admission.kind === 'hopeless') {
      end(socket, CLOSE_POLICY, 'too many bad messages');
      return;
    }
    if (admission.kind === 'refused') {
      watcher.send({ type: 'refused', ...admission.refusal });
      return;
    }
    const { message } = admission;
    const id = 'id' in message ? message.id : '';
    // Stop waits for no look-up.
    const outcome =
      message.type === 'stop'
        ? { resolved: {} }
        : this.options.resolve(armId, actor, message, this.othersAt(watcher));
    if ('refused' in outcome) {
      watcher.send({ type: 'refused', id, ...outcome.refused });
      return;
    }
    if (!this.options.arms.send(armId, { kind: 'command', actor, message, resolved: outcome.resolved }))
      watcher.send({
        type: 'refused',
        id,
        code: 'armNotRunning',
        message: 'The control process is starting. Try again in a moment.',
      });
  }

  private othersAt(watcher: Watcher): Actor[] {
    return [...this.watchers.values()]
      .filter((w) => w !== watcher && w.armId === watcher.armId)
      .map((w) => w.actor);
  }

  // What the arms say.

  answer(
    _armId: string,
    socketId: string,
    id: string,
    refused: null | { code: string; message: string },
  ): void {
    const watcher = this.watchers.get(socketId);
    if (!watcher || id === '') return;
    watcher.send(refused ? { type: 'refused', id, ...refused } : { type: 'done', id });
  }

  state(armId: string, state: StateMessage): void {
    this.toAll(armId, JSON.stringify(state, toMicro));
  }

  telemetry(armId: string, telemetry: TelemetryMessage): void {
    let text: string | null = null;
    const nowMs = this.options.monotonicMs();
    for (const watcher of this.watchers.values()) {
      if (watcher.armId !== armId) continue;
      text ??= JSON.stringify(telemetry, toMicro);
      if (!watcher.sendTelemetry(text, nowMs)) watcher.socket.terminate();
    }
  }

  event(armId: string, event: EventMessage, socketId: string | null): void {
    if (socketId === null) this.toAll(armId, JSON.stringify(event));
    else this.watchers.get(socketId)?.send(event);
  }

  changed(armId: string, what: ChangedMessage['what']): void {
    this.toAll(armId, JSON.stringify({ type: 'changed', what } satisfies ChangedMessage));
  }

  closed(armId: string, why: 'removed' | 'modelChanged'): void {
    for (const watcher of this.watchers.values())
      if (watcher.armId === armId) end(watcher.socket, CLOSE_GOING_AWAY, why);
  }

  private toAll(armId: string, text: string): void {
    for (const watcher of this.watchers.values()) if (watcher.armId === armId) watcher.sendText(text);
  }

  // Sessions and sockets that end.

  private endSession(sessionId: string): void {
    this.options.arms.sessionEnded(sessionId);
    for (const watcher of this.watchers.values())
      if (watcher.actor.sessionId === sessionId) end(watcher.socket, CLOSE_POLICY, 'signed out');
  }

  /** Sessions also run out by themselves; open sockets notice within REVALIDATE_MS. */
  private async revalidate(): Promise<void> {
    for (const watcher of [...this.watchers.values()]) {
      const session = await this.options.findSession(this.headersOf.get(watcher) ?? {}).catch(() => null);
      if (session?.sessionId !== watcher.actor.sessionId) this.endSession(watcher.actor.sessionId);
    }
  }

  private heartbeat(): void {
    for (const watcher of this.watchers.values()) {
      if (!watcher.alive) {
        watcher.socket.terminate();
        continue;
      }
      watcher.alive = false;
      watcher.socket.ping();
    }
  }

  close(): void {
    for (const timer of this.timers) clearInterval(timer);
    for (const watcher of this.watchers.values()) end(watcher.socket, CLOSE_GOING_AWAY, 'server stops');
    this.server.close();
  }
}

function end(socket: WebSocket, code: number, reason: string): void {
  socket.close(code, reason);
  // A peer that never answers the close must not linger.
  setTimeout(() => socket.terminate(), 500).unref();
}

const STATUS_TEXT: Record<number, string> = {
  401: 'Unauthorized',
  403: 'Forbidden',
  404: 'Not Found',
  429: 'Too Many Requests',
  500: 'Internal Server Error',
};

function refuse(socket: Duplex, status: number): void {
  if (socket.destroyed) return;
  socket.end(`HTTP/1.1 ${status} ${STATUS_TEXT[status]}\r\nConnection: close\r\nContent-Length: 0\r\n\r\n`);
}

/** Six decimals (µm, µrad) are beyond what any such arm can honour and keep frames short. */
function toMicro(_key: string, value: unknown): unknown {
  return typeof value === 'number' && !Number.isInteger(value) ? Math.round(value * 1e6) / 1e6 : value;
}
