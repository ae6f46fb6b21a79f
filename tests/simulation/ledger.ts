import type { Actor, Resolved } from '../../server/control/process-messages';
import type { Incoming, Outputs } from '../../server/control/state';
import type { ArmModel } from '../../shared/arm/model';
import type { ClientMessage, HoldMotion } from '../../shared/live/client-messages';
import type { StateMessage } from '../../shared/live/server-messages';
import type { Program } from '../../shared/sequence/program';
import { type Cause, CONTROL_WAIT_S, COUNTDOWN_S, CREEP, EASY, HOLD_EXPIRY_S, KEEP_AGE_S } from './rules';

/** Ticks by which the ledger's clock and the arm's may differ where one counts down and the other compares. */
const CLOCK_TICKS = 2;
/** A step of a program is done where the arm rests this near to it, rad or m. */
const ARRIVED = 1e-6;

type Answers = Outputs['answers'];
type Commanded = Extract<ClientMessage, { id: string }>;

/** What the ledger is shown at the end of a tick. */
export interface Shown {
  t: number;
  /** The set-point that reached the board, or the board's count where none did. */
  q: readonly number[];
  /** The board was told anew where a joint stands. */
  recounted: boolean;
  energised: readonly boolean[];
  linkSteady: boolean;
  /** The page's state message. */
  page: StateMessage;
  records: Outputs['records'];
}

interface HoldEntry {
  holdId: string;
  socketId: string;
  motion: HoldMotion;
  from: readonly number[];
  lastSeq: number;
  sinceS: number;
  lastKeepS: number;
  moved: boolean;
}

interface RunEntry {
  userId: string;
  program: Program;
  single: boolean;
  /** Whether the first, held cycle has been seen from start to end. */
  proven: boolean;
  /** Index of the next goTo among the program's; a cycle that began in the middle proves nothing. */
  next: number;
  whole: boolean;
  paused: boolean;
  /** Unheld motion is allowed from here on; null while it has to be held. */
  goAtS: number | null;
  stepAllowed: boolean;
}

/**
 * Works out, from the messages that really arrived and whether they were answered done or refused, who has
 * control and what may move the arm. It never looks into the controller; of the page's state it takes only
 * what makes things stricter (faults, lost trust, a run that is over) and the turn, which has to agree.
 */
export class Ledger {
  personCeiling = CREEP;
  peopleClear = false;
  turn = 0;
  private control: { actor: Actor; awaySinceS: number | null } | null = null;
  private request: { actor: Actor; dueS: number } | null = null;
  private hold: HoldEntry | null = null;
  private nudge: { joint: number | null; amount: number; from: readonly number[]; moved: boolean } | null =
    null;
  private run: RunEntry | null = null;
  private unattended = false;
  private mayBeEnergised: boolean[];
  private q: readonly number[];
  private known = false;
  private cause: Cause = { kind: 'none', since: 0 };

  constructor(
    private readonly model: ArmModel,
    private readonly dt: number,
    private readonly object: (detail: string) => void,
  ) {
    this.mayBeEnergised = model.joints.map(() => false);
    this.q = model.joints.map(() => 0);
  }

  /** Takes in what was delivered in this tick and says what may move the arm in it. */
  settle(delivered: readonly Incoming[], answers: Answers, shown: Shown): Cause {
    for (const incoming of delivered) this.take(incoming, answers, shown);
    this.passTime(shown);
    this.finish(shown);
    // First what ends everything: then control may pass on in the same tick.
    this.restrict(shown);
    this.compare(shown);
    this.followRun(shown);
    this.q = [...shown.q];
    return this.decide(shown.t);
  }

  /** The simulation itself restarted the board: its drivers are off. */
  boardRestarted(): void {
    this.mayBeEnergised.fill(false);
  }

  /** The ceiling that holds, with what the page shows of trust. */
  ceiling(trust: StateMessage['trust']): number {
    const most = trust.every((t) => t === 'referenced') ? 1 : isKnown(trust) ? EASY : CREEP;
    return Math.min(this.personCeiling, most);
  }

  private take(incoming: Incoming, answers: Answers, shown: Shown): void {
    if (incoming.kind === 'settings') this.unattended = incoming.unattended;
    else if (incoming.kind === 'stop') this.dropAll();
    else if (incoming.kind === 'socketClosed') this.socketClosed(incoming.socketId, shown.t);
    else if (incoming.kind === 'sessionEnded') this.sessionEnded(incoming.sessionId);
    else if (!('id' in incoming.message)) this.takeKeep(incoming.actor, incoming.message, shown.t);
    else {
      const { message, actor, resolved } = incoming;
      const answer = answers.find((a) => a.id === message.id);
      if (!answer) this.object(`${message.type} was not answered`);
      else if (answer.refused === null) this.takeDone(actor, message, resolved, shown);
      else if (message.type === 'stop') this.object('a stop was refused');
    }
  }

