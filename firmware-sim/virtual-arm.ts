import { reflectedInertia } from '../shared/arm/drives';
import type { ArmModel } from '../shared/arm/model';
import { CARRIES_BELOW } from '../shared/arm/motion-rules';
import { inverseDynamics } from '../shared/dynamics';
import { type Chain, compileChain, lowestPoint } from '../shared/kinematics';
import type { DriveTruth } from './drive-truth';
import { Servo } from './servo';
import { Stepper } from './stepper';

export interface VirtualArmOptions {
  /** Where the joints really are at power-up, rad or m. */
  positions: readonly number[];
  counts: readonly number[];
  /** Per joint, how it differs from its model. */
  truths?: readonly DriveTruth[];
}

/** The simulated mechanics: where the joints really are, as against where the board counts them. */
export class VirtualArm {
  private readonly chain: Chain;
  private readonly drives: (Stepper | Servo)[];
  private readonly positions: number[];
  private readonly before: Float64Array;
  private readonly qd: Float64Array;
  private readonly qdd: Float64Array;
  private readonly asked: Float64Array;

  constructor(
    private readonly model: ArmModel,
    options: VirtualArmOptions,
  ) {
    this.chain = compileChain(model);
    this.positions = [...options.positions];
    const zeros = () => new Float64Array(model.joints.length);
    this.before = zeros();
    this.qd = zeros();
    this.qdd = zeros();
    this.asked = zeros();
    this.drives = model.joints.map((joint, i) => {
      const truth = options.truths?.[i] ?? {};
      return joint.drive.kind === 'servo'
        ? new Servo(joint, options.positions[i]!, truth)
        : new Stepper(joint, options.positions[i]!, options.counts[i]!, truth);
    });
  }

  /** Where the joints really are, rad or m; the same array at every call. */
  truth(): readonly number[] {
    return this.positions;
  }

  recount(joint: number, before: number, after: number): void {
    this.drives[joint]!.recount(before, after);
  }

  /** @param counts - where the board counts each joint at the end of these dt seconds */
  advance(
    counts: readonly number[],
    speeds: readonly number[],
    accelerations: readonly number[],
    energised: readonly boolean[],
    gripper: number | null,
    dt: number,
  ): void {
    const { payload, joints } = this.model;
    for (const [i, { gain }] of this.drives.entries()) {
      this.qd[i] = energised[i] ? gain * speeds[i]! : 0;
      this.qdd[i] = energised[i] ? gain * accelerations[i]! : 0;
    }
    const carries = payload && (gripper === null || gripper < CARRIES_BELOW) ? payload : null;
    inverseDynamics(this.chain, this.positions, this.qd, this.qdd, { payload: carries, out: this.asked });
    const heightBefore = lowestPoint(this.chain, this.positions);
    for (const [i, drive] of this.drives.entries()) {
      const asked = this.asked[i]! + reflectedInertia(joints[i]!.drive) * this.qdd[i]!;
      this.before[i] = this.positions[i]!;
      drive.advance(counts[i]!, this.qd[i]!, asked, energised[i]!, dt);
      this.positions[i] = drive.truth(counts[i]!);
    }
    this.restOnBench(counts, energised, heightBefore);
  }

  /** What sinks unpowered lies down on the bench; what is powered may well be driven into it. */
  private restOnBench(counts: readonly number[], energised: readonly boolean[], heightBefore: number): void {
    const height = lowestPoint(this.chain, this.positions);
    if (height >= 0 || height >= heightBefore) return;
    for (const [i, drive] of this.drives.entries()) {
      if (energised[i]) continue;
      drive.put(this.before[i]!, counts[i]!);
      this.positions[i] = this.before[i]!;
    }
  }
}
