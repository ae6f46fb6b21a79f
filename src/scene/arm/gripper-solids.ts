import { Matrix4, Quaternion, Vector3 } from 'three';
import type { ArmModel } from '../../../shared/arm/model';
import { block, type Point, rod } from '../ink/solids';
import type { Pieces } from './link-solids';

const FINGER_M = 0.007;
const FINGER_DEEP_M = 0.014;
const PALM_M = 0.013;

/**
 * How the tool is laid out, in the last link's frame: from the link's end to the tool point, with the fingers
 * beside that line along `apart`.
 */
export interface ToolPlan {
  end: Vector3;
  tip: Vector3;
  way: Vector3;
  apart: Vector3;
  deep: Vector3;
  /** Middle of the palm to the tool point, m. */
  length: number;
}

export function toolPlan(model: ArmModel): ToolPlan {
  const end = new Vector3(...(model.joints.at(-1)?.link.end ?? [0, 0, 0]));
  const tip = new Vector3(...model.tool.xyz);
  const way = tip.clone().sub(end);
  const length = Math.max(0.025, way.length());
  if (way.lengthSq() < 1e-10) way.set(1, 0, 0);
  way.normalize();
  // The fingers open along the tool frame's own y, made square to the line to the tool point.
  const [roll, pitch, yaw] = model.tool.rpy;
  const turn = new Quaternion().setFromRotationMatrix(
    new Matrix4()
      .makeRotationZ(yaw)
      .multiply(new Matrix4().makeRotationY(pitch))
      .multiply(new Matrix4().makeRotationX(roll)),
  );
  const apart = new Vector3(0, 1, 0).applyQuaternion(turn);
  apart.addScaledVector(way, -apart.dot(way));
  if (apart.lengthSq() < 1e-6) apart.set(Math.abs(way.x) < 0.9 ? 1 : 0, Math.abs(way.x) < 0.9 ? 0 : 1, 0);
  apart.addScaledVector(way, -apart.dot(way)).normalize();
  return { end, tip, way, apart, deep: new Vector3().crossVectors(way, apart), length };
}

const point = (v: Vector3): Point => [v.x, v.y, v.z];

/** The palm, or a pointed tool where there is no gripper. */
export function palmPieces(model: ArmModel): Pieces {
  const { end, tip, way, apart, deep, length } = toolPlan(model);
  if (!model.gripper) {
    const shoulder = end.clone().addScaledVector(way, length * 0.5);
    return {
      solids: [rod(point(end), point(shoulder), 0.007), rod(point(shoulder), point(tip), 0.007, 0.0008)],
      marks: [],
    };
  }
  const middle = tip.clone().addScaledVector(way, -length + PALM_M / 2);
  const neck = middle.clone().addScaledVector(way, -PALM_M / 2 - 0.006);
  return {
    solids: [
      rod(point(neck), point(middle), 0.0125),
      block(point(middle), [PALM_M, model.gripper.opening + 2 * FINGER_M + 0.012, 0.018], [way, apart, deep]),
    ],
    marks: [],
  };
}

/** One finger with its inner face at the tool line; it is moved outward by half the opening. */
export function fingerPieces(model: ArmModel, side: 1 | -1): Pieces {
  const { tip, way, apart, deep, length } = toolPlan(model);
  const reach = length - PALM_M + 0.004;
  const middle = tip
    .clone()
    .addScaledVector(way, 0.004 - reach / 2)
    .addScaledVector(apart, (side * FINGER_M) / 2);
  return {
    solids: [block(point(middle), [reach, FINGER_M, FINGER_DEEP_M], [way, apart, deep])],
    marks: [],
  };
}
