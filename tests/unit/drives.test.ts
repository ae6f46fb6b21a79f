import { describe, expect, it } from 'vitest';
import { heron } from '../../shared/arm/demo/heron';
import {
  availableTorque,
  motorPerJoint,
  motorTorqueAt,
  reflectedInertia,
  torqueWord,
  unpoweredHold,
  wouldDrop,
} from '../../shared/arm/drives';
import type { ServoDrive, StepperDrive } from '../../shared/arm/model';

const motor: StepperDrive = {
  kind: 'stepper',
  stepsPerRev: 200,
  microsteps: 16,
  ratio: 50,
  efficiency: 0.8,
  holdingTorque: 0.5,
  detentTorque: 0.02,
  rotorInertia: 5.7e-6,
  torqueCurve: [
    { speed: 0, torque: 0.48 },
    { speed: 100, torque: 0.4 },
    { speed: 300, torque: 0.1 },
  ],
  reference: { kind: 'none' },
};
const servo: ServoDrive = {
  kind: 'servo',
  stallTorque: 2,
  noLoadSpeed: 6,
  ratio: 2,
  efficiency: 0.9,
  pulse: { atLower: 600, atUpper: 2400 },
};

describe('a stepper’s torque at the joint', () => {
  // T_out = T_in·N·η (Shigley): 0.48 · 50 · 0.8.
  it('is the motor’s through ratio and efficiency', () => {
    expect(availableTorque(motor, 0)).toBeCloseTo(19.2, 12);
  });

  it('follows the pull-out curve at the motor’s speed, either way round', () => {
    // 4 rad/s at the joint is 200 rad/s at the motor: half-way between 0.4 and 0.1.
    expect(availableTorque(motor, 4)).toBeCloseTo(0.25 * 50 * 0.8, 12);
    expect(availableTorque(motor, -4)).toBe(availableTorque(motor, 4));
  });

  it('is none beyond the end of the curve', () => {
    expect(motorTorqueAt(motor, 301)).toBe(0);
  });

  // Motor rad per metre is 2π/lead: an 8 mm screw, 0.4 N·m without loss gives 2π·0.4/0.008 N.
  it('is a force on a screw', () => {
    const screw = { ...motor, ratio: 1, lead: 0.008, efficiency: 1 };
    expect(motorPerJoint(screw)).toBeCloseTo(785.398163, 6);
    expect(availableTorque(screw, 0)).toBeCloseTo(0.48 * 785.398163, 5);
  });
});

describe('a servo’s torque', () => {
  // Straight line of a DC motor: T = T_s·(1 − ω/ω_0); at half the no-load speed half the stall torque.
  it('falls on a straight line to nothing at its no-load speed', () => {
    expect(availableTorque(servo, 0)).toBeCloseTo(2 * 2 * 0.9, 12);
    expect(availableTorque(servo, 1.5)).toBeCloseTo(2 * 2 * 0.9 * 0.5, 12);
    expect(availableTorque(servo, 3)).toBe(0);
    expect(availableTorque(servo, 9)).toBe(0);
  });
});

describe('inertia of the rotor seen from the joint', () => {
  // Trade facts: 5.7e-6 kg·m² at 50:1 is 0.01425 kg·m².
  it('is J·N²', () => {
    expect(reflectedInertia(motor)).toBeCloseTo(0.01425, 12);
  });
});

describe('a joint without power', () => {
  it('holds what its detent torque carries through the gears, and drops more', () => {
    const joint = { ...heron.joints[1]!, drive: motor };
    const holds = unpoweredHold(motor);
    expect(holds).toBeCloseTo((0.02 * 50) / 0.8, 12);
    expect(wouldDrop(joint, holds * 0.99)).toBe(false);
    expect(wouldDrop(joint, -holds * 1.01)).toBe(true);
  });
});

describe('torque used in words', () => {
  // Under 60 % roomy, to 80 % fair, to 100 % tight, above that none left.
  it.each([
    [0, 'roomy'],
    [0.599, 'roomy'],
    [0.6, 'fair'],
    [0.799, 'fair'],
    [0.8, 'tight'],
    [1, 'tight'],
    [1.001, 'none left'],
  ])('%f is %s', (used, word) => {
    expect(torqueWord(used)).toBe(word);
  });
});
