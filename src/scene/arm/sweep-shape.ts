import { Vector3 } from 'three';
import type { ArmModel, Joint } from '../../../shared/arm/model';
import { baseRadius, halfWidth, hubOf, turnsAcross, unit } from './proportions';

/** Steps along the sweep; each gives an inner and an outer corner. */
export const SWEEP_STEPS = 16;

/**
 * The stopping shadow in space: what the leading flank of a link would still sweep if let go now. It starts
 * beside the link and not inside it, so that the link never covers a short one.
 *
 * @param from @param to - joint value now and at rest, rad or m
 * @param tool - tool point in the base frame, m: how far out a base turn sweeps
 * @param out - (SWEEP_STEPS + 1) · 2 corners, inner then outer, x y z, in the joint's own frame before it moves
 */
export function sweepCorners(
  model: ArmModel,
  index: number,
  from: number,
  to: number,
  tool: readonly number[],
  out: Float32Array,
): void {
  const joint = model.joints[index]!;
  const axis = unit(joint.axis);
  const ahead = to >= from ? 1 : -1;
  const [inner, outer] =
    joint.type === 'prismatic'
      ? slide(joint, axis, ahead)
      : turnsAcross(joint)
        ? flank(joint, axis, ahead)
        : aboutItself(model, index, axis, from, tool);
  const corner = new Vector3();
  for (let k = 0; k <= SWEEP_STEPS; k++) {
    const value = from + ((to - from) * k) / SWEEP_STEPS;
    for (const [side, start] of [inner, outer].entries()) {
      corner.copy(start);
      if (joint.type === 'prismatic') corner.addScaledVector(axis, value);
      else corner.applyAxisAngle(axis, value);
      corner.toArray(out, (2 * k + side) * 3);
    }
  }
}

/** Along the flank that leads, from the hub to the link's end, at joint value 0. */
function flank(joint: Joint, axis: Vector3, ahead: number): [Vector3, Vector3] {
  const along = new Vector3(...joint.link.end);
  along.addScaledVector(axis, -along.dot(axis));
  const length = along.length();
  if (length < 1e-6) along.set(Math.abs(axis.x) < 0.9 ? 1 : 0, 0, Math.abs(axis.x) < 0.9 ? 0 : 1);
  along.normalize();
  const lead = new Vector3().crossVectors(axis, along).multiplyScalar(ahead * halfWidth(joint.link.shape));
  const start = Math.min(length * 0.3, hubOf(joint, null).radius * 1.1);
  return [
    along.clone().multiplyScalar(start).add(lead),
    along
      .clone()
      .multiplyScalar(Math.max(length, start + 0.02))
      .add(lead),
  ];
}

/** A base turn is drawn on the bench, as far out as the tool point; any other turn about itself as a small fan. */
function aboutItself(
  model: ArmModel,
  index: number,
  axis: Vector3,
  from: number,
  tool: readonly number[],
): [Vector3, Vector3] {
  const { xyz, rpy } = model.joints[index]!.origin;
  const upright = Math.abs(axis.z) > 0.99 && rpy.every((angle) => Math.abs(angle) < 1e-9);
  if (index === 0 && upright) {
    const way = new Vector3(tool[0]! - xyz[0], tool[1]! - xyz[1], 0);
    const inner = baseRadius(model) * 1.08;
    const outer = Math.max(inner * 1.4, way.length());
    if (way.lengthSq() < 1e-8) way.set(1, 0, 0);
    // The tool already stands at `from`; the sweep turns it on from there.
    way.normalize().applyAxisAngle(axis, -from);
    const at = (radius: number) =>
      way
        .clone()
        .multiplyScalar(radius)
        .setZ(0.0015 - xyz[2]);
    return [at(inner), at(outer)];
  }
  const radius = halfWidth(model.joints[index]!.link.shape);
  const way = new Vector3(0, 0, 1).addScaledVector(axis, -axis.z);
  if (way.lengthSq() < 1e-3) way.set(1, 0, 0).addScaledVector(axis, -axis.x);
  way.normalize();
  return [way.clone().multiplyScalar(radius * 1.5), way.clone().multiplyScalar(radius * 3.6)];
}

/** A strip ahead of the end that leads. */
function slide(joint: Joint, axis: Vector3, ahead: number): [Vector3, Vector3] {
  const end = new Vector3(...joint.link.end);
  const tip = end.dot(axis) * ahead > 0 ? end : new Vector3();
  const across = new Vector3(1, 0, 0).addScaledVector(axis, -axis.x);
  if (across.lengthSq() < 1e-3) across.set(0, 1, 0).addScaledVector(axis, -axis.y);
  across.normalize().multiplyScalar(halfWidth(joint.link.shape) * 1.6);
  return [tip.clone().sub(across), tip.clone().add(across)];
}
