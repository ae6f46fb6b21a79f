import type { ArmModel } from '../../../shared/arm/model';
import { type Chain, forwardKinematics, linkFrames } from '../../../shared/kinematics';
import { baseRadius, halfWidth } from '../arm/proportions';

type Vec = [number, number, number];

/** Every joint's place and the tool point at these joint values, base frame, m. */
export function skeleton(chain: Chain, q: readonly number[]): Vec[] {
  const points = linkFrames(chain, q).map((link) => [...link.position] as Vec);
  points.push([...forwardKinematics(chain, q).position] as Vec);
  return points;
}

/** What the picture always shows: the base and what stands on the bench. */
export function standingPoints(model: ArmModel): Vec[] {
  const [x, y] = model.joints[0]!.origin.xyz;
  const radius = baseRadius(model);
  const points: Vec[] = [
    [x - radius, y, 0],
    [x + radius, y, 0],
    [x, y - radius, 0],
    [x, y + radius, 0],
  ];
  for (const { centre, size, yaw } of model.bench)
    for (const sx of [-0.5, 0.5])
      for (const sy of [-0.5, 0.5])
        for (const sz of [-0.5, 0.5]) {
          const px = sx * size[0];
          const py = sy * size[1];
          points.push([
            centre[0] + px * Math.cos(yaw) - py * Math.sin(yaw),
            centre[1] + px * Math.sin(yaw) + py * Math.cos(yaw),
            centre[2] + sz * size[2],
          ]);
        }
  return points;
}

/** The thickest part of the arm around its skeleton, m. */
export function flesh(model: ArmModel): number {
  return Math.max(0.02, ...model.joints.map((joint) => halfWidth(joint.link.shape) * 1.8));
}
