import type { ArmModel } from '../shared/arm/model';
import { compileChain, lowestPoint } from '../shared/kinematics';
import { Axes } from './axes';
import type { DriveTruth } from './drive-truth';
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
  faults: VirtualBoardFault[];
  switches: (boolean | null)[];
  measured: null[];
  truth: number[];
  referenceEdge: (number | null)[];
  inputs: boolean[];
  outputs: boolean[];
}
export type VirtualBoardFault = 'watchdog' | 'underrun' | 'limit' | 'driver' | 'brownOut';

export interface VirtualBoardOptions {
  model: ArmModel;
  /** 0 ≤ x < 1, seeded by the caller. */
  random: () => number;
  /** Per joint, how it differs from its model. */
  truths?: readonly DriveTruth[];
}

/** The board stops the arm by itself when nothing came for this long, s. */
const WATCHDOG_S = 0.25;

/**
 * A microcontroller in the same process: takes one set-point a tick, counts, checks what it is told, ramps down
 * and latches by itself on a stop, on nonsense, or when nothing comes any more, and knows switches. Its arm is
 * simulated. Time passes only in `advance`.
 */
export class VirtualBoard {
  private t = 0;
  private bootId = 1;
  private silentS = 0;
  private readonly axes: Axes;
  private readonly energised: boolean[];
  private gripperEnergised = false;
  private gripper: number | null;
  /** The one set-point that is buffered. */
  private next: { q: readonly number[]; gripper: number | null } | null = null;
  private latched = false;
  private faults: VirtualBoardFault[] = [];
  private readonly watching: boolean[];
  private readonly edges: (number | null)[];
  private readonly arm: VirtualArm;

  constructor(private readonly options: VirtualBoardOptions) {
    const { model, random, truths } = options;
    const { joints, gripper } = model;
    this.axes = new Axes(model);
    this.energised = joints.map(() => false);
    this.gripper = gripper ? 1 : null;
    this.watching = joints.map(() => false);
    this.edges = joints.map(() => null);
    const positions = leftSomewhere(model, random);
    this.arm = new VirtualArm(model, { positions, counts: this.axes.counts, truths });
  }

  setpoint(q: readonly number[], gripper: number | null): void {
    this.silentS = 0;
    if (!this.latched) this.next = { q, gripper };
  }

  energise(joint: number, assumed: number): void {
    this.recount(joint, assumed);
    this.axes.counted[joint] = false;
    this.energised[joint] = true;
    this.silentS = 0;
  }

  energiseGripper(opening: number): void {
    this.gripperEnergised = true;
    this.gripper = opening;
  }

  motorsOff(): void {
    this.energised.fill(false);
    this.gripperEnergised = false;
    this.next = null;
    this.axes.halt();
    this.axes.counted.fill(false);
  }

  /** The count reads `q` from now on; the arm does not move. */
  declare(joint: number, q: number): void {
    this.recount(joint, q);
    this.axes.counted[joint] = true;
  }

  private recount(joint: number, q: number): void {
    this.arm.recount(joint, this.axes.counts[joint]!, q);
    this.axes.counts[joint] = q;
    this.next = null;
  }

  /** Looking for a switch, a count says nothing about the mechanical range; a declaration ends that. */
  watchSwitch(joint: number): void {
    this.axes.counted[joint] = false;
    this.watching[joint] = true;
    this.edges[joint] = null;
  }

  /** Ramps down and latches, whatever is buffered. */
  stop(): void {
    this.latched = true;
    this.next = null;
  }

  clear(): void {
    if (this.axes.moving) return;
    this.latched = false;
    this.faults = [];
    this.silentS = 0;
  }

  /** A brown-out: everything off, count lost, the arm left to gravity. */
  restart(): void {
    this.motorsOff();
    for (let i = 0; i < this.energised.length; i++) this.recount(i, 0);
    this.latched = false;
    this.faults = [];
    this.bootId++;
  }

  advance(dt: number): void {
    this.t += dt;
    this.silentS += dt;
    const truthBefore = this.arm.truth().slice();
    const countsBefore = this.axes.counts.slice();
    if (this.energised.some(Boolean)) this.move(dt);
    const { counts, speeds, accelerations } = this.axes;
    this.arm.advance(counts, speeds, accelerations, this.energised, this.gripper, dt);
    this.latchEdges(truthBefore, countsBefore);
  }

  private move(dt: number): void {
    const { next, axes } = this;
    this.next = null;
    if (this.latched) return axes.ramp(dt);
    if (next && !axes.follow(next.q, this.energised, dt)) this.fail('limit');
    else if (!next && this.silentS > WATCHDOG_S) this.fail('watchdog');
    else if (!next && axes.moving) this.fail('underrun');
    if (this.latched) axes.ramp(dt);
    else if (next && next.gripper !== null && this.gripperEnergised) this.gripper = next.gripper;
    else if (!next) axes.halt();
  }

  private fail(fault: VirtualBoardFault): void {
    this.stop();
    this.faults = [fault];
  }

  private switchAt(joint: number): { position: number; direction: number } | null {
    const { drive } = this.options.model.joints[joint]!;
    return drive.kind === 'stepper' && drive.reference.kind === 'switch' ? drive.reference : null;
  }

  /** The count is latched at the very edge, between two ticks, as an interrupt would. */
  private latchEdges(truthBefore: readonly number[], countsBefore: readonly number[]): void {
    const truth = this.arm.truth();
    for (let i = 0; i < truth.length; i++) {
      const at = this.switchAt(i);
      if (!at || !this.watching[i]) continue;
      const was = (truthBefore[i]! - at.position) * at.direction;
      const is = (truth[i]! - at.position) * at.direction;
      if (was >= 0 || is < 0) continue;
      const share = -was / (is - was);
      this.edges[i] = countsBefore[i]! + (this.axes.counts[i]! - countsBefore[i]!) * share;
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
      q: [...this.axes.counts],
      gripper: this.gripper,
      moving: this.axes.moving,
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

/** Left as somebody put it down: somewhere inside its range, lower rather than higher, and above the bench. */
function leftSomewhere(model: ArmModel, random: () => number): number[] {
  const { joints } = model;
  const chain = compileChain(model);
  const draw = () =>
    joints.map(({ limits }) => limits.lower + (0.15 + 0.5 * random()) * (limits.upper - limits.lower));
  let positions = draw();
  // Some models have no place above their bench: then any will do.
  for (let tries = 0; tries < 100 && lowestPoint(chain, positions) < 0; tries++) positions = draw();
  return positions;
}
