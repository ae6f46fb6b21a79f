import { describe, expect, it } from 'vitest';
import { Servo } from '../../firmware-sim/servo';
import { Stepper } from '../../firmware-sim/stepper';
import { heron } from '../../shared/arm/demo/heron';
import { availableTorque, unpoweredHold } from '../../shared/arm/drives';

const DT = 0.01;
const upperArm = heron.joints[1]!;
const wrist = heron.joints[3]!;
/** 4 full steps of 200 a turn through 27:1, at the joint. */
const CYCLE = (4 * 2 * Math.PI) / 200 / 27;

function stepper(truth = {}, position = 1): Stepper {
  return new Stepper(upperArm, position, position, truth);
}

describe('a simulated stepper', () => {
  it('is exactly where its count says while the torque is there', () => {
    const motor = stepper();
    const enough = availableTorque(upperArm.drive, 0.5) * 0.99;
    for (let k = 1; k <= 50; k++) motor.advance(1 + 0.005 * k, 0.5, enough, true, DT);
    expect(motor.truth(1.25)).toBe(1.25);
  });

  it('slips by whole electrical cycles of four full steps when it is asked for more', () => {
    const motor = stepper();
    const tooMuch = availableTorque(upperArm.drive, 0.5) * 1.2;
    for (let k = 1; k <= 20; k++) {
      motor.advance(1 + 0.005 * k, 0.5, tooMuch, true, DT);
      const cycles = (1 + 0.005 * k - motor.truth(1 + 0.005 * k)) / CYCLE;
      expect(cycles).toBeCloseTo(Math.round(cycles), 9);
      expect(cycles).toBeGreaterThan(0.5);
    }
  });

  it('slips under gravity alone, downwards, though it stands', () => {
    const motor = stepper();
    const tooMuch = availableTorque(upperArm.drive, 0) * 1.5;
    for (let k = 0; k < 100; k++) motor.advance(1, 0, tooMuch, true, DT);
    const cycles = (1 - motor.truth(1)) / CYCLE;
    expect(cycles).toBeGreaterThan(1);
    expect(cycles).toBeCloseTo(Math.round(cycles), 9);
  });

  it('locks again once it is light and slow enough, and then follows from where it is', () => {
    const motor = stepper();
    motor.advance(1, 0, availableTorque(upperArm.drive, 0) * 1.5, true, DT);
    const lost = 1 - motor.truth(1);
    for (let k = 1; k <= 50; k++) motor.advance(1 + 0.001 * k, 0.1, 0.1, true, DT);
    expect(1.05 - motor.truth(1.05)).toBeCloseTo(lost, 12);
  });

  it('does not lock while it still turns fast, even without load', () => {
    const motor = stepper();
    motor.advance(1, 0.6, availableTorque(upperArm.drive, 0.6) * 1.2, true, DT);
    const lost = 1 - motor.truth(1);
    // 0.6 rad/s at the joint is 16 rad/s at the motor.
    for (let k = 1; k <= 30; k++) motor.advance(1 + 0.006 * k, 0.6, 0.1, true, DT);
    expect(1 + 0.18 - motor.truth(1 + 0.18)).toBeGreaterThan(lost + CYCLE);
  });

  it('that is weaker than its model slips where the model would not', () => {
    const torque = availableTorque(upperArm.drive, 0) * 0.8;
    const sound = stepper();
    const weak = stepper({ strength: 0.7 });
    for (let k = 0; k < 10; k++) for (const m of [sound, weak]) m.advance(1, 0, torque, true, DT);
    expect(sound.truth(1)).toBe(1);
    expect(weak.truth(1)).toBeLessThan(1 - 0.9 * CYCLE);
  });

  it('goes the other way when its coils are swapped, and too far when its scale is wrong', () => {
    const swapped = stepper({ reversed: true });
    const wrong = stepper({ scale: 1.1 });
    for (let k = 1; k <= 10; k++) for (const m of [swapped, wrong]) m.advance(1 + 0.01 * k, 1, 0.1, true, DT);
    expect(swapped.truth(1.1)).toBeCloseTo(0.9, 12);
    expect(wrong.truth(1.1)).toBeCloseTo(1.11, 12);
  });

  it('stays where it is when its count is declared anew', () => {
    const motor = stepper({ scale: 1.1 });
    motor.recount(1, 0.4);
    expect(motor.truth(0.4)).toBeCloseTo(1, 12);
  });

  it('does not go through the end of its mechanics: it loses cycles there', () => {
    const { upper } = upperArm.hardRange;
    const motor = stepper({}, upper - 0.01);
    for (let k = 1; k <= 100; k++) {
      const count = upper - 0.01 + 0.001 * k;
      motor.advance(count, 0.1, 0.1, true, DT);
      expect(motor.truth(count)).toBeLessThanOrEqual(upper + 1e-12);
    }
  });

  it('falls to the end of its mechanics when gravity beats its detent torque', () => {
    const motor = stepper();
    for (let k = 0; k < 3000; k++) motor.advance(1, 0, unpoweredHold(upperArm.drive) * 2, false, DT);
    expect(motor.truth(1)).toBeCloseTo(upperArm.hardRange.lower, 12);
  });

  it('holds by itself, unpowered, what its detent torque can carry', () => {
    const motor = stepper();
    for (let k = 0; k < 100; k++) motor.advance(1, 0, unpoweredHold(upperArm.drive) * 0.9, false, DT);
    expect(motor.truth(1)).toBe(1);
  });
});

describe('a simulated servo', () => {
  it('jumps at its own speed to where it is told to be when it is first energised', () => {
    const servo = new Servo(wrist, 0.5, {});
    const path = [0.5];
    for (let k = 0; k < 40; k++) {
      servo.advance(-0.5, 0, 0, true, DT);
      path.push(servo.truth());
    }
    // 0.16 s/60° is 6.545 rad/s (trade facts): 1 rad takes 0.153 s, so 16 ticks.
    expect(path.findIndex((q) => Math.abs(q + 0.5) < 1e-12)).toBe(16);
    expect(path[1]! - path[0]!).toBeCloseTo(-(Math.PI / 3 / 0.16) * DT, 12);
  });

  it('is slower the more it carries, on the straight line of a motor', () => {
    const servo = new Servo(wrist, 0, {});
    servo.advance(-1, 0, 0.45, true, DT);
    // Half of its 0.9 N·m leaves half its speed.
    expect(servo.truth()).toBeCloseTo(-(Math.PI / 3 / 0.16) * 0.5 * DT, 12);
  });

  it('has no count to lose: it comes back after it was held off', () => {
    const servo = new Servo(wrist, 0, {});
    for (let k = 0; k < 20; k++) servo.advance(0, 0, 2, true, DT);
    servo.recount();
    for (let k = 0; k < 20; k++) servo.advance(0.3, 0, 0, true, DT);
    expect(servo.truth()).toBeCloseTo(0.3, 12);
  });

  it('never leaves its mechanical range', () => {
    const servo = new Servo(wrist, 0, {});
    for (let k = 0; k < 200; k++) servo.advance(9, 0, 0, true, DT);
    expect(servo.truth()).toBe(wrist.hardRange.upper);
  });
});
