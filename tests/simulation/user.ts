import type { Actor, Resolved } from '../../server/control/process-messages';
import type { Outputs } from '../../server/control/state';
import type { ArmModel } from '../../shared/arm/model';
import {
  type ClientMessage,
  type HoldMotion,
  NUDGE_ANGLES,
  NUDGE_LENGTHS,
  TOOL_AXES,
} from '../../shared/live/client-messages';
import type { Role } from '../../shared/team/roles';
import { TICK_S } from '../support/rig';
import { Hand } from './hand';
import { Wire } from './network';
import { randomProgram } from './random-program';
import type { View } from './users';

/** How often people do what is nobody's plan, per second. */
const STOPS_PER_S = 1 / 90;
const SOCKETS_LOST_PER_S = 1 / 150;
const SESSIONS_ENDED_PER_S = 1 / 500;
/** A page is away for at most this long, s: sometimes longer than control waits. */
const LONGEST_AWAY_S = 15;
/** Somebody who has nothing to do looks up again after at most this long, s. */
const LONGEST_PAUSE_S = 2.5;
/** How far a go-to leads at most, as a share of a joint's range. */
/** How often a press is for the tool and not for a joint. */
const TOOL_SHARE = 0.35;
const GO_TO_SHARE = 0.25;

type WithoutId<M> = M extends { id: string } ? Omit<M, 'id'> : never;
/** Chance weights of what to do next. */
type Choices = readonly (readonly [weight: number, act: () => unknown])[];

/** Somebody at a page: does what the page offers, often too early, too late or twice. */
export class User {
  actor: Actor;
  readonly wire: Wire;
  private readonly hand: Hand;
  private view!: View;
  private tick = 0;
  private nextActTick = 0;
  private awayUntil = 0;
  private logins = 0;
  private sockets = 0;
  private messages = 0;
  private careful = false;
  /** The last search for a switch, and the joint whose switch turned out to be closed already. */
  private searched: { id: string; joint: number } | null = null;
  private closed: number | null = null;

  constructor(
    private readonly model: ArmModel,
    private readonly name: string,
    readonly role: Role,
    private readonly random: () => number,
    private readonly others: () => Actor[],
  ) {
    this.wire = new Wire(random);
    this.actor = this.signIn();
    this.hand = new Hand(this.wire, random);
  }

  /** @param mood - careful people reference first; exposed ones lose sockets, stop and quarrel */
  live(tick: number, view: View, mood: { careful: boolean; exposed: boolean }): void {
    this.tick = tick;
    this.view = view;
    this.careful = mood.careful;
    if (tick < this.awayUntil) return;
    if (tick === this.awayUntil) this.comeBack();
    if (mood.exposed && this.mishap()) return;
    this.hand.keep(tick, view.nowS, this.actor);
    if (tick < this.nextActTick) return;
    this.nextActTick = tick + 1 + Math.floor((this.random() * LONGEST_PAUSE_S) / TICK_S);
    if (this.role !== 'observer') this.act();
  }

  hear(answers: Outputs['answers']): void {
    for (const { id, refused } of answers) {
      if (refused) this.hand.refused(id);
      if (refused?.code === 'switchClosed' && this.searched?.id === id) this.closed = this.searched.joint;
    }
  }

  private mishap(): boolean {
    if (this.chance(STOPS_PER_S)) this.send({ type: 'stop' });
    const signedOut = this.chance(SESSIONS_ENDED_PER_S);
    if (!signedOut && !this.chance(SOCKETS_LOST_PER_S)) return false;
    this.wire.cut();
    if (signedOut) {
      this.wire.post(this.tick, { kind: 'sessionEnded', sessionId: this.actor.sessionId });
      this.logins++;
    }
    this.wire.post(this.tick, { kind: 'socketClosed', socketId: this.actor.socketId });
    this.hand.drop();
    this.awayUntil = this.tick + 1 + Math.floor((this.random() * LONGEST_AWAY_S) / TICK_S);
    return true;
  }

  private chance(perSecond: number): boolean {
    return this.random() < perSecond * TICK_S;
  }