  private takeKeep(
    actor: Actor,
    message: Extract<ClientMessage, { type: 'hold.keep' | 'hold.end' }>,
    t: number,
  ): void {
    const { hold } = this;
    if (hold?.holdId !== message.holdId || hold.socketId !== actor.socketId) return;
    if (message.type === 'hold.end') this.hold = null;
    else if (message.seq > hold.lastSeq && isFresh(message.seenT, t)) {
      hold.lastSeq = message.seq;
      hold.lastKeepS = t;
    }
  }

  private takeDone(actor: Actor, message: Commanded, resolved: Resolved, shown: Shown): void {
    if ('turn' in message && message.type !== 'motors.off') this.checkAuthority(actor, message);
    switch (message.type) {
      case 'stop':
        return this.dropAll();
      case 'control.take':
        return this.taken(actor, message.force ?? false, shown.t);
      case 'control.answer':
        if (this.request && message.accept) this.request.dueS = shown.t;
        else this.request = null;
        return;
      case 'control.handBack':
        return this.giveUp();
      case 'control.handOver':
        return resolved.person ? this.grant(resolved.person) : this.object('control went to nobody');
      case 'motors.energise':
        for (const j of message.joints ?? this.model.joints.keys()) this.mayBeEnergised[j] = true;
        return;
      case 'motors.off':
        this.mayBeEnergised.fill(false);
        return this.dropAll();
      case 'trust.doubt':
        this.hold = null;
        this.nudge = null;
        return;
      case 'ceiling.set':
        this.personCeiling = message.fraction;
        this.peopleClear = message.peopleClear ?? false;
        return;
      case 'hold.start':
        return this.holdStarted(actor, message, shown);
      case 'nudge':
        this.nudged(message, shown);
        return;
      case 'run.start':
        this.checkReady(message.type, shown);
        if (resolved.program) this.runStarted(actor, message, resolved.program, shown.t);
        return;
      case 'run.pause':
        if (this.run) this.run.paused = true;
        if (this.hold?.motion.kind === 'run') this.hold = null;
        return;
      case 'run.resume':
        if (!this.run?.paused) return this.object('a run was resumed that was not paused');
        if (this.run.userId !== actor.userId) this.object("somebody else's run was resumed");
        this.run.paused = false;
        this.run.stepAllowed = true;
        this.run.goAtS = this.run.proven ? this.countdownEnds(shown.t) : null;
        return;
      case 'run.step':
        if (this.run) this.run.stepAllowed = true;
        return;
      case 'run.end':
        return this.dropRun();
    }
  }

  /** Every act but a few is for whoever has control, in the present turn. */
  private checkAuthority(actor: Actor, message: Commanded & { turn: number }): void {
    if (this.control?.actor.socketId !== actor.socketId)
      this.object(`${message.type} of ${actor.socketId} was done without control`);
    else if (message.turn !== this.turn) this.object(`${message.type} of an earlier turn was done`);
  }

  /** What a motion needs besides control. */
  private checkReady(what: string, shown: Shown, joint: number | null = null, seenT = shown.t): void {
    if (!shown.linkSteady) this.object(`${what} was done without a link`);
    if (!powered(shown, joint)) this.object(`${what} was done while joints rest`);
    if (!isFresh(seenT, shown.t)) this.object(`${what} was done though it came late`);
    if (this.run && what !== 'hold of run') this.object(`${what} was done during a run`);
  }

  private holdStarted(
    actor: Actor,
    message: Extract<ClientMessage, { type: 'hold.start' }>,
    shown: Shown,
  ): void {
    const { holdId, motion } = message;
    this.checkReady(`hold of ${motion.kind}`, shown, jointOf(motion), message.seenT);
    if ((motion.kind === 'pose' || motion.kind === 'joints') && !isKnown(shown.page.trust))
      this.object(`hold of ${motion.kind} was done with the position unknown`);
    if (motion.kind === 'jog' && jointOf(motion) === null && !isKnown(shown.page.trust))
      this.object('the tool was jogged with the position unknown');
    if (motion.kind === 'run' && (!this.run || this.run.paused || this.run.proven))
      this.object('a run was held that does not wait for it');
    this.nudge = null;
    this.hold = {
      holdId,
      socketId: actor.socketId,
      motion,
      from: this.q,
      lastSeq: -1,
      sinceS: shown.t,
      lastKeepS: shown.t,
      moved: false,
    };
  }

