import { reflectedInertia } from '../shared/arm/drives';
import type { ArmModel } from '../shared/arm/model';
import { CARRIES_BELOW } from '../shared/arm/motion-rules';
import { inverseDynamics } from '../shared/dynamics';
import { type Chain, compileChain } from '../shared/kinematics';
import { Servo } from './servo';
import { Stepper } from './stepper';

export interface VirtualArmOptions {
  /** Where the joints really are at power-up, rad or m. */
  truth: readonly number[];
  counts: readonly number[];
  /** Per joint how strong the motor really is, 1 = as modelled. */
  strength?: readonly number[];
}

/** The simulated mechanics: where the joints really are, as against where the board counts them. */
export class VirtualArm {
  private readonly chain: Chain;
  private readonly drives: (Stepper | Servo)[];
  private readonly truthNow: number[];
  private readonly asked: Float64Array;
  private readonly zeros: Float64Array;

  constructor(
    private readonly model: ArmModel,
    options: VirtualArmOptions,
  ) {
    this.chain = compileChain(model);
    this.truthNow = [...options.truth];
    this.asked = new Float64Array(model.joints.length);
    this.zeros = new Float64Array(model.joints.length);
    this.drives = model.joints.map((joint, i) => {
      const strength = options.strength?.[i] ?? 1;
      return joint.drive.kind === 'servo'
        ? new Servo(joint, options.truth[i]!, strength)
        : new Stepper(joint, options.truth[i]!, options.counts[i]!, strength);
    });
  }

  truth(): readonly number[] {
    return this.truthNow;
  }

  recount(joint: number, before: number, after: number): void {
    const drive = this.drives[joint];
    if (drive instanceof Stepper) drive.recount(before, after);
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
    const { payload } = this.model;
    const carries = payload && (gripper === null || gripper < CARRIES_BELOW) ? payload : null;
    const anyOn = energised.some(Boolean);
    inverseDynamics(
      this.chain,
      this.truthNow,
      anyOn ? speeds : this.zeros,
      anyOn ? accelerations : this.zeros,
      {
        payload: carries,
        out: this.asked,
      },
    );
    for (const [i, drive] of this.drives.entries()) {
      const joint = this.model.joints[i]!;
      const on = energised[i]!;
      const asked = this.asked[i]! + (on ? reflectedInertia(joint.drive) * accelerations[i]! : 0);
      if (drive instanceof Stepper) {
        drive.advance(counts[i]!, speeds[i]!, asked, on, dt);
        this.truthNow[i] = drive.truth(counts[i]!);
      } else {
        drive.advance(counts[i]!, asked, on, dt);
        this.truthNow[i] = drive.truth();
      }
    }
  }
}