  private signIn(): Actor {
    const { name, role } = this;
    this.sockets++;
    return {
      userId: `u-${name}`,
      name,
      role,
      sessionId: `s-${name}-${this.logins}`,
      socketId: `${name}-${this.sockets}`,
    };
  }

  private comeBack(): void {
    this.actor = this.signIn();
    if (this.role !== 'observer' && this.random() < 0.7) this.send({ type: 'control.take' });
  }

  private act(): unknown {
    const { page } = this.view;
    if (!page.control) return this.send({ type: 'control.take' });
    if (page.control.userId !== this.actor.userId) return this.interfere();
    if (this.random() < 0.03) return this.otherTab();
    if (page.control.request && this.random() < 0.6)
      return this.send({ type: 'control.answer', accept: this.random() < 0.5 });
    if (page.fault && this.random() < 0.7) return this.send({ type: 'fault.acknowledge', turn: this.turn });
    if (page.motors === 'resting' || (page.energised.includes(false) && page.motors === 'standing'))
      return this.energise();
    if (this.hand.busy) return this.whileHolding();
    if (page.run) return this.choose(this.duringRun());
    const known = page.trust.every((t) => t === 'declared' || t === 'referenced');
    const next = this.nextToReference();
    if (this.closed !== null) return this.leaveSwitch(this.closed);
    if (this.careful && next !== null && this.random() < 0.9) return this.reference(next);
    this.choose(known ? this.withPosition() : this.withoutPosition());
  }

  /** Somebody else has control. */
  private interfere(): unknown {
    return this.choose([
      [60, () => {}],
      [8, () => this.send({ type: 'control.take' })],
      [1, () => this.send({ type: 'control.take', force: this.role === 'owner' })],
      [0.7, () => this.doubt()],
      [0.3, () => this.motorsOff()],
      // What the page would not offer: the arm has to refuse it.
      [3, () => this.jog()],
      [1, () => this.goTo()],
      [1, () => this.send({ type: 'ceiling.set', turn: this.turn, fraction: 1 })],
      [1, () => this.send({ type: 'run.end', turn: this.turn })],
    ]);
  }

  /** The same person in a second tab takes over, or sends what belongs to the first. */
  private otherTab(): void {
    const { holdId } = this.hand;
    const before = this.actor;
    this.actor = this.signIn();
    if (holdId && this.random() < 0.5) {
      const message = { type: 'hold.keep', holdId, seq: 1e6, seenT: this.view.nowS } as const;
      this.wire.post(this.tick, { kind: 'command', actor: this.actor, message, resolved: {} });
      this.actor = before;
    } else {
      this.hand.drop();
      this.send({ type: 'control.take' });
    }
  }

  private whileHolding(): void {
    this.choose([
      [5, () => {}],
      [2, () => this.setCeiling()],
      [1, () => this.jog()],
      [0.5, () => this.nudge()],
      [0.3, () => this.send({ type: 'control.handBack', turn: this.turn })],
      [0.3, () => this.send({ type: 'run.pause', turn: this.turn })],
      [0.2, () => this.doubt()],
    ]);
  }

  private withoutPosition(): Choices {
    return [
      [10, () => this.jog()],
      [4, () => this.nudge()],
      [10, () => this.declare()],
      [1, () => this.reference(this.joint())],
      [1, () => this.goTo()],
      [1, () => this.startRun()],
      [1, () => this.setCeiling()],
    ];
  }

  private withPosition(): Choices {
    return [
      [14, () => this.jog()],
      [10, () => this.nudge()],
      [18, () => this.goTo()],
      [14, () => this.startRun()],
      [10, () => this.setCeiling()],
      [4, () => this.send({ type: 'gripper.set', turn: this.turn, opening: this.random() })],
      [1, () => this.reference(this.joint())],
      [1, () => this.declare()],
      [0.4, () => this.doubt()],
      [0.4, () => this.motorsOff()],
      [0.7, () => this.send({ type: 'control.handBack', turn: this.turn })],
      [0.7, () => this.handOver()],
      [0.5, () => this.energise()],
    ];
  }

