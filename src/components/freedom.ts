import type { ArmModel } from '../../shared/arm/model';
import { compileChain, dexterity, forwardKinematics, reachOf } from '../../shared/kinematics';

/** How freely the tool can move, in the words of torque used. The figures are ours: common small arms lie between 0.02 and 0.15. */
export function freedomWord(isotropy: number): 'roomy' | 'fair' | 'tight' {
  return isotropy >= 0.05 ? 'roomy' : isotropy >= 0.02 ? 'fair' : 'tight';
}

/** How far an arm is stretched out, as a share of its reach, and how far it is from losing a way to move its tool, 0 to 1. */
export function freedomOf(
  model: ArmModel,
): (q: readonly number[]) => { stretched: number; isotropy: number } {
  const chain = compileChain(model);
  const reach = reachOf(chain);
  const [x, y, z] = model.joints[0]!.origin.xyz;
  return (q) => {
    const { position } = forwardKinematics(chain, q);
    return {
      stretched: Math.min(1, Math.hypot(position[0] - x, position[1] - y, position[2] - z) / reach),
      isotropy: dexterity(chain, q).isotropy,
    };
  };
}
