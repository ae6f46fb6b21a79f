import type { DriveTruth } from '../../firmware-sim/drive-truth';
import { step } from '../../server/control/controller';
import type { Actor, Resolved } from '../../server/control/process-messages';
import { stateMessage, telemetryMessage } from '../../server/control/snapshot';
import { type Controller, createController, type Incoming, type Outputs } from '../../server/control/state';
import { BuiltInLink } from '../../server/links/built-in-link';
import type { ArmModel } from '../../shared/arm/model';
import type { ClientMessage } from '../../shared/live/client-messages';
import type { StateMessage, TelemetryMessage } from '../../shared/live/server-messages';
import type { Role } from '../../shared/team/roles';

export const TICK_S = 0.01;

/** Leaves the id out of each message of a union. */
type WithoutId<M> = M extends { id: string } ? Omit<M, 'id'> : M;

export function actor(name: string, role: Role = 'operator', socket = `${name}-1`): Actor {
  return { userId: `u-${name}`, name, role, sessionId: `s-${name}`, socketId: socket };
}

/** A controller and the built-in arm, stepped by hand: no clock but the ticks. */
export class Rig {
  readonly controller: Controller;
  readonly link: BuiltInLink;
  nowS = 100;
  outputs!: Outputs;
  /** Everything that was sent to the board, newest last. */
  readonly setpoints: { t: number; q: number[] }[] = [];
  readonly records: Outputs['records'] = [];
  readonly events: Outputs['events'] = [];
  linkClosed = false;
  /** Sees every tick after it happened. */
  onTick: ((rig: Rig) => void) | null = null;
  private incoming: Incoming[] = [];
  private nextId = 1;

  constructor(
    readonly model: ArmModel,
    options: {
      seed?: number;
      /** Per joint, how the simulated arm differs from its model. */
      truths?: readonly DriveTruth[];
      /** The same for motor strength alone. */
      strength?: readonly number[];
      unattended?: boolean;
    } = {},
  ) {
    this.link = new BuiltInLink({
      model,
      seed: options.seed ?? 1,
      truths: options.truths ?? options.strength?.map((strength) => ({ strength })),
      tickS: TICK_S,
    });
    this.controller = createController(model, {
      linkKind: 'builtIn',
      unattended: options.unattended ?? false,
      lastSeen: null,
      nowS: this.nowS,
      wallMs: 0,
    });
    this.tick();
  }

  queue(incoming: Incoming): void {
    this.incoming.push(incoming);
  }

  /** Queues a message and returns its id. */
  post(who: Actor, message: WithoutId<ClientMessage>, resolved: Resolved = {}): string {
    const id = `m${this.nextId++}`;
    this.queue({ kind: 'command', actor: who, message: { ...message, id } as ClientMessage, resolved });
    return id;
  }

  /** Sends a message, ticks once, and returns the refusal or null. */
  send(
    who: Actor,
    message: WithoutId<ClientMessage>,
    resolved: Resolved = {},
  ): { code: string; message: string } | null {
    const id = this.post(who, message, resolved);
    this.tick();
    const answer = this.outputs.answers.find((a) => a.id === id);
    return answer ? answer.refused : null;
  }

  tick(count = 1): void {
    for (let k = 0; k < count; k++) {
      this.nowS += TICK_S;
      this.link.advance(TICK_S);
      const incoming = this.incoming;
      this.incoming = [];
      this.outputs = step(
        this.controller,
        {
          nowS: this.nowS,
          wallMs: Math.round(this.nowS * 1000),
          incoming,
          sample: this.linkClosed ? null : this.link.latestSample(),
          linkClosed: this.linkClosed,
          answerMs: this.link.answerMs(),
          lead: this.link.lead(),
        },
        TICK_S,
      );
      for (const order of this.outputs.orders) this.link.order(order);
      if (this.outputs.linkStop) this.link.stop();
      const { setpoint } = this.outputs;
      if (setpoint) {
        this.setpoints.push({ t: this.nowS, q: Array.from(setpoint.q) });
        if (this.outputs.replace) this.link.replaceFrom(setpoint);
        else this.link.send(setpoint);
      }
      this.records.push(...this.outputs.records);
      this.events.push(...this.outputs.events);
      this.onTick?.(this);
    }
  }

  get state(): StateMessage {
    return stateMessage(this.controller.arm, this.controller.state);
  }

  get telemetry(): TelemetryMessage {
    return telemetryMessage(this.controller.arm, this.controller.state);
  }

  /** Takes control and energises everything, servos where they really stand. */
  energise(who: Actor): void {
    this.send(who, { type: 'control.take' });
    const truth = this.link.board.sample().truth;
    const servoAngles = this.model.joints.flatMap((joint, i) =>
      joint.drive.kind === 'servo' ? [{ joint: i, q: truth[i]! }] : [],
    );
    this.send(who, { type: 'motors.energise', turn: this.state.turn, servoAngles, cautionsRead: true });
    this.tick(300);
  }

  /** Declares the joints where they really are, or at `q` when they have been put there. */
  declare(who: Actor, q?: number[]): void {
    this.send(who, { type: 'trust.declare', turn: this.state.turn, q: q ?? this.link.board.sample().truth });
    this.tick();
  }

  /** Holds for `ticks` with a keep every 50 ms, then ends the hold; returns the refusal of the start. */
  hold(
    who: Actor,
    motion: Extract<ClientMessage, { type: 'hold.start' }>['motion'],
    ticks: number,
    resolved: Resolved = {},
  ): { code: string; message: string } | null {
    const holdId = `h${this.nextId++}`;
    const refused = this.send(who, { type: 'hold.start', turn: this.state.turn, holdId, motion }, resolved);
    if (refused) return refused;
    for (let k = 1; k < ticks; k++) {
      if (k % 5 === 0)
        this.queue({
          kind: 'command',
          actor: who,
          message: { type: 'hold.keep', holdId, seq: k, seenT: this.nowS },
          resolved: {},
        });
      this.tick();
    }
    this.send(who, { type: 'hold.end', holdId });
    return null;
  }

  /** Ticks until the arm is at rest, at most `seconds`. */
  settle(seconds = 20): void {
    for (let k = 0; k < seconds / TICK_S; k++) {
      this.tick();
      if (this.state.motors !== 'moving' && this.state.motors !== 'stopping') return;
    }
    throw new Error('the arm does not come to rest');
  }
}
