import { availableTorque, motorPerJoint, unpoweredHold } from '../shared/arm/drives';
import type { Joint } from '../shared/arm/model';

/** Motor speed below which a stepper that has lost synchronism can lock again, rad/s. Simulation only. */
const LOCK_SPEED = 12;
/** How fast an unheld joint sinks per N·m (or N) that nothing holds: rad/s, m/s. Simulation only. */
const SINK_RAD_S = 0.8;
const SINK_M_S = 0.02;

/**
 * A geared stepper without an encoder. While the torque asked stays below what it has at its speed, it is
 * exactly where its count says; above, it slips by whole electrical cycles (four full steps), under gravity
 * alone as well, until it is slow enough and light enough to lock again.
 */
export class Stepper {
  /** True position minus count. */
  private offset: number;
  private slipping = false;
  private deficit = 0;
  /** Joint travel of one electrical cycle. */
  private readonly cycle: number;

  constructor(
    private readonly joint: Joint,
    truth: number,
    count: number,
    /** 1 = as modelled; tests weaken or strengthen a motor. */
    private readonly strength: number,
  ) {
    this.offset = truth - count;
    const stepsPerRev = joint.drive.kind === 'stepper' ? joint.drive.stepsPerRev : 200;
    this.cycle = (4 * 2 * Math.PI) / stepsPerRev / motorPerJoint(joint.drive);
  }

  truth(count: number): number {
    return count + this.offset;
  }

  /** The count now reads `after` though nothing has moved. */
  recount(before: number, after: number): void {
    this.offset += before - after;
  }

  /** @param asked - torque at the joint that would keep it on its set-points, N·m (N) */
  advance(count: number, speed: number, asked: number, energised: boolean, dt: number): void {
    if (!energised) {
      this.sink(count, -asked, dt);
      return;
    }
    const available = availableTorque(this.joint.drive, speed) * this.strength;
    const overloaded = Math.abs(asked) > available;
    if (overloaded && !this.slipping) {
      this.slipping = true;
      this.deficit = this.cycle;
    }
    if (!this.slipping) return;
    if (!overloaded && Math.abs(speed) * motorPerJoint(this.joint.drive) < LOCK_SPEED) {
      this.slipping = false;
      return;
    }
    const sink = overloaded ? this.sinkRate() * (Math.abs(asked) - available) : 0;
    this.deficit += (Math.abs(speed) + sink) * dt;
    const cycles = Math.floor(this.deficit / this.cycle);
    this.deficit -= cycles * this.cycle;
    this.offset -= Math.sign(asked) * cycles * this.cycle;
    this.keepInRange(count);
  }

  private sink(count: number, pull: number, dt: number): void {
    this.slipping = false;
    const free = Math.abs(pull) - unpoweredHold(this.joint.drive);
    if (free > 0) this.offset += Math.sign(pull) * free * this.sinkRate() * dt;
    this.keepInRange(count);
  }

  private sinkRate(): number {
    return this.joint.type === 'revolute' ? SINK_RAD_S : SINK_M_S;
  }

  /** The mechanics end somewhere. */
  private keepInRange(count: number): void {
    const { lower, upper } = this.joint.hardRange;
    const truth = Math.min(upper, Math.max(lower, count + this.offset));
    this.offset = truth - count;
  }
}
