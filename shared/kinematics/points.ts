import type { Chain } from './chain';
import { checkLength, sweepFrames } from './frames';
import { ikMemory } from './ik-memory';

/**
 * Speeds and reaches of the modelled points: link origins, places of the next joints, far ends of links and
 * the tool point (see `Chain.points`). They serve the speed rule, which is about the whole arm and not the tool alone.
 */

/** Speed of the fastest modelled point, m/s in the base frame, for joint speeds qd (rad/s, m/s). Allocates nothing. */
export function fastestPointSpeed(chain: Chain, q: ArrayLike<number>, qd: ArrayLike<number>): number {
  checkLength(chain, q, 'q');
  checkLength(chain, qd, 'qd');
  sweepFrames(chain, q);
  const { n, frames, prismatic, points, pointLinks } = chain;
  // The motion of the current link, as its angular velocity w and the velocity v of its origin.
  let wx = 0;
  let wy = 0;
  let wz = 0;
  let vx = 0;
  let vy = 0;
  let vz = 0;
  let fastest = 0;
  let k = 0;
  for (let i = 0; i < n; i++) {
    const o = 12 * i;
    const before = o - 12;
    if (i > 0) {
      const dx = frames[o + 9]! - frames[before + 9]!;
      const dy = frames[o + 10]! - frames[before + 10]!;
      const dz = frames[o + 11]! - frames[before + 11]!;
      vx += wy * dz - wz * dy;
      vy += wz * dx - wx * dz;
      vz += wx * dy - wy * dx;
    }
    const speed = qd[i]!;
    if (prismatic[i] === 1) {
      vx += speed * frames[o + 2]!;
      vy += speed * frames[o + 5]!;
      vz += speed * frames[o + 8]!;
    } else {
      wx += speed * frames[o + 2]!;
      wy += speed * frames[o + 5]!;
      wz += speed * frames[o + 8]!;
    }
    for (; k < pointLinks.length && pointLinks[k] === i; k++) {
      const px = points[3 * k]!;
      const py = points[3 * k + 1]!;
      const pz = points[3 * k + 2]!;
      const rx = frames[o]! * px + frames[o + 1]! * py + frames[o + 2]! * pz;
      const ry = frames[o + 3]! * px + frames[o + 4]! * py + frames[o + 5]! * pz;
      const rz = frames[o + 6]! * px + frames[o + 7]! * py + frames[o + 8]! * pz;
      const ux = vx + wy * rz - wz * ry;
      const uy = vy + wz * rx - wx * rz;
      const uz = vz + wx * ry - wy * rx;
      const squared = ux * ux + uy * uy + uz * uz;
      if (squared > fastest) fastest = squared;
    }
  }
  return Math.sqrt(fastest);
}

/**
 * Distance from a joint's axis to the farthest modelled point that the joint moves, m, in configuration q:
 * the speed of that point for 1 rad/s of this joint alone. For a sliding joint 1 (m/s for 1 m/s).
 */
export function radiusAboutJoint(chain: Chain, q: ArrayLike<number>, joint: number): number {
  checkLength(chain, q, 'q');
  if (chain.prismatic[joint] === 1) return 1;
  sweepFrames(chain, q);
  const { frames, points, pointLinks } = chain;
  const a = 12 * joint;
  let farthest = 0;
  for (let k = 0; k < pointLinks.length; k++) {
    const link = pointLinks[k]!;
    if (link < joint) continue;
    const o = 12 * link;
    const px = points[3 * k]!;
    const py = points[3 * k + 1]!;
    const pz = points[3 * k + 2]!;
    const rx = frames[o]! * px + frames[o + 1]! * py + frames[o + 2]! * pz + frames[o + 9]! - frames[a + 9]!;
    const ry =
      frames[o + 3]! * px + frames[o + 4]! * py + frames[o + 5]! * pz + frames[o + 10]! - frames[a + 10]!;
    const rz =
      frames[o + 6]! * px + frames[o + 7]! * py + frames[o + 8]! * pz + frames[o + 11]! - frames[a + 11]!;
    const ux = frames[a + 5]! * rz - frames[a + 8]! * ry;
    const uy = frames[a + 8]! * rx - frames[a + 2]! * rz;
    const uz = frames[a + 2]! * ry - frames[a + 5]! * rx;
    farthest = Math.max(farthest, ux * ux + uy * uy + uz * uz);
  }
  return Math.sqrt(farthest);
}