  /** Of a joint, or of the tool, which needs all joints and their places. */
  private nudged(message: Extract<ClientMessage, { type: 'nudge' }>, shown: Shown): void {
    const joint = typeof message.axis === 'number' ? message.axis : null;
    this.checkReady(message.type, shown, joint, message.seenT);
    if (joint === null && !isKnown(shown.page.trust))
      this.object('the tool was nudged with the position unknown');
    this.nudge = { joint, amount: message.amount, from: this.q, moved: false };
  }

  private runStarted(
    actor: Actor,
    message: Extract<ClientMessage, { type: 'run.start' }>,
    program: Program,
    t: number,
  ) {
    const from = message.fromStep ? program.steps.findIndex((s) => s.stepId === message.fromStep) : 0;
    const before = stopsOf(program, message.single ?? false, from).length;
    this.run = {
      userId: actor.userId,
      program,
      single: message.single ?? false,
      proven: program.proven,
      next: before,
      whole: from === 0,
      paused: false,
      goAtS: program.proven ? this.countdownEnds(t) : null,
      stepAllowed: true,
    };
  }

  private countdownEnds(t: number): number {
    return t + COUNTDOWN_S - CLOCK_TICKS * this.dt;
  }

  private taken(actor: Actor, force: boolean, t: number): void {
    const { control } = this;
    if (!control) this.grant(actor);
    else if (control.actor.sessionId === actor.sessionId) {
      if (control.actor.socketId === actor.socketId) return;
      if (control.awaySinceS === null) return this.grant(actor);
      this.control = { actor, awaySinceS: null };
      if (!this.run) this.slowAgain();
    } else {
      if (force) this.dropAll();
      this.request = { actor, dueS: force ? t : t + CONTROL_WAIT_S };
    }
  }

  private grant(actor: Actor): void {
    if (this.run?.userId !== actor.userId) this.dropRun();
    this.changeHands();
    this.control = { actor, awaySinceS: null };
  }

  private giveUp(): void {
    this.changeHands();
    this.control = null;
  }

  private changeHands(): void {
    this.turn++;
    this.request = null;
    this.hold = null;
    this.slowAgain();
  }

  /** Whoever comes to the controls begins at creep. */
  private slowAgain(): void {
    this.nudge = null;
    this.personCeiling = CREEP;
    this.peopleClear = false;
  }

  private socketClosed(socketId: string, t: number): void {
    if (this.request?.actor.socketId === socketId) this.request = null;
    if (this.control?.actor.socketId !== socketId) return;
    this.hold = null;
    this.control.awaySinceS ??= t;
  }

  private sessionEnded(sessionId: string): void {
    if (this.request?.actor.sessionId === sessionId) this.request = null;
    if (this.control?.actor.sessionId !== sessionId) return;
    this.dropAll();
    this.giveUp();
  }

  private dropAll(): void {
    this.dropRun();
    this.hold = null;
    this.nudge = null;
  }

  private dropRun(): void {
    this.run = null;
    if (this.hold?.motion.kind === 'run') this.hold = null;
  }

  private passTime({ t }: Shown): void {
    if (this.hold && t - this.hold.lastKeepS >= HOLD_EXPIRY_S) this.hold = null;
    if (this.stayedAway(t) && !this.unattended && this.run) this.run.paused = true;
  }

  private stayedAway(t: number): boolean {
    const since = this.control?.awaySinceS ?? null;
    return since !== null && t - since >= CONTROL_WAIT_S - this.dt / 2;
  }

  /** Control changes hands only for a reason: a request that came due, or a holder that stayed away. */
  private compare(shown: Shown): void {
    const { t, page } = shown;
    if (page.turn === this.turn + 1) {
      if (!this.rests(shown)) this.object('control changed hands while the arm moved');
      if (this.current(t)) this.object('control changed hands while something moves the arm');
      if (page.control === null) {
        if (!this.stayedAway(t)) this.object('control was taken away for no reason');
        this.giveUp();
      } else if (this.request && (t >= this.request.dueS || this.stayedAway(t))) {
        this.grant(this.request.actor);
      } else this.object('control was given for no reason');
    }
    if (page.turn !== this.turn) {
      this.object(`the page shows turn ${page.turn}, by the messages it is ${this.turn}`);
      this.turn = page.turn;
    }
    if ((page.control?.userId ?? null) !== (this.control?.actor.userId ?? null))
      this.object(`the page shows ${page.control?.name ?? 'nobody'} in control`);
  }

