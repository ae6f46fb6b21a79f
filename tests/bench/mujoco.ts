import loadMujoco from 'mujoco-js';
import type { ArmDescription } from '../reference/arm-data';

/** The same arm in MuJoCo (its npm build, WebAssembly), to be measured in the same run. Crossing into it is part of its time. */
export interface MujocoArm {
  /** Forward kinematics of all bodies at q. */
  kinematics(q: Float64Array): void;
  /** Inverse dynamics; the torques are left in `torques`. */
  inverse(q: Float64Array, qd: Float64Array, qdd: Float64Array): void;
  /** Mass matrix by the composite rigid body method, after `kinematics`. */
  massMatrix(q: Float64Array): void;
  torques: Float64Array;
}

/** kg·m² */
const LEAST_INERTIA = 1e-9;
const numbers = (values: ArrayLike<number>) => Array.from(values).join(' ');

function worldOf({ arm }: ArmDescription): string {
  const opened = arm.joints.map(({ name, origin, axis, link }, i) => {
    // MuJoCo wants every body to have some inertia about every axis.
    const at = (r: number, c: number) => link.inertia[r]![c]! + (r === c ? LEAST_INERTIA : 0);
    const inertia = numbers([at(0, 0), at(1, 1), at(2, 2), at(0, 1), at(0, 2), at(1, 2)]);
    // A massless body cannot be simulated; the figures are not touched otherwise.
    const body = link.mass > 0 ? link : { ...link, mass: 1e-9 };
    return `<body name="b${i}" pos="${numbers(origin.xyz)}" euler="${numbers(origin.rpy)}">
      <joint name="${name}${i}" type="${arm.joints[i]!.type === 'prismatic' ? 'slide' : 'hinge'}" axis="${numbers(axis)}"/>
      <inertial pos="${numbers(body.com)}" mass="${body.mass}" fullinertia="${inertia}"/>`;
  });
  return `<mujoco>
    <compiler angle="radian" eulerseq="XYZ" balanceinertia="true" boundmass="1e-9" boundinertia="1e-12"/>
    <option gravity="0 0 -9.80665"/>
    <worldbody>${opened.join('')}${'</body>'.repeat(opened.length)}</worldbody>
  </mujoco>`;
}

export async function mujocoArm(description: ArmDescription): Promise<MujocoArm> {
  const mujoco = await loadMujoco();
  mujoco.FS.writeFile('/arm.xml', worldOf(description));
  const model = mujoco.MjModel.loadFromXML('/arm.xml');
  if (!model) throw new Error('MuJoCo could not read the arm');
  const data = new mujoco.MjData(model);
  const { qpos, qvel, qacc, qfrc_inverse } = data;
  return {
    kinematics(q) {
      qpos.set(q);
      mujoco.mj_kinematics(model, data);
    },
    inverse(q, qd, qdd) {
      qpos.set(q);
      qvel.set(qd);
      qacc.set(qdd);
      mujoco.mj_inverse(model, data);
    },
    massMatrix(q) {
      qpos.set(q);
      mujoco.mj_kinematics(model, data);
      mujoco.mj_comPos(model, data);
      mujoco.mj_crb(model, data);
    },
    torques: qfrc_inverse,
  };
}
