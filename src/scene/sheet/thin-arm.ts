import type { ArmModel } from '../../../shared/arm/model';
import { type Chain, linkFrames } from '../../../shared/kinematics';
import { toolPlan } from '../arm/gripper-solids';
import { halfWidth, hubOf, turnsAcross } from '../arm/proportions';
import { skeleton } from './skeleton';

/** From the base frame, m, to the sheet, px. */
export type Project = (p: readonly [number, number, number]) => readonly [number, number];

const n = (value: number) => value.toFixed(1);

/**
 * The arm at other joint values as thin lines, an SVG path: two lines per link, a circle per joint, the gripper.
 *
 * @param zoom - px per metre
 */
export function thinArm(
  model: ArmModel,
  chain: Chain,
  q: readonly number[],
  project: Project,
  zoom: number,
): string {
  const places = skeleton(chain, q);
  const frames = linkFrames(chain, q);
  const parts: string[] = [];
  for (const [i, joint] of model.joints.entries()) {
    const a = project(places[i]!);
    const isLast = i === model.joints.length - 1;
    const into = (local: readonly number[]) => toBase(frames[i]!, local);
    const b = project(isLast ? into(joint.link.end) : places[i + 1]!);
    const length = Math.hypot(b[0] - a[0], b[1] - a[1]);
    if (length > 4) {
      const half = halfWidth(joint.link.shape) * zoom * 0.7;
      const nx = (-(b[1] - a[1]) / length) * half;
      const ny = ((b[0] - a[0]) / length) * half;
      for (const side of [1, -1])
        parts.push(
          `M${n(a[0] + nx * side)} ${n(a[1] + ny * side)}L${n(b[0] + nx * side)} ${n(b[1] + ny * side)}`,
        );
    }
    if (turnsAcross(joint)) parts.push(circle(a, hubOf(joint, null).radius * zoom * 0.8));
    if (isLast) parts.push(tool(model, (local) => project(into(local))));
  }
  return parts.join('');
}

type Frame = ReturnType<typeof linkFrames>[number];
/** A place in a link's frame, seen from the base. */
function toBase({ position, rotation }: Frame, local: readonly number[]): [number, number, number] {
  const at = (row: number) =>
    position[row]! +
    rotation[row * 3]! * local[0]! +
    rotation[row * 3 + 1]! * local[1]! +
    rotation[row * 3 + 2]! * local[2]!;
  return [at(0), at(1), at(2)];
}

function circle([x, y]: readonly [number, number], radius: number): string {
  const r = n(radius);
  return `M${n(x - radius)} ${n(y)}a${r} ${r} 0 1 0 ${n(2 * radius)} 0a${r} ${r} 0 1 0 ${n(-2 * radius)} 0`;
}

/** Palm and two fingers, open half-way: a target says nothing about the gripper. */
function tool(model: ArmModel, at: (local: readonly number[]) => readonly [number, number]): string {
  const { end, tip, way, apart, length } = toolPlan(model);
  const line = (points: readonly (readonly [number, number])[]) =>
    `M${points.map(([x, y]) => `${n(x)} ${n(y)}`).join('L')}`;
  if (!model.gripper) return line([at(end.toArray()), at(tip.toArray())]);
  const palm = tip.clone().addScaledVector(way, -length);
  const half = model.gripper.opening / 2;
  const corner = (side: number, from: typeof palm) =>
    at(
      from
        .clone()
        .addScaledVector(apart, side * half)
        .toArray(),
    );
  return line([corner(1, tip), corner(1, palm), corner(-1, palm), corner(-1, tip)]);
}
