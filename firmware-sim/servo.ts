import { unpoweredHold } from '../shared/arm/drives';
import type { Joint } from '../shared/arm/model';

/** How fast an unpowered servo gives way per N·m that nothing holds, rad/s. Simulation only. */
const SINK_RAD_S = 1.5;

/**
 * A hobby servo. It knows its own angle and drives to the commanded one at its own speed, so when it is first
 * energised away from that angle it jumps; nothing outside can see where it is on the way.
 */
export class Servo {
  private angle: number;

  constructor(
    private readonly joint: Joint,
    truth: number,
    private readonly strength: number,
  ) {
    this.angle = truth;
  }

  truth(): number {
    return this.angle;
  }

  advance(command: number, asked: number, energised: boolean, dt: number): void {
    const { drive, hardRange } = this.joint;
    if (drive.kind !== 'servo') return;
    if (!energised) {
      const free = Math.abs(asked) - unpoweredHold(drive);
      if (free > 0) this.angle -= Math.sign(asked) * free * SINK_RAD_S * dt;
    } else {
      // The straight line of a DC motor: the more it carries, the slower it goes.
      const load = Math.min(
        1,
        Math.abs(asked) / (drive.stallTorque * drive.ratio * drive.efficiency * this.strength),
      );
      const most = (drive.noLoadSpeed / drive.ratio) * (1 - load) * dt;
      const gap = command - this.angle;
      this.angle += Math.abs(gap) <= most ? gap : Math.sign(gap) * most;
    }
    this.angle = Math.min(hardRange.upper, Math.max(hardRange.lower, this.angle));
  }
}