  /** What the page shows may only take permission away. */
  private restrict(shown: Shown): void {
    const { energised, linkSteady, page } = shown;
    for (const [j, on] of energised.entries())
      if (on && !this.mayBeEnergised[j]) this.object(`joint ${j} is energised though nobody asked`);
    const known = isKnown(page.trust);
    if (page.fault !== null || !linkSteady || !energised.some(Boolean)) this.dropAll();
    if (!page.run || !known || !powered(shown, null)) this.dropRun();
    if (this.hold && !powered(shown, jointOf(this.hold.motion))) this.hold = null;
    if (this.nudge && !powered(shown, this.nudge.joint)) this.nudge = null;
    // What was begun with the position known ends with it; a search for the switch gives it up by itself.
    // In the tick of a doubt a joint may be held that was not held before it.
    const begun = this.hold?.sinceS !== shown.t;
    if (this.known && !known && begun && this.hold?.motion.kind !== 'reference') {
      this.hold = null;
      this.nudge = null;
    }
    this.known = known;
  }

  /** Follows a run by where the arm comes to rest. */
  private followRun(shown: Shown): void {
    const { q, records } = shown;
    const { run } = this;
    if (!run) return;
    // A run may always pause by itself, for instance where no straight way leads to its next pose.
    if (shown.page.run?.phase === 'paused') run.paused = true;
    const stops = stopsOf(run.program, run.single);
    const there = (i: number) => stops[i]!.q.every((value, j) => Math.abs(value - q[j]!) < ARRIVED);
    while (this.rests(shown) && run.next < stops.length && there(run.next)) {
      run.next++;
      if (run.proven && run.single) run.stepAllowed = false;
    }
    if (!records.some((r) => r.kind === 'runCycle')) return;
    if (run.next < stops.length) this.object('a cycle counts as done that was not');
    if (!run.proven && this.hold?.motion.kind === 'run') this.hold = null;
    if (records.some((r) => r.kind === 'programProven')) {
      if (run.proven || !run.whole) this.object('a program counts as watched that was not');
      run.proven = true;
      run.paused = true;
    }
    run.next = 0;
    run.whole = true;
  }

  private rests({ q, recounted }: Shown): boolean {
    return recounted || q.every((value, j) => value === this.q[j]);
  }

  /** A nudge, and a hold that is for one way, are over when the arm rests again. */
  private finish(shown: Shown): void {
    const still = this.rests(shown);
    for (const act of [this.nudge, this.hold]) if (act && !still) act.moved = true;
    if (!still) return;
    if (this.nudge?.moved) this.nudge = null;
    if (this.hold?.moved && this.hold.motion.kind !== 'run') this.hold = null;
  }

  private decide(t: number): Cause {
    const now = this.current(t);
    if (now) this.cause = now;
    else if (this.cause.kind !== 'none') this.cause = { kind: 'none', since: t };
    return this.cause;
  }

  private current(t: number): Cause | null {
    const { hold, nudge, run } = this;
    if (hold && hold.motion.kind !== 'run') {
      const { motion, from } = hold;
      return { kind: 'hold', motion: motion.kind, joint: jointOf(motion), from };
    }
    if (nudge) return { kind: 'nudge', joint: nudge.joint, amount: nudge.amount, from: nudge.from };
    if (!run || run.paused) return null;
    const curved = run.program.steps.some((s) => s.kind === 'goTo' && (s.straight || s.blend > 0));
    if (!run.proven) return hold ? { kind: 'run', curved } : null;
    const counted = run.goAtS !== null && t >= run.goAtS;
    return counted && run.stepAllowed ? { kind: 'run', curved } : null;
  }
}

/** The steps at whose pose the arm stands; those it goes through without standing are left out. */
function stopsOf({ steps }: Program, single: boolean, upTo = steps.length) {
  return steps.slice(0, upTo).flatMap((step, i) => {
    if (step.kind !== 'goTo') return [];
    const through = step.blend > 0 && step.settle === 0 && steps[i + 1]?.kind === 'goTo';
    return through && !single ? [] : [step];
  });
}

function isFresh(seenT: number, t: number): boolean {
  return Math.abs(t - seenT) <= KEEP_AGE_S;
}

function isKnown(trust: StateMessage['trust']): boolean {
  return trust.every((t) => t === 'declared' || t === 'referenced');
}

function jointOf(motion: HoldMotion): number | null {
  if (motion.kind === 'reference') return motion.joint;
  return motion.kind === 'jog' && typeof motion.axis === 'number' ? motion.axis : null;
}

/** Whether what has to move is energised: one joint, or all of them. */
function powered({ energised }: Shown, joint: number | null): boolean {
  return joint === null ? energised.every(Boolean) : (energised[joint] ?? false);
}
