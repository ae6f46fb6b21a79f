import { availableTorque, unpoweredHold } from '../shared/arm/drives';
import type { Joint } from '../shared/arm/model';
import { type DriveTruth, gainOf } from './drive-truth';

/** How fast an unpowered servo gives way per N·m that nothing holds, rad/s. Simulation only. */
const SINK_RAD_S = 1.5;

/**
 * A hobby servo. It knows its own angle and drives to the commanded one at its own speed, so when it is first
 * energised away from that angle it jumps; nothing outside can see where it is on the way.
 */
export class Servo {
  readonly gain: number;
  private angle: number;
  private readonly strength: number;

  constructor(
    private readonly joint: Joint,
    angle: number,
    truth: DriveTruth,
  ) {
    this.angle = angle;
    this.gain = gainOf(truth);
    this.strength = truth.strength ?? 1;
  }

  truth(): number {
    return this.angle;
  }

  /** A servo's count is only what it is told: counting anew changes nothing. */
  recount(): void {}

  /** Something outside keeps it at this angle. */
  put(angle: number): void {
    this.angle = angle;
  }

  /** @param asked - torque at the joint that would hold it there, N·m */
  advance(command: number, _speed: number, asked: number, energised: boolean, dt: number): void {
    const { drive, hardRange } = this.joint;
    if (drive.kind !== 'servo') return;
    if (energised) {
      // Pulses are mapped to angles about the middle of the range.
      const middle = (hardRange.lower + hardRange.upper) / 2;
      const wanted = middle + this.gain * (command - middle);
      // The straight line of a DC motor: the more it carries, the slower it goes.
      const load = Math.min(1, Math.abs(asked) / (availableTorque(drive, 0) * this.strength));
      const most = (drive.noLoadSpeed / drive.ratio) * (1 - load) * dt;
      const gap = wanted - this.angle;
      this.angle += Math.abs(gap) <= most ? gap : Math.sign(gap) * most;
    } else {
      const free = Math.abs(asked) - unpoweredHold(drive);
      if (free > 0) this.angle -= Math.sign(asked) * free * SINK_RAD_S * dt;
    }
    this.angle = Math.min(hardRange.upper, Math.max(hardRange.lower, this.angle));
  }
}