  private duringRun(): Choices {
    const run = this.view.page.run!;
    const forward = {
      heldWaiting: () => this.holdRun(),
      heldRunning: () => {},
      countdown: () => {},
      running: () => {},
      pausing: () => this.send({ type: 'run.resume', turn: this.turn }),
      paused: () => this.send({ type: 'run.resume', turn: this.turn }),
      stepWaiting: () => this.send({ type: 'run.step', turn: this.turn }),
    } as const;
    return [
      [12, forward[run.phase]],
      [2, () => this.setCeiling()],
      [1.5, () => this.send({ type: 'run.pause', turn: this.turn })],
      [0.7, () => this.send({ type: 'run.end', turn: this.turn })],
      [0.5, () => this.send({ type: 'run.step', turn: this.turn })],
      [0.4, () => this.energise()],
      [0.3, () => this.declare()],
      [0.2, () => this.doubt()],
      [0.2, () => this.motorsOff()],
      [0.3, () => this.jog()],
      [0.3, () => this.handOver()],
      [0.3, () => this.startRun()],
      [0.5, () => this.send({ type: 'gripper.set', turn: this.turn, opening: this.random() })],
    ];
  }

  private jog(): void {
    const direction = this.random() < 0.5 ? 1 : -1;
    if (this.random() < TOOL_SHARE) return void this.hold({ kind: 'jog', ...this.toolAxis(), direction });
    this.hold({ kind: 'jog', frame: 'joint', axis: this.joint(), direction });
  }

  private toolAxis() {
    const frame = this.random() < 0.5 ? ('base' as const) : ('tool' as const);
    return { frame, axis: TOOL_AXES[Math.floor(this.random() * TOOL_AXES.length)]! };
  }

  private nudge(): void {
    if (this.random() < TOOL_SHARE) {
      const way = this.toolAxis();
      const sizes = way.axis.length === 2 ? NUDGE_ANGLES : NUDGE_LENGTHS;
      const size = sizes[Math.floor(this.random() * sizes.length)]!;
      const amount = this.random() < 0.5 ? size : -size;
      this.send({ type: 'nudge', turn: this.turn, ...way, amount, ...this.seen() });
      return;
    }
    const axis = this.joint();
    const sizes = this.model.joints[axis]!.type === 'revolute' ? NUDGE_ANGLES : NUDGE_LENGTHS;
    const size = this.random() < 0.1 ? this.random() : sizes[Math.floor(this.random() * sizes.length)]!;
    const amount = this.random() < 0.5 ? size : -size;
    this.send({ type: 'nudge', turn: this.turn, frame: 'joint', axis, amount, ...this.seen() });
  }

  private goTo(): void {
    const q = this.somewhere();
    if (this.random() < 0.5) this.hold({ kind: 'joints', q });
    else {
      const pose = { id: 'p', name: 'Somewhere', q, gripper: null };
      this.hold({ kind: 'pose', poseId: 'p' }, this.random() < 0.95 ? { pose } : {});
    }
  }

  private somewhere(): number[] {
    const far = this.random() < 0.2 ? 1 : GO_TO_SHARE * this.random();
    return this.model.joints.map(({ limits: { lower, upper } }, j) => {
      const beyond = this.random() < 0.01 ? 0.3 : 0;
      const q = this.view.q[j]! + far * (2 * this.random() - 1) * (upper - lower);
      return Math.min(upper + beyond, Math.max(lower - beyond, q));
    });
  }

  private startRun(): void {
    const id = `${this.name}-${this.messages}`;
    const program = randomProgram(this.model, this.random, id, () => this.somewhere());
    const from = this.random() < 0.2 ? program.steps[Math.floor(this.random() * program.steps.length)] : null;
    this.send(
      {
        type: 'run.start',
        turn: this.turn,
        sequenceId: program.sequenceId,
        cycles: this.random() < 0.2 ? null : 1 + Math.floor(this.random() * 4),
        ...(from ? { fromStep: from.stepId } : {}),
        single: this.random() < 0.25,
      },
      { program },
    );
  }

  private holdRun(): void {
    this.hold({ kind: 'run' });
  }

  private reference(joint: number): void {
    const id = this.hold({ kind: 'reference', joint }, {}, this.careful ? 60 : 6);
    this.searched = { id, joint };
  }

