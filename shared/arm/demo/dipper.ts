import type { ArmModel } from '../model';
import { degToRad } from '../units';
import { link, servo, stepper, turning, WORDS } from './parts';

/** Two turning joints in the plane, a sliding quill and a turning tool: dips and stirs. */
export const dipper: ArmModel = {
  format: 'elbowroom-arm',
  version: 1,
  name: 'Dipper',
  note: 'A SCARA with a linear joint.',
  gravity: [0, 0, -9.80665],
  joints: [
    turning({
      name: 'Shoulder turn',
      words: WORDS.turn,
      at: [0, 0, 0.22],
      axis: [0, 0, -1],
      soft: [-110, 110],
      beyond: 8,
      speed: [90, 260, 1800],
      link: link({ kind: 'box', width: 0.05, height: 0.03, material: 'aluminium' }, [0.2, 0, 0]),
      drive: stepper({ holding: 0.4, ratio: 12, efficiency: 0.92, switchAt: degToRad(-106) }),
    }),
    turning({
      name: 'Elbow turn',
      words: WORDS.turn,
      at: [0.2, 0, 0.03],
      axis: [0, 0, -1],
      soft: [-140, 140],
      beyond: 8,
      speed: [120, 360, 2500],
      link: link(
        { kind: 'box', width: 0.045, height: 0.025, material: 'aluminium' },
        [0.16, 0, 0],
        [{ mass: 0.2, at: [0.16, 0, 0.03] }],
      ),
      drive: stepper({ holding: 0.26, ratio: 9, efficiency: 0.94, switchAt: degToRad(-136) }),
    }),
    {
      name: 'Quill',
      type: 'prismatic',
      origin: { xyz: [0.16, 0, 0], rpy: [0, 0, 0] },
      axis: [0, 0, 1],
      limits: { lower: -0.12, upper: 0, velocity: 0.06, acceleration: 0.3, jerk: 3 },
      hardRange: { lower: -0.125, upper: 0.005 },
      words: WORDS.slide,
      link: link(
        { kind: 'bar', diameter: 0.01, material: 'steel' },
        [0, 0, -0.1],
        [{ mass: 0.09, at: [0, 0, -0.05] }],
      ),
      drive: stepper({
        holding: 0.16,
        ratio: 1,
        lead: 0.008,
        efficiency: 0.4,
        switchAt: -0.002,
        switchDirection: 1,
      }),
    },
    turning({
      name: 'Tool turn',
      words: WORDS.roll,
      at: [0, 0, -0.1],
      axis: [0, 0, -1],
      soft: [-85, 85],
      beyond: 5,
      speed: [180, 800, 8000],
      link: link(
        { kind: 'box', width: 0.02, height: 0.02, material: 'PLA' },
        [0, 0, -0.03],
        [{ mass: 0.05, at: [0, 0, -0.02] }],
      ),
      drive: servo(0.4, 0.12),
    }),
  ],
  tool: { xyz: [0, 0, -0.05], rpy: [0, 0, 0] },
  gripper: { opening: 0.03, travelTime: 0.5, force: 5, mass: 0.05 },
  payload: null,
  referenceOrder: [2, 0, 1],
  bench: [{ name: 'Dish', kind: 'box', centre: [0.26, 0.1, 0.015], size: [0.08, 0.08, 0.03], yaw: 0 }],
};
