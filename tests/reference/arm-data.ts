import type { ChainModel, RigidBody } from '../../shared/kinematics';

/** A configuration of a reference file; fields as in README.md. */
interface Configuration {
  q: number[];
  qd: number[];
  qdd: number[];
  p: number[];
  R: number[][];
  J: number[][];
  sigma: number[];
  manip: number;
  manip_translation: number;
  gravity_tau: number[];
  tau: number[];
  M?: number[][];
}
interface ReferenceBody {
  mass: number;
  com: number[];
  inertia: number[][];
}
export interface ArmFile extends ArmDescription {
  configurations: Configuration[];
}
export interface ArmDescription {
  arm: {
    joints: {
      name: string;
      type: string;
      origin: { xyz: number[]; rpy: number[] };
      axis: number[];
      lower: number;
      upper: number;
      link: ReferenceBody;
    }[];
    tool: { xyz: number[]; rpy: number[] };
    payload?: ReferenceBody;
  };
}

export function bodyOf({ mass, com, inertia }: ReferenceBody): RigidBody {
  const at = (r: number, c: number) => inertia[r]![c]!;
  return {
    mass,
    com,
    inertia: { ixx: at(0, 0), iyy: at(1, 1), izz: at(2, 2), ixy: at(0, 1), ixz: at(0, 2), iyz: at(1, 2) },
  };
}

/** The reference files name limits and inertia a little differently from our arm model. */
export function modelOf(file: ArmDescription): ChainModel {
  return {
    joints: file.arm.joints.map((joint) => ({
      name: joint.name,
      type: joint.type as 'revolute' | 'prismatic',
      origin: joint.origin,
      axis: joint.axis,
      limits: { lower: joint.lower, upper: joint.upper, velocity: 1, acceleration: 1, jerk: 1 },
      link: bodyOf(joint.link),
    })),
    tool: file.arm.tool,
  };
}
