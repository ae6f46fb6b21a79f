import type { ArmModel } from '../shared/arm/model';
import { VirtualArm } from './virtual-arm';

/** What the board reports; the link hands it on as it is. */
export interface VirtualBoardSample {
  t: number;
  bootId: number;
  energised: boolean[];
  gripperEnergised: boolean;
  q: number[];
  gripper: number | null;
  moving: boolean;
  latched: boolean;
  faults: ('watchdog' | 'underrun' | 'limit' | 'driver' | 'brownOut')[];
  switches: (boolean | null)[];
  measured: null[];
  truth: number[];
  referenceEdge: (number | null)[];
  inputs: boolean[];
  outputs: boolean[];
}

export interface VirtualBoardOptions {
  model: ArmModel;
  /** 0 ≤ x < 1, seeded by the caller. */
  random: () => number;
  strength?: readonly number[];
}

/** The board stops the arm by itself when nothing came for this long, s. */
const WATCHDOG_S = 0.25;
const STILL = 1e-9;

/**
 * A microcontroller in the same process: takes set-points, counts, ramps down by itself on a stop or when
 * nothing comes any more, and knows switches. Its arm is simulated. Time passes only in `advance`.
 */
export class VirtualBoard {
  private t = 0;
  private bootId = 1;
  private silentS = 0;
  private readonly counts: number[];
  private readonly speeds: number[];
  private readonly accelerations: number[];
  private readonly energised: boolean[];
  private gripperEnergised = false;
  private gripper: number | null;
  private next: { q: readonly number[]; gripper: number | null } | null = null;
  private latched = false;
  private faults: VirtualBoardSample['faults'] = [];
  private readonly watching: boolean[];
  private readonly edges: (number | null)[];
  private readonly arm: VirtualArm;

  constructor(private readonly options: VirtualBoardOptions) {
    const { joints, gripper } = options.model;
    const zeros = () => joints.map(() => 0);
    this.counts = zeros();
    this.speeds = zeros();
    this.accelerations = zeros();
    this.energised = joints.map(() => false);
    this.gripper = gripper ? 1 : null;
    this.watching = joints.map(() => false);
    this.edges = joints.map(() => null);
    // Left as somebody put it down: somewhere inside its range, lower rather than higher.
    const truth = joints.map(
      ({ limits }) => limits.lower + (0.15 + 0.5 * options.random()) * (limits.upper - limits.lower),
    );
    this.arm = new VirtualArm(options.model, { truth, counts: this.counts, strength: options.strength });
  }

  setpoint(q: readonly number[], gripper: number | null): void {
    this.silentS = 0;
    if (this.latched) return;
    this.next = { q, gripper };
  }

  energise(joint: number, assumed: number): void {
    this.declare(joint, assumed);
    this.energised[joint] = true;
  }

  energiseGripper(opening: number): void {
    this.gripperEnergised = true;
    this.gripper = opening;
  }

  motorsOff(): void {
    this.energised.fill(false);
    this.gripperEnergised = false;
    this.next = null;
    this.speeds.fill(0);
    this.accelerations.fill(0);
  }

  /** The count reads `q` from now on; the arm does not move. */
  declare(joint: number, q: number): void {
    this.arm.recount(joint, this.counts[joint]!, q);
    this.counts[joint] = q;
    this.next = null;
  }

  watchSwitch(joint: number): void {
    this.watching[joint] = true;
    this.edges[joint] = null;
  }

  /** Ramps down and latches, whatever is buffered. */
  stop(): void {
    this.latched = true;
    this.next = null;
  }

  clear(): void {
    if (this.speeds.some((v) => Math.abs(v) > STILL)) return;
    this.latched = false;
    this.faults = [];
    this.silentS = 0;
  }

  /** A brown-out: everything off, count lost, the arm left to gravity. */
  restart(): void {
    this.motorsOff();
    for (let i = 0; i < this.counts.length; i++) this.declare(i, 0);
    this.latched = false;
    this.faults = [];
    this.bootId++;
  }

  advance(dt: number): void {
    this.t += dt;
    this.silentS += dt;
    const on = this.energised.some(Boolean);
    if (on && this.silentS > WATCHDOG_S && !this.latched) {
      this.stop();
      this.faults = ['watchdog'];
    }
    const before = this.arm.truth().slice();
    const countsBefore = this.counts.slice();
    if (on) this.moveCounts(dt);
    this.arm.advance(this.counts, this.speeds, this.accelerations, this.energised, this.gripper, dt);
    this.latchEdges(before, countsBefore);
  }

  private moveCounts(dt: number): void {
    const next = this.latched ? null : this.next;
    // Own ramp: every axis loses speed in the same time, at the hardest within each axis' acceleration.
    let rampTime = 0;
    if (!next)
      for (const [i, joint] of this.options.model.joints.entries())
        rampTime = Math.max(rampTime, Math.abs(this.speeds[i]!) / joint.limits.acceleration);
    const keep = rampTime > dt ? 1 - dt / rampTime : 0;
    for (let i = 0; i < this.counts.length; i++) {
      if (!this.energised[i]) continue;
      const speed = next ? (next.q[i]! - this.counts[i]!) / dt : this.speeds[i]! * keep;
      this.accelerations[i] = (speed - this.speeds[i]!) / dt;
      this.speeds[i] = speed;
      this.counts[i] = next ? next.q[i]! : this.counts[i]! + speed * dt;
    }
    if (next?.gripper !== undefined && next.gripper !== null && this.gripperEnergised)
      this.gripper = next.gripper;
  }

  private switchAt(joint: number): { position: number; direction: number } | null {
    const { drive } = this.options.model.joints[joint]!;
    return drive.kind === 'stepper' && drive.reference.kind === 'switch' ? drive.reference : null;
  }

  /** The count is latched at the very edge, between two ticks, as an interrupt would. */
  private latchEdges(before: readonly number[], countsBefore: readonly number[]): void {
    const truth = this.arm.truth();
    for (let i = 0; i < truth.length; i++) {
      const at = this.switchAt(i);
      if (!at || !this.watching[i]) continue;
      const was = (before[i]! - at.position) * at.direction;
      const is = (truth[i]! - at.position) * at.direction;
      if (was >= 0 || is < 0) continue;
      this.edges[i] = countsBefore[i]! + (this.counts[i]! - countsBefore[i]!) * (-was / (is - was));
      this.watching[i] = false;
    }
  }

  sample(): VirtualBoardSample {
    const truth = this.arm.truth();
    return {
      t: this.t,
      bootId: this.bootId,
      energised: [...this.energised],
      gripperEnergised: this.gripperEnergised,
      q: [...this.counts],
      gripper: this.gripper,
      moving: this.speeds.some((v) => Math.abs(v) > STILL),
      latched: this.latched,
      faults: [...this.faults],
      switches: truth.map((q, i) => {
        const at = this.switchAt(i);
        return at ? (q - at.position) * at.direction >= 0 : null;
      }),
      measured: truth.map(() => null),
      truth: [...truth],
      referenceEdge: [...this.edges],
      inputs: [],
      outputs: [],
    };
  }
}
