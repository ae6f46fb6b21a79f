import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import WebSocket from 'ws';
import type { DemoSignIn } from '../../server/demo';
import { type RunningServer, startServer } from '../../server/server';
import { readSettings } from '../../server/settings';
import type { Role } from '../../shared/team/roles';

export interface Reply {
  status: number;
  body: unknown;
  headers: Headers;
}

/** The real server on a port of its own, with its own data folder. */
export class TestServer {
  private constructor(
    readonly server: RunningServer,
    readonly folder: string,
  ) {}

  static async start(
    options: {
      demo?: boolean;
      folder?: string;
      signInLimit?: { perAddress: number; perAccount: number };
    } = {},
  ): Promise<TestServer> {
    const folder = options.folder ?? mkdtempSync(join(tmpdir(), 'elbowroom-'));
    const settings = readSettings(
      { PORT: '0', ELBOWROOM_DATA: folder },
      options.demo === false ? [] : ['--demo'],
    );
    const server = await startServer(settings, {
      signInLimit: options.signInLimit ?? { perAddress: 10_000, perAccount: 10_000 },
    });
    return new TestServer(server, folder);
  }

  get url(): string {
    return this.server.url;
  }

  async close(keepFolder = false): Promise<void> {
    await this.server.close();
    if (!keepFolder) rmSync(this.folder, { recursive: true, force: true });
  }

  /** Any request, exactly as told: no header is added. */
  async raw(method: string, path: string, init: RequestInit = {}): Promise<Reply> {
    const response = await fetch(`${this.url}${path}`, { method, redirect: 'manual', ...init });
    const text = await response.text();
    let body: unknown = text;
    try {
      body = JSON.parse(text);
    } catch {
      // Files and pages are text.
    }
    return { status: response.status, body, headers: response.headers };
  }

  /** A request as our own page makes it. */
  call(method: string, path: string, options: { cookie?: string; body?: unknown } = {}): Promise<Reply> {
    return this.raw(method, `/api${path}`, {
      headers: {
        Origin: this.url,
        ...(options.cookie ? { Cookie: options.cookie } : {}),
        ...(options.body !== undefined ? { 'Content-Type': 'application/json' } : {}),
      },
      body: options.body === undefined ? undefined : JSON.stringify(options.body),
    });
  }

  signIns(): DemoSignIn[] {
    return JSON.parse(readFileSync(join(this.folder, 'demo-sign-ins.json'), 'utf8')) as DemoSignIn[];
  }

  /** Signs a demo person in and returns the cookie. */
  async signIn(role: Role): Promise<string> {
    const { email, password } = this.signIns().find((s) => s.role === role)!;
    const reply = await this.call('POST', '/session', { body: { email, password } });
    if (reply.status !== 200) throw new Error(`sign-in of the ${role} answered ${reply.status}`);
    return reply.headers.get('set-cookie')!.split(';')[0]!;
  }

  arm(name: string): string {
    return this.server.context.arms.list().find((arm) => arm.name === name)!.id;
  }

  socket(armId: string, headers: Record<string, string>): LiveSocket {
    return new LiveSocket(`${this.url.replace('http', 'ws')}/api/arms/${armId}/live`, headers);
  }

  /** The socket of our own page, open and greeted. */
  async open(armId: string, cookie: string): Promise<LiveSocket> {
    const socket = this.socket(armId, { Cookie: cookie, Origin: this.url });
    await socket.until((m) => m.type === 'state' && (m.link as { state: string }).state === 'steady');
    return socket;
  }
}

type Message = { type: string; [field: string]: unknown };

/** A raw socket of a page: what came in, and ways to wait for something without sleeping. */
export class LiveSocket {
  readonly socket: WebSocket;
  readonly messages: Message[] = [];
  state: Message | null = null;
  telemetry: Message | null = null;
  /** HTTP status when the upgrade was refused; close code and reason when closed. */
  refusedWith: number | null = null;
  closed: { code: number; reason: string } | null = null;
  private readonly waiters = new Set<() => void>();
  private nextId = 1;

  constructor(url: string, headers: Record<string, string>) {
    this.socket = new WebSocket(url, { headers });
    this.socket.on('message', (data) => {
      const message = JSON.parse(String(data)) as Message;
      if (message.type === 'telemetry') this.telemetry = message;
      else this.messages.push(message);
      if (message.type === 'state') this.state = message;
      this.wake();
    });
    this.socket.on('unexpected-response', (_request, response) => {
      this.refusedWith = response.statusCode ?? 0;
      this.wake();
    });
    this.socket.on('close', (code, reason) => {
      this.closed = { code, reason: String(reason) };
      this.wake();
    });
    this.socket.on('error', () => this.wake());
  }

  private wake(): void {
    for (const waiter of [...this.waiters]) waiter();
  }

  /** Resolves when `condition` holds, looked at after every message. */
  when(condition: () => boolean, timeoutMs = 15_000): Promise<void> {
    if (condition()) return Promise.resolve();
    return new Promise((resolve, reject) => {
      const timer = setTimeout(() => {
        this.waiters.delete(look);
        reject(new Error(`not in ${timeoutMs} ms: ${condition}; last state ${JSON.stringify(this.state)}`));
      }, timeoutMs);
      const look = () => {
        if (!condition()) return;
        clearTimeout(timer);
        this.waiters.delete(look);
        resolve();
      };
      this.waiters.add(look);
    });
  }

  async until(wanted: (message: Message) => boolean, timeoutMs?: number): Promise<Message> {
    await this.when(() => this.messages.some(wanted), timeoutMs);
    return this.messages.find(wanted)!;
  }

  post(message: object): void {
    this.socket.send(JSON.stringify(message));
  }

  /** Sends a command with an id and waits for its answer: null for done, else the refusal. */
  async command(message: object): Promise<{ code: string; message: string } | null> {
    const id = `t${this.nextId++}`;
    this.post({ id, ...message });
    const answer = await this.until((m) => (m.type === 'done' || m.type === 'refused') && m.id === id);
    return answer.type === 'done' ? null : { code: String(answer.code), message: String(answer.message) };
  }

  get turn(): number {
    return Number(this.state?.turn ?? 0);
  }

  private list(field: string): unknown[] {
    return (this.state?.[field] ?? []) as unknown[];
  }

  /** Takes control, energises everything where it really stands, and declares it. */
  async bringUp(): Promise<void> {
    await this.command({ type: 'control.take' });
    await this.when(() => (this.state?.control ?? null) !== null);
    await this.when(() => this.telemetry !== null);
    const model = (
      this.messages.find((m) => m.type === 'hello')!.arm as {
        model: { joints: { drive: { kind: string } }[] };
      }
    ).model;
    const truth = this.telemetry!.truth as number[];
    const refused = await this.command({
      type: 'motors.energise',
      turn: this.turn,
      servoAngles: model.joints.flatMap((j, i) =>
        j.drive.kind === 'servo' ? [{ joint: i, q: truth[i]! }] : [],
      ),
      cautionsRead: true,
    });
    if (refused) throw new Error(refused.message);
    await this.when(() => this.state?.motors === 'standing' && this.list('energised').every(Boolean));
    const no = await this.command({ type: 'trust.declare', turn: this.turn, q: this.telemetry!.truth });
    if (no) throw new Error(no.message);
    await this.when(() => this.list('trust').every((t) => t === 'declared' || t === 'referenced'));
  }

  close(): void {
    this.socket.terminate();
  }
}
