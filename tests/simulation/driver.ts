import type { Incoming } from '../../server/control/state';
import type { ArmModel } from '../../shared/arm/model';
import { seededRandom } from '../../shared/kinematics';
import type { StateMessage, TelemetryMessage } from '../../shared/live/server-messages';
import { Rig, TICK_S } from '../support/rig';
import { MotionChecker } from './checker';
import { Ledger } from './ledger';
import type { Plant } from './plants';
import { Users } from './users';

/** How often things outside everybody's doing happen, per second of simulated time. */
const BOARD_RESTARTS_PER_S = 1 / 600;
const LINK_LOSSES_PER_S = 1 / 200;
/** A lost link comes back after at most this long, s. */
const LONGEST_LINK_LOSS_S = 2;
/** Real motors are this much weaker or stronger than the model says. */
const STRENGTH_SPREAD = 0.3;

/** One arm, its people and everything that can go wrong, from a seed; watched by the checker every tick. */
export class Simulation {
  readonly checker: MotionChecker;
  commands = 0;
  /** How often each command got which answer: what the random use really tried. */
  readonly tried = new Map<string, number>();
  private readonly rig: Rig;
  private readonly ledger: Ledger;
  private readonly users: Users;
  private readonly random: () => number;
  private page: StateMessage;
  private telemetry: TelemetryMessage;
  private reached: readonly number[] | null = null;
  private lastReached: readonly number[][] = [];
  private recounted = false;
  private linkBackTick = 0;
  private tick = 0;

  constructor(
    private readonly model: ArmModel,
    seed: number,
    private readonly plant: Plant = {},
  ) {
    this.random = seededRandom(seed);
    this.checker = new MotionChecker(model, TICK_S);
    this.ledger = new Ledger(model, TICK_S, (detail) =>
      this.checker.object('conditions', this.rig.nowS, detail),
    );
    this.rig = new Rig(plant.model?.(model) ?? model, {
      seed: Math.floor(this.random() * 2 ** 31),
      strength: model.joints.map(() => 1 + STRENGTH_SPREAD * (2 * this.random() - 1)),
    });
    this.tapLink();
    this.page = this.rig.state;
    this.telemetry = this.rig.telemetry;
    this.users = new Users(model, this.random);
  }

  run(ticks: number): void {
    for (let k = 0; k < ticks; k++) this.step();
  }

  /** Sees what really reaches the board, after the controller's last word. */
  private tapLink(): void {
    const { link } = this.rig;
    const send = link.send.bind(link);
    link.send = (setpoint) => {
      const q = this.plant.setpoint?.(Array.from(setpoint.q)) ?? Array.from(setpoint.q);
      this.reached = q;
      send({ ...setpoint, q });
    };
    const order = link.order.bind(link);
    link.order = (what) => {
      if (what.kind !== 'watchSwitch' && what.kind !== 'energiseGripper') this.recounted = true;
      order(what);
    };
  }

  private step(): void {
    const { rig } = this;
    this.tick++;
    this.misfortune();
    const delivered = this.users.step(this.tick, {
      nowS: rig.nowS,
      page: this.page,
      q: this.telemetry.q,
      truth: rig.link.board.sample().truth,
    });
    for (const incoming of delivered) rig.queue(this.plant.incoming?.(incoming) ?? incoming);
    this.plant.spoil?.(rig.controller);
    this.reached = null;
    this.recounted = false;
    rig.tick();
    this.observe(delivered);
    rig.setpoints.length = 0;
    rig.records.length = 0;
    rig.events.length = 0;
  }

  private misfortune(): void {
    const { rig, random } = this;
    if (random() < BOARD_RESTARTS_PER_S * TICK_S) {
      rig.link.board.restart();
      this.recounted = true;
      this.ledger.boardRestarted();
    }
    if (rig.linkClosed) {
      if (this.tick >= this.linkBackTick) rig.linkClosed = false;
      else if (this.plant.runaway) this.runAway(this.plant.runaway);
    } else if (random() < LINK_LOSSES_PER_S * TICK_S) {
      rig.linkClosed = true;
      this.linkBackTick = this.tick + Math.ceil((random() * LONGEST_LINK_LOSS_S) / TICK_S);
    }
  }

  private runAway(next: NonNullable<Plant['runaway']>): void {
    const [before, last] = this.lastReached;
    if (!before || !last) return;
    const q = next(last, before);
    this.rig.link.board.setpoint(q, null);
    this.lastReached = [last, [...q]];
  }

  private observe(delivered: readonly Incoming[]): void {
    const { rig, model, ledger, checker } = this;
    const { outputs } = rig;
    const board = rig.link.board.sample();
    this.page = rig.state;
    this.telemetry = rig.telemetry;
    for (const { event } of outputs.events)
      if (event.code === 'supervisor') checker.object('lastWord', rig.nowS, event.message);
    this.count(delivered);
    const linkSteady = !rig.linkClosed;
    const cause = ledger.settle(delivered, outputs.answers, {
      t: rig.nowS,
      q: this.reached ?? board.q,
      recounted: this.recounted || this.reached === null,
      energised: board.energised,
      linkSteady,
      page: this.page,
      records: outputs.records,
    });
    const stopAt = this.telemetry.stopAt;
    checker.observe({
      t: rig.nowS,
      setpoint: this.reached,
      counts: board.q,
      truth: board.truth,
      recounted: this.recounted,
      energised: board.energised,
      boardMoving: board.moving,
      linkSteady,
      known: this.page.trust.map((t) => t === 'declared' || t === 'referenced'),
      ceiling: ledger.ceiling(this.page.trust),
      peopleClear: ledger.peopleClear,
      cause,
      stopAt: this.plant.stopAt?.(stopAt, model) ?? stopAt,
    });
    if (this.reached) this.lastReached = [...this.lastReached, [...this.reached]].slice(-2);
    this.users.hear(outputs.answers);
  }

  private count(delivered: readonly Incoming[]): void {
    for (const incoming of delivered) {
      if (incoming.kind !== 'command') continue;
      this.commands++;
      const { message } = incoming;
      const name = message.type === 'hold.start' ? `hold ${message.motion.kind}` : message.type;
      const answer = 'id' in message ? this.rig.outputs.answers.find((a) => a.id === message.id) : null;
      const key = `${name}: ${answer?.refused?.code ?? 'done'}`;
      this.tried.set(key, (this.tried.get(key) ?? 0) + 1);
    }
  }
}
