import {
  type Chain,
  forwardKinematics,
  type IkTask,
  rotationAbout,
  solveInverseKinematics,
  tiltAxisOf,
  toolTilt,
  type Vec3,
} from '../../../shared/kinematics';

/** A place for the tool that somebody thinks of: where it is wanted, and how near the arm gets. */
export interface Ghost {
  /** Tool point wanted, m in the base frame. */
  position: Vec3;
  /** How the tool is wanted turned, 3×3 row-major; of use to arms that can turn it freely. */
  rotation: number[];
  /** How it is wanted to lean, rad; null for arms that turn their tool freely or not at all. */
  tilt: number | null;
  /** The arm there, or as near as it gets; rad, m. */
  q: number[];
  reached: boolean;
  /** What is missing, m and rad. */
  off: { position: number; rotation: number };
}

/** A ghost that stands where the arm stands. */
export function ghostAt(chain: Chain, q: readonly number[]): Ghost {
  const { position, rotation } = forwardKinematics(chain, q);
  return {
    position: [...position] as Vec3,
    rotation: Array.from(rotation),
    tilt: toolTilt(chain, q),
    q: [...q],
    reached: true,
    off: { position: 0, rotation: 0 },
  };
}

/** The same ghost wanted elsewhere; the arm is looked for near where the ghost was. */
export function moveGhost(
  chain: Chain,
  ghost: Ghost,
  wanted: Partial<Pick<Ghost, 'position' | 'tilt'>>,
): Ghost {
  return solved(chain, { ...ghost, ...wanted });
}

/** Turned about an axis of the base through its own point, rad. */
export function turnGhost(chain: Chain, ghost: Ghost, axis: 'x' | 'y' | 'z', angle: number): Ghost {
  const about: Vec3 = [axis === 'x' ? 1 : 0, axis === 'y' ? 1 : 0, axis === 'z' ? 1 : 0];
  const turn = rotationAbout(about, angle, new Float64Array(9));
  const r = ghost.rotation;
  const rotation = Array.from({ length: 9 }, (_, k) => {
    const row = 3 * Math.floor(k / 3);
    return turn[row]! * r[k % 3]! + turn[row + 1]! * r[3 + (k % 3)]! + turn[row + 2]! * r[6 + (k % 3)]!;
  });
  return solved(chain, { ...ghost, rotation });
}

function solved(chain: Chain, ghost: Ghost): Ghost {
  const { q, converged, positionError, rotationError } = solveInverseKinematics(
    chain,
    taskOf(chain, ghost),
    ghost.q,
  );
  return {
    ...ghost,
    q: Array.from(q),
    reached: converged,
    off: { position: positionError, rotation: rotationError },
  };
}

function taskOf(chain: Chain, { position, rotation, tilt, q }: Ghost): IkTask {
  const leans = tiltAxisOf(chain);
  if (!leans || tilt === null) return { position, rotation };
  // The plane the arm reaches in goes through the wanted point; which side of it is forward the ghost knows.
  const out = Math.hypot(position[0], position[1]);
  const radial: Vec3 = out > 1e-6 ? [position[0] / out, position[1] / out, 0] : [1, 0, 0];
  const side = forwardSide(chain, q, leans.toolAxis);
  const base: Vec3 = [side * Math.sin(tilt) * radial[0], side * Math.sin(tilt) * radial[1], Math.cos(tilt)];
  return { position, axis: { tool: leans.toolAxis, base } };
}

/** Whether a growing tilt leans the tool outward (1) or inward (−1): seen by tilting a little further. */
function forwardSide(chain: Chain, q: readonly number[], toolAxis: Vec3): 1 | -1 {
  const leans = tiltAxisOf(chain)!;
  const { position, rotation } = forwardKinematics(chain, q);
  const out = Math.hypot(position[0], position[1]) || 1;
  const pointsOut = (r: ArrayLike<number>) =>
    [0, 1].reduce(
      (sum, row) =>
        sum +
        (position[row]! / out) *
          (r[3 * row]! * toolAxis[0] + r[3 * row + 1]! * toolAxis[1] + r[3 * row + 2]! * toolAxis[2]),
      0,
    );
  const before = { out: pointsOut(rotation), tilt: toolTilt(chain, q)! };
  // sin(tilt)·side is how far the axis points outward; where it points upright, a small turn tells.
  if (Math.abs(Math.sin(before.tilt)) > 0.05) return before.out * Math.sin(before.tilt) > 0 ? 1 : -1;
  const turned = q.map((value, i) => value + (i === leans.joint ? 0.2 : 0));
  const after = { out: pointsOut(forwardKinematics(chain, turned).rotation), tilt: toolTilt(chain, turned)! };
  return (after.out - before.out) * Math.sin(after.tilt - before.tilt) > 0 ? 1 : -1;
}