/** How far the tool point can be from the first joint at most, m: an upper bound over all configurations. */
export function reachOf(chain: Chain): number {
  return ikMemory(chain).reach;
}

/** Where the modelled points are, three numbers each, m in the base frame. */
export function pointPlaces(chain: Chain, q: ArrayLike<number>, out?: Float64Array): Float64Array {
  checkLength(chain, q, 'q');
  sweepFrames(chain, q);
  const { frames, points, pointLinks } = chain;
  const to = out ?? new Float64Array(points.length);
  for (let k = 0; k < pointLinks.length; k++) {
    const o = 12 * pointLinks[k]!;
    for (let r = 0; r < 3; r++)
      to[3 * k + r] =
        frames[o + 3 * r]! * points[3 * k]! +
        frames[o + 3 * r + 1]! * points[3 * k + 1]! +
        frames[o + 3 * r + 2]! * points[3 * k + 2]! +
        frames[o + 9 + r]!;
  }
  return to;
}

/** Height of the lowest modelled point above the base frame's xy plane, the bench the arm stands on, m. Allocates nothing. */
export function lowestPoint(chain: Chain, q: ArrayLike<number>): number {
  checkLength(chain, q, 'q');
  sweepFrames(chain, q);
  const { frames, points, pointLinks } = chain;
  let lowest = Number.POSITIVE_INFINITY;
  for (let k = 0; k < pointLinks.length; k++) {
    const o = 12 * pointLinks[k]!;
    const height =
      frames[o + 6]! * points[3 * k]! +
      frames[o + 7]! * points[3 * k + 1]! +
      frames[o + 8]! * points[3 * k + 2]! +
      frames[o + 11]!;
    if (height < lowest) lowest = height;
  }
  return lowest;
}

/**
 * Upper bound, per joint, of `radiusAboutJoint` over every configuration, whatever the turning joints do and
 * over the whole travel of the sliding ones: what to reckon with while the arm does not know where it stands.
 * The triangle inequality along the links; lengths along the joint's own axis do not count for as long as
 * the axes that follow are parallel to it. Infinite for an arm with a sliding joint of unlimited travel.
 */
export function worstReach(chain: Chain): Float64Array {
  const { n, fixed, prismatic, travel } = chain;
  return Float64Array.from({ length: n }, (_, joint) => {
    if (prismatic[joint] === 1) return 1;
    let toOrigin = 0;
    let parallel = true;
    let farthest = farthestPoint(chain, joint, parallel);
    for (let link = joint + 1; link < n; link++) {
      const o = 12 * link;
      toOrigin += Math.hypot(fixed[o + 9]!, fixed[o + 10]!, parallel ? 0 : fixed[o + 11]!);
      parallel &&= Math.abs(fixed[o + 8]!) > PARALLEL;
      if (!parallel) toOrigin += travel[link]!;
      farthest = Math.max(farthest, toOrigin + farthestPoint(chain, link, parallel));
    }
    return farthest;
  });
}

/** Cosine between axes that count as parallel: their angle, 1e-7 rad, is rounding of π/2 and the like. */
const PARALLEL = 1 - 1e-14;

/** Farthest modelled point of a link from the link's origin, or from its joint's axis, m. */
function farthestPoint(chain: Chain, link: number, fromAxis: boolean): number {
  let farthest = 0;
  chain.pointLinks.forEach((owner, k) => {
    if (owner !== link) return;
    const along = fromAxis ? 0 : chain.points[3 * k + 2]!;
    farthest = Math.max(farthest, Math.hypot(chain.points[3 * k]!, chain.points[3 * k + 1]!, along));
  });
  return farthest;
}
