import type { ArmModel } from '../shared/arm/model';

/** Above this share of a joint's own limits the board refuses: it repeats the essential checks by itself. */
const CLAMP = 1.001;
/** Slower than this an axis stands, rad/s or m/s. */
const STILL = 1e-9;

/** The counting half of the board: where each axis is told to be, how fast that makes it go, and its own ramp. */
export class Axes {
  readonly counts: number[];
  readonly speeds: number[];
  readonly accelerations: number[];
  /** Whose count has been declared: only there does the mechanical range mean anything. */
  readonly counted: boolean[];

  constructor(private readonly model: ArmModel) {
    const zeros = () => model.joints.map(() => 0);
    this.counts = zeros();
    this.speeds = zeros();
    this.accelerations = zeros();
    this.counted = model.joints.map(() => false);
  }

  get moving(): boolean {
    return this.speeds.some((v) => Math.abs(v) > STILL);
  }

  /** Goes to `q` in dt seconds, unless that would be too fast, too hard or out of range; returns whether it did. */
  follow(q: readonly number[], energised: readonly boolean[], dt: number): boolean {
    for (const [i, { limits, hardRange }] of this.model.joints.entries()) {
      if (!energised[i]) continue;
      const speed = (q[i]! - this.counts[i]!) / dt;
      const acceleration = (speed - this.speeds[i]!) / dt;
      const inRange = !this.counted[i] || speed === 0 || within(q[i]!, hardRange);
      const fits =
        Math.abs(speed) <= limits.velocity * CLAMP && Math.abs(acceleration) <= limits.acceleration * CLAMP;
      // Written so that a set-point that is not a number does not fit either.
      if (!(fits && inRange)) return false;
    }
    for (let i = 0; i < this.counts.length; i++) {
      if (!energised[i]) continue;
      const speed = (q[i]! - this.counts[i]!) / dt;
      this.accelerations[i] = (speed - this.speeds[i]!) / dt;
      this.speeds[i] = speed;
      this.counts[i] = q[i]!;
    }
    return true;
  }

  /** Own ramp: every axis loses its speed in the same time, the hardest within its acceleration. */
  ramp(dt: number): void {
    let rampTime = 0;
    for (const [i, { limits }] of this.model.joints.entries())
      rampTime = Math.max(rampTime, Math.abs(this.speeds[i]!) / limits.acceleration);
    const keep = rampTime > dt ? 1 - dt / rampTime : 0;
    for (let i = 0; i < this.counts.length; i++) {
      const speed = this.speeds[i]! * keep;
      this.accelerations[i] = (speed - this.speeds[i]!) / dt;
      this.speeds[i] = speed;
      this.counts[i] = this.counts[i]! + speed * dt;
    }
  }

  halt(): void {
    this.speeds.fill(0);
    this.accelerations.fill(0);
  }
}

function within(q: number, range: { lower: number; upper: number }): boolean {
  return q >= range.lower && q <= range.upper;
}
