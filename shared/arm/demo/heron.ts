import type { ArmModel } from '../model';
import { degToRad } from '../units';
import { carbon, link, servo, stepper, turning, WORDS } from './parts';

/** Four joints and a gripper on thin carbon tubes; moves seed vials between a tray and a scale. */
export const heron: ArmModel = {
  format: 'elbowroom-arm',
  version: 1,
  name: 'Heron',
  note: 'Moves seed vials from a 3 × 4 tray to a scale and back.',
  gravity: [0, 0, -9.80665],
  joints: [
    turning({
      name: 'Base turn',
      words: WORDS.turn,
      at: [0, 0, 0.09],
      axis: [0, 0, -1],
      soft: [-125, 125],
      beyond: 10,
      speed: [70, 180, 1200],
      link: link(
        { kind: 'box', width: 0.06, height: 0.05, material: 'PETG' },
        [0, 0, 0.05],
        [
          { mass: 0.28, at: [0, 0.03, 0.03] },
          { mass: 0.15, at: [-0.03, -0.03, 0.03] },
        ],
      ),
      drive: stepper({ holding: 0.13, ratio: 16, efficiency: 0.8, switchAt: degToRad(-122) }),
    }),
    turning({
      name: 'Upper arm',
      words: WORDS.lift,
      at: [0, 0, 0.05],
      axis: [0, -1, 0],
      soft: [8, 114],
      beyond: 8,
      speed: [50, 140, 1000],
      link: link(carbon(0.025, 0.022), [0.3, 0, 0], [{ mass: 0.07, at: [0.3, 0, 0] }]),
      drive: stepper({
        holding: 0.13,
        ratio: 27,
        efficiency: 0.72,
        switchAt: degToRad(111),
        switchDirection: 1,
      }),
    }),
    turning({
      name: 'Forearm',
      words: WORDS.fold,
      at: [0.3, 0, 0],
      axis: [0, -1, 0],
      soft: [-132, -20],
      beyond: 8,
      speed: [80, 220, 1600],
      link: link(carbon(0.02, 0.0175), [0.28, 0, 0], [{ mass: 0.055, at: [0.28, 0, 0] }]),
      drive: stepper({ holding: 0.16, ratio: 6, efficiency: 0.95, switchAt: degToRad(-129) }),
    }),
    turning({
      name: 'Wrist tilt',
      words: WORDS.tilt,
      at: [0.28, 0, 0],
      axis: [0, -1, 0],
      soft: [-125, 45],
      beyond: 5,
      speed: [150, 700, 7000],
      link: link(
        { kind: 'box', width: 0.03, height: 0.02, material: 'PLA' },
        [0.05, 0, 0],
        [{ mass: 0.07, at: [0.06, 0, 0] }],
      ),
      drive: servo(0.9, 0.16),
    }),
  ],
  tool: { xyz: [0.09, 0, 0], rpy: [0, 0, 0] },
  gripper: { opening: 0.038, travelTime: 0.6, force: 8, mass: 0.07 },
  payload: {
    mass: 0.03,
    com: [0, 0, 0],
    inertia: { ixx: 4e-6, iyy: 4e-6, izz: 2e-6, ixy: 0, ixz: 0, iyz: 0 },
  },
  referenceOrder: [1, 2, 0],
  bench: [
    { name: 'Seed tray', kind: 'tray', centre: [0.3, 0.1, 0.02], size: [0.16, 0.12, 0.04], yaw: 0 },
    { name: 'Scale', kind: 'scale', centre: [0.26, -0.18, 0.025], size: [0.13, 0.13, 0.05], yaw: 0.2 },
  ],
};
