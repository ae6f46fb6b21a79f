import { type Chain, type ChainJoint, compileChain } from '../../shared/kinematics';

/** A plain arm of seven joints, shoulder to wrist in turn about upright and level axes; lengths and limits are ours. */
export function seven(): Chain {
  const lengths = [0.18, 0, 0.22, 0, 0.2, 0, 0.1];
  return compileChain({
    joints: lengths.map(
      (length, i): ChainJoint => ({
        name: `joint ${i + 1}`,
        type: 'revolute',
        origin: { xyz: [0, 0, i === 0 ? 0.1 : lengths[i - 1]!], rpy: [0, 0, 0] },
        axis: i % 2 === 0 ? [0, 0, 1] : [0, 1, 0],
        limits: { lower: -2.4, upper: 2.4 },
        link: {
          mass: 1,
          com: [0, 0, length / 2],
          inertia: { ixx: 0.01, iyy: 0.01, izz: 0.01, ixy: 0, ixz: 0, iyz: 0 },
        },
      }),
    ),
    tool: { xyz: [0, 0, 0.1], rpy: [0, 0, 0] },
  });
}
