import { Matrix4, type Object3D, Vector3 } from 'three';
import type { Joint, Origin } from '../../../shared/arm/model';

/** Stands a frame in the one before it: m, and R = Rz(yaw)·Ry(pitch)·Rx(roll), as the arm model has it. */
export function placeOrigin(object: Object3D, origin: Origin): void {
  const [roll, pitch, yaw] = origin.rpy;
  object.position.set(...origin.xyz);
  object.quaternion.setFromRotationMatrix(
    new Matrix4()
      .makeRotationZ(yaw)
      .multiply(new Matrix4().makeRotationY(pitch))
      .multiply(new Matrix4().makeRotationX(roll)),
  );
}

const axis = new Vector3();

/** Turns or slides a frame by its joint's value, rad or m. */
export function placeJoint(object: Object3D, joint: Pick<Joint, 'type' | 'axis'>, value: number): void {
  axis.set(...joint.axis).normalize();
  if (joint.type === 'revolute') object.quaternion.setFromAxisAngle(axis, value);
  else object.position.copy(axis).multiplyScalar(value);
}
