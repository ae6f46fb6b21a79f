import { Vector3 } from 'three';
import type { ArmModel, Joint, LinkShape, Vec3 } from '../../../shared/arm/model';

/** Sizes that the drawing needs and the model does not name, all m. */

/** Radius of the circle around a link's section. */
export function halfWidth(shape: LinkShape): number {
  if (shape.kind === 'tube') return shape.outer / 2;
  if (shape.kind === 'bar') return shape.diameter / 2;
  return Math.min(shape.width, shape.height) / 2;
}

/** The arm stretched out, base to tool point. */
export function stretchedLength(model: ArmModel): number {
  return model.joints.reduce(
    (sum, joint) => sum + Math.hypot(...joint.origin.xyz),
    Math.hypot(...model.tool.xyz),
  );
}

export const baseRadius = (model: ArmModel): number =>
  Math.min(0.12, Math.max(0.05, 0.105 * stretchedLength(model)));

export const unit = (v: Vec3): Vector3 => new Vector3(...v).normalize();

/** Whether the joint turns across its link (an elbow), not about it (a roll) and not along it (a slide). */
export function turnsAcross(joint: Joint): boolean {
  if (joint.type !== 'revolute') return false;
  const end = new Vector3(...joint.link.end);
  return end.lengthSq() < 1e-12 || Math.abs(unit(joint.axis).dot(end.normalize())) < 0.7;
}

/** The two directions of a box's section: `width` lies level where it can, `height` stands across it. */
export function sectionDirections(along: Vector3): { across: Vector3; height: Vector3 } {
  const up = new Vector3(0, 0, 1);
  const across = Math.abs(along.z) > 0.9 ? new Vector3(0, 1, 0) : new Vector3().crossVectors(up, along);
  across.addScaledVector(along, -across.dot(along)).normalize();
  return { across, height: new Vector3().crossVectors(along, across) };
}

/** A short box whose next joint turns across it is drawn as a fork that holds that joint. */
export interface Fork {
  /** From foot to the next joint's centre, and its length. */
  along: Vector3;
  length: number;
  /** Outer width along the next joint's axis; the plates' depth and thickness. */
  width: number;
  depth: number;
  plate: number;
  axis: Vector3;
}
export function forkOf(joint: Joint, next: Joint | undefined): Fork | null {
  const { shape, end } = joint.link;
  const along = new Vector3(...end);
  const length = along.length();
  if (shape.kind !== 'box' || !next || !turnsAcross(next) || length < 0.01) return null;
  const width = Math.max(shape.width, shape.height);
  const apart = Math.hypot(...next.origin.xyz.map((v, k) => v - end[k]!));
  const straight = next.origin.rpy.every((angle) => Math.abs(angle) < 1e-9);
  const axis = unit(next.axis);
  if (length > 1.6 * width || apart > 1e-6 || !straight || Math.abs(axis.dot(along) / length) > 0.3)
    return null;
  return {
    along: along.normalize(),
    length,
    width,
    depth: Math.min(shape.width, shape.height),
    plate: Math.max(0.004, 0.13 * width),
    axis,
  };
}

/** Radius and length of the hub about a joint that turns across. */
export function hubOf(joint: Joint, holder: Fork | null): { radius: number; length: number } {
  const half = halfWidth(joint.link.shape);
  if (holder) {
    const room = holder.width - 2 * holder.plate - 0.002;
    return {
      radius: Math.max(0.012, Math.min(half * 1.6, holder.depth * 0.46)),
      length: Math.max(0.008, room),
    };
  }
  return { radius: Math.max(0.012, half * 1.65), length: Math.max(0.018, half * 2.5) };
}
