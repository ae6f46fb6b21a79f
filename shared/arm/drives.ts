import type { Drive, Joint } from './model';

/** Motor rad per joint rad (or per metre of a sliding joint). */
export function motorPerJoint(drive: Drive): number {
  return drive.kind === 'stepper' && drive.lead !== undefined
    ? (drive.ratio * 2 * Math.PI) / drive.lead
    : drive.ratio;
}

/** Largest torque (N·m) at the motor shaft at a motor speed (rad/s): the pull-out curve, or a servo's straight line. */
export function motorTorqueAt(drive: Drive, motorSpeed: number): number {
  const speed = Math.abs(motorSpeed);
  if (drive.kind === 'servo') return drive.stallTorque * Math.max(0, 1 - speed / drive.noLoadSpeed);
  const curve = drive.torqueCurve;
  const first = curve[0]!;
  if (speed <= first.speed) return first.torque;
  for (let i = 1; i < curve.length; i++) {
    const a = curve[i - 1]!;
    const b = curve[i]!;
    if (speed <= b.speed) return a.torque + ((b.torque - a.torque) * (speed - a.speed)) / (b.speed - a.speed);
  }
  return 0;
}

/** What the drive can give at the joint (N·m, or N) at a joint speed (rad/s, m/s). */
export function availableTorque(drive: Drive, jointSpeed: number): number {
  const gearing = motorPerJoint(drive);
  return motorTorqueAt(drive, jointSpeed * gearing) * gearing * drive.efficiency;
}

/** Rotor inertia seen from the joint: J·N² (kg·m²; kg for sliding joints). */
export function reflectedInertia(drive: Drive): number {
  return drive.kind === 'stepper' ? drive.rotorInertia * motorPerJoint(drive) ** 2 : 0;
}

/** What holds the joint with its driver off: detent torque through the gears, which also resist being driven back. */
export function unpoweredHold(drive: Drive): number {
  if (drive.kind === 'servo') return 0.05 * drive.stallTorque * drive.ratio;
  return (drive.detentTorque * motorPerJoint(drive)) / drive.efficiency;
}

/** Whether gravity (N·m or N at the joint) would move the joint with its driver off. */
export function wouldDrop(joint: Joint, gravityTorque: number): boolean {
  return Math.abs(gravityTorque) > unpoweredHold(joint.drive);
}

export type TorqueWord = 'roomy' | 'fair' | 'tight' | 'none left';
/** Torque used (1 = all there is) in words. */
export function torqueWord(used: number): TorqueWord {
  return used < 0.6 ? 'roomy' : used < 0.8 ? 'fair' : used <= 1 ? 'tight' : 'none left';
}
