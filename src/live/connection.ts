import type { ClientMessage } from '../../shared/live/client-messages';
import { ServerMessage, type TelemetryMessage } from '../../shared/live/server-messages';
import { emptyLive, setTelemetry, useLiveStore } from './live-store';

/** Outcome of a command. */
export type Outcome = { ok: true } | { ok: false; code: string; message: string };

type WithoutId<M> = M extends { id: string; turn: number }
  ? Omit<M, 'id' | 'turn'>
  : M extends { id: string }
    ? Omit<M, 'id'>
    : never;
/** A message as the page writes it: the id, and the turn where one is needed, are filled in here. */
export type Command = WithoutId<ClientMessage>;

const NEEDS_NO_TURN = new Set(['control.take', 'control.answer', 'stop', 'trust.doubt']);
const RETRY_MS = [300, 1000, 2000, 4000];
/** A command that nobody answers is given up. */
const ANSWER_MS = 3000;
/** This old the newest sample makes the connection count as lost. */
const STALE_MS = 1000;
const STOP_ANSWER_MS = 300;
const MOST_EVENTS = 30;

/**
 * The page's one socket to an arm, outside React. It reconnects by itself but never sends again what was not
 * answered: nothing that moves may be resumed by a reconnect.
 */
class ArmConnection {
  private socket: WebSocket | null = null;
  private armId: string | null = null;
  private retries = 0;
  private retryTimer: number | undefined;
  private watchTimer: number | undefined;
  private readonly waiting = new Map<string, (outcome: Outcome) => void>();
  private readonly changedListeners = new Set<(what: string) => void>();
  private nextId = 1;

  open(armId: string): void {
    if (this.armId === armId) return;
    this.close();
    this.armId = armId;
    useLiveStore.setState({ armId, ...emptyLive });
    this.connect();
    this.watchTimer = window.setInterval(() => this.watch(), 200);
  }

  close(): void {
    this.armId = null;
    window.clearTimeout(this.retryTimer);
    window.clearInterval(this.watchTimer);
    const { socket } = this;
    this.socket = null;
    socket?.close();
    this.giveUpAll('The connection was closed.');
    setTelemetry(null);
    useLiveStore.setState({ armId: null, ...emptyLive });
  }

  private connect(): void {
    const { armId } = this;
    if (!armId) return;
    const scheme = location.protocol === 'https:' ? 'wss' : 'ws';
    const socket = new WebSocket(`${scheme}://${location.host}/api/arms/${armId}/live`);
    this.socket = socket;
    socket.onopen = () => {
      this.retries = 0;
    };
    socket.onmessage = (event: MessageEvent<string>) => {
      if (this.socket === socket) this.hear(event.data);
    };
    socket.onclose = () => {
      if (this.socket === socket) this.lost();
    };
  }

  private lost(): void {
    this.socket = null;
    useLiveStore.setState({ connection: 'lost' });
    this.giveUpAll('The connection was lost; this order was not confirmed.');
    const wait = RETRY_MS[Math.min(this.retries, RETRY_MS.length - 1)];
    this.retries++;
    this.retryTimer = window.setTimeout(() => this.connect(), wait);
  }

  private hear(text: string): void {
    const raw = JSON.parse(text) as { type?: string };
    // Fifty times a second and from our own server: telemetry is not picked apart.
    if (raw.type === 'telemetry') {
      const store = useLiveStore.getState();
      setTelemetry(raw as TelemetryMessage);
      const telemetryAtMs = performance.now();
      if (store.connection !== 'live') useLiveStore.setState({ connection: 'live', telemetryAtMs });
      else store.telemetryAtMs = telemetryAtMs;
      return;
    }
    const message = ServerMessage.parse(raw);
    switch (message.type) {
      case 'hello':
        useLiveStore.setState({ hello: message });
        return;
      case 'state':
        this.takeState(message);
        return;
      case 'event':
        useLiveStore.setState((s) => ({ events: [message, ...s.events].slice(0, MOST_EVENTS) }));
        return;
      case 'done':
        this.settle(message.id, { ok: true });
        return;
      case 'refused':
        this.settle(message.id, { ok: false, code: message.code, message: message.message });
        return;
      case 'changed':
        for (const listener of this.changedListeners) listener(message.what);
        return;
    }
  }