  private leaveSwitch(joint: number): void {
    const { drive } = this.model.joints[joint]!;
    const towards =
      drive.kind === 'stepper' && drive.reference.kind === 'switch' ? drive.reference.direction : 1;
    this.closed = null;
    this.hold({ kind: 'jog', frame: 'joint', axis: joint, direction: towards === 1 ? -1 : 1 });
  }

  private nextToReference(): number | null {
    const { trust } = this.view.page;
    return this.model.referenceOrder.find((j) => trust[j] !== 'referenced') ?? null;
  }

  private setCeiling(): void {
    const fraction = [0.05, 0.25, 1, 1, 0.05 + 0.95 * this.random()][Math.floor(this.random() * 5)]!;
    this.send({ type: 'ceiling.set', turn: this.turn, fraction, peopleClear: this.random() < 0.3 });
  }

  private energise(): void {
    const { truth } = this.view;
    const servoAngles = this.model.joints.flatMap(({ drive, hardRange }, joint) => {
      if (drive.kind !== 'servo') return [];
      const guess = truth[joint]! + 0.04 * (this.random() - 0.5);
      return [{ joint, q: Math.min(hardRange.upper, Math.max(hardRange.lower, guess)) }];
    });
    const some = this.random() < 0.1 ? { joints: [this.joint()] } : {};
    this.send({ type: 'motors.energise', turn: this.turn, servoAngles, cautionsRead: true, ...some });
  }

  private declare(): void {
    const { truth } = this.view;
    const wrong = this.random() < 0.15 ? 0.3 : 0.01;
    const q = truth.map((value, j) => {
      const { lower, upper } = this.model.joints[j]!.hardRange;
      return Math.min(upper, Math.max(lower, value + wrong * (this.random() - 0.5)));
    });
    const some = this.random() < 0.1 ? { joints: [this.joint()] } : {};
    this.send({ type: 'trust.declare', turn: this.turn, q, ...some });
  }

  private doubt(): void {
    this.send({ type: 'trust.doubt', joints: [this.joint()], reason: 'pushed by hand' });
  }

  private motorsOff(): void {
    const { wouldDrop } = this.view.page;
    this.send({
      type: 'motors.off',
      turn: this.turn,
      dropsAccepted: this.random() < 0.9 ? [...wouldDrop] : [],
    });
  }

  private handOver(): void {
    const others = this.others();
    const person = others[Math.floor(this.random() * others.length)]!;
    const resolved = this.random() < 0.9 ? { person } : {};
    this.send({ type: 'control.handOver', turn: this.turn, toUserId: person.userId }, resolved);
  }

  private hold(motion: HoldMotion, resolved: Resolved = {}, longestS = 6): string {
    const seconds = longestS * (motion.kind === 'reference' && this.careful ? 1 : this.random() ** 2);
    const steady = this.careful && motion.kind === 'reference';
    const holdId = `${this.name}-h${this.messages}`;
    const message = { type: 'hold.start', turn: this.turn, holdId, motion, ...this.seen() } as const;
    const id = this.send(message, resolved);
    this.hand.press(id, holdId, this.tick, seconds, steady);
    return id;
  }

  /** The turn that the page shows; now and then one from before. */
  private get turn(): number {
    const { turn } = this.view.page;
    return this.random() < 0.02 ? Math.max(0, turn - 1 - Math.floor(this.random() * 3)) : turn;
  }

  /** What the order says it has seen: mostly now, sometimes nothing, sometimes long ago. */
  private seen(): { seenT?: number } {
    if (this.random() < 0.3) return {};
    return { seenT: this.view.nowS - (this.random() < 0.03 ? 1 : 0.04) * this.random() };
  }

  private joint(): number {
    return Math.floor(this.random() * this.model.joints.length);
  }

  private choose(choices: Choices): unknown {
    let left = this.random() * choices.reduce((sum, [weight]) => sum + weight, 0);
    for (const [weight, act] of choices) {
      left -= weight;
      if (left < 0) return act();
    }
  }

  private send(message: WithoutId<ClientMessage>, resolved: Resolved = {}): string {
    const id = `${this.name}-m${this.messages++}`;
    const whole = { ...message, id } as ClientMessage;
    this.wire.post(this.tick, { kind: 'command', actor: this.actor, message: whole, resolved });
    return id;
  }
}
