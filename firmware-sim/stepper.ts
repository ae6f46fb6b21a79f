import { availableTorque, motorPerJoint, unpoweredHold } from '../shared/arm/drives';
import type { Joint } from '../shared/arm/model';
import { type DriveTruth, gainOf } from './drive-truth';

/** Motor speed below which a stepper that has lost synchronism can lock again, rad/s. Simulation only. */
const LOCK_SPEED = 12;
/** How fast an unheld joint sinks per N·m (or N) that nothing holds: rad/s, m/s. Simulation only. */
const SINK_RAD_S = 0.8;
const SINK_M_S = 0.02;
/** Full steps of one electrical cycle: where a stepper that slipped can lock again. */
const CYCLE_STEPS = 4;

/**
 * A geared stepper without an encoder. While the torque asked stays below what it has at its speed, it is
 * exactly where its count says; above, it slips by whole electrical cycles (four full steps), under gravity
 * alone as well, until it is slow enough and light enough to lock again. Against the end of its mechanics it
 * slips too.
 */
export class Stepper {
  readonly gain: number;
  /** True position minus what the count says. */
  private offset: number;
  private slipping = false;
  /** Travel that the rotor has fallen behind and not yet lost in whole cycles. */
  private behind = 0;
  /** Joint travel of one electrical cycle. */
  private readonly cycle: number;
  private readonly strength: number;

  constructor(
    private readonly joint: Joint,
    position: number,
    count: number,
    truth: DriveTruth,
  ) {
    this.gain = gainOf(truth);
    this.strength = truth.strength ?? 1;
    this.offset = position - this.gain * count;
    const stepsPerRev = joint.drive.kind === 'stepper' ? joint.drive.stepsPerRev : 200;
    this.cycle = (CYCLE_STEPS * 2 * Math.PI) / stepsPerRev / motorPerJoint(joint.drive);
  }

  truth(count: number): number {
    return this.gain * count + this.offset;
  }

  /** The count now reads `after` though nothing has moved. */
  recount(before: number, after: number): void {
    this.offset += this.gain * (before - after);
  }

  /** Something outside keeps it at this position. */
  put(position: number, count: number): void {
    this.offset = position - this.gain * count;
  }

  /** @param asked - torque at the joint that would keep it on its set-points, N·m (N) */
  advance(count: number, speed: number, asked: number, energised: boolean, dt: number): void {
    if (energised) {
      this.follow(speed, asked, dt);
      this.stayInRange(count);
    } else this.sink(count, asked, dt);
  }

  private follow(speed: number, asked: number, dt: number): void {
    const available = availableTorque(this.joint.drive, speed) * this.strength;
    const overloaded = Math.abs(asked) > available;
    if (overloaded && !this.slipping) {
      this.slipping = true;
      // What pulled it out of step takes it past the first place where it could have locked.
      this.behind = this.cycle;
    }
    if (!this.slipping) return;
    if (!overloaded && Math.abs(speed) * motorPerJoint(this.joint.drive) < LOCK_SPEED) {
      this.slipping = false;
      return;
    }
    const sinking = overloaded ? this.sinkRate() * (Math.abs(asked) - available) : 0;
    this.behind += (Math.abs(speed) + sinking) * dt;
    const cycles = Math.floor(this.behind / this.cycle);
    this.behind -= cycles * this.cycle;
    this.offset -= Math.sign(asked) * cycles * this.cycle;
  }

  /** Unpowered: falls as far as gravity beats detent and gears, slowly, to the end of its mechanics. */
  private sink(count: number, asked: number, dt: number): void {
    this.slipping = false;
    const free = Math.abs(asked) - unpoweredHold(this.joint.drive);
    if (free > 0) this.offset -= Math.sign(asked) * free * this.sinkRate() * dt;
    const { lower, upper } = this.joint.hardRange;
    this.offset = Math.min(upper, Math.max(lower, this.truth(count))) - this.gain * count;
  }

  private sinkRate(): number {
    return this.joint.type === 'revolute' ? SINK_RAD_S : SINK_M_S;
  }

  /** Driven against the end of its mechanics it loses whole cycles, and the count goes on. */
  private stayInRange(count: number): void {
    const { lower, upper } = this.joint.hardRange;
    const truth = this.truth(count);
    const beyond = truth > upper ? truth - upper : truth < lower ? truth - lower : 0;
    if (beyond !== 0)
      this.offset -= Math.sign(beyond) * Math.ceil(Math.abs(beyond) / this.cycle) * this.cycle;
  }
}