  private takeState(state: Extract<ServerMessage, { type: 'state' }>): void {
    useLiveStore.setState((s) => ({
      state,
      stop:
        state.stop?.acknowledged && (s.stop === 'sent' || s.stop === 'noAnswer') ? 'acknowledged' : s.stop,
    }));
  }

  /** Data that stopped coming is old, whatever the socket says. */
  private watch(): void {
    const { connection, telemetryAtMs } = useLiveStore.getState();
    if (connection === 'live' && performance.now() - telemetryAtMs > STALE_MS)
      useLiveStore.setState({ connection: 'lost' });
  }

  get isOpen(): boolean {
    return this.socket?.readyState === WebSocket.OPEN;
  }

  /** Sends a command and waits for its answer. Never queued: while there is no connection it is refused here. */
  send(command: Command): Promise<Outcome> {
    const id = `${this.nextId++}`;
    const turn = useLiveStore.getState().state?.turn ?? 0;
    const withTurn = NEEDS_NO_TURN.has(command.type) ? command : { ...command, turn };
    if (!this.post({ ...withTurn, id }))
      return Promise.resolve({
        ok: false,
        code: 'noConnection',
        message: 'No connection to the server, so nothing was sent.',
      });
    return new Promise((resolve) => {
      const timer = window.setTimeout(
        () => this.settle(id, { ok: false, code: 'noAnswer', message: 'The arm did not answer in time.' }),
        ANSWER_MS,
      );
      this.waiting.set(id, (outcome) => {
        window.clearTimeout(timer);
        resolve(outcome);
      });
    });
  }

  /** Sends without waiting; holds do this. Returns whether it could be sent. */
  post(message: object): boolean {
    if (!this.isOpen) return false;
    this.socket?.send(JSON.stringify(message));
    return true;
  }

  private settle(id: string, outcome: Outcome): void {
    const waiting = this.waiting.get(id);
    this.waiting.delete(id);
    waiting?.(outcome);
  }

  private giveUpAll(message: string): void {
    for (const id of [...this.waiting.keys()]) this.settle(id, { ok: false, code: 'noConnection', message });
  }

  onChanged(listener: (what: string) => void): () => void {
    this.changedListeners.add(listener);
    return () => this.changedListeners.delete(listener);
  }
}

export const connection = new ArmConnection();

export const sendCommand = (command: Command): Promise<Outcome> => connection.send(command);

/**
 * Stops the arm: over the socket and, as a second way, over HTTP at the same time. Anybody may, any time.
 * Without an answer within 300 ms the page asks for the supply switch.
 */
export function pressStop(): void {
  const { armId } = useLiveStore.getState();
  useLiveStore.setState({ stop: 'sent' });
  const answered = () => useLiveStore.setState({ stop: 'acknowledged' });
  const late = window.setTimeout(() => {
    if (useLiveStore.getState().stop === 'sent') useLiveStore.setState({ stop: 'noAnswer' });
  }, STOP_ANSWER_MS);
  void connection.send({ type: 'stop' }).then((outcome) => {
    if (!outcome.ok) return;
    window.clearTimeout(late);
    answered();
  });
  if (armId)
    void fetch(`/api/arms/${armId}/stop`, {
      method: 'POST',
      headers: { 'Content-Type': 'application/json' },
      body: '{}',
      keepalive: true,
    }).catch(() => undefined);
}

/** The other motion may be pressed again: Stop shows ready. */
export function readyStop(): void {
  if (useLiveStore.getState().stop !== 'sent') useLiveStore.setState({ stop: 'ready' });
}
