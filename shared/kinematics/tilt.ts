import type { Chain, Vec3 } from './chain';
import { sweepFrames } from './frames';
import { tiltOf } from './ik-task';
import { seededRandom } from './random';

/** A joint whose axis is level in every configuration, and a direction of the tool that it swings through upright. */
export interface TiltAxis {
  joint: number;
  /** Unit, tool frame; across the joint's axis. */
  toolAxis: Vec3;
}

const LOOKS = 6;
const LEVEL = 1e-9;

/**
 * Arms with too few joints to turn the tool freely can often still tilt it: a base that turns, links in one
 * upright plane, a wrist that bends in it, perhaps a last joint that only spins the tool. Null for all others.
 * Worked out once for a chain.
 */
export function tiltAxisOf(chain: Chain): TiltAxis | null {
  const known = chain.memory.get('tilt') as { axis: TiltAxis | null } | undefined;
  if (known) return known.axis;
  const axis = chain.n < 6 ? (wristOf(chain, chain.n - 1) ?? wristOf(chain, chain.n - 2)) : null;
  chain.memory.set('tilt', { axis });
  return axis;
}

/** How far the tool leans from upright in configuration q, rad; null for arms that cannot tilt it so. */
export function toolTilt(chain: Chain, q: ArrayLike<number>): number | null {
  const tilt = tiltAxisOf(chain);
  if (!tilt) return null;
  sweepFrames(chain, q);
  return tiltOf(chain, tilt.joint, tilt.toolAxis);
}

function wristOf(chain: Chain, joint: number): TiltAxis | null {
  const { n, frames, prismatic, lower, upper } = chain;
  if (joint < 1 || prismatic[joint] === 1) return null;
  const random = seededRandom(7);
  let toolAxis: Vec3 | null = null;
  for (let look = 0; look < LOOKS; look++) {
    const q = Float64Array.from({ length: n }, (_, i) => {
      const from = Number.isFinite(lower[i]!) ? lower[i]! : -1;
      const to = Number.isFinite(upper[i]!) ? upper[i]! : 1;
      return from + random() * (to - from);
    });
    sweepFrames(chain, q);
    const j = 12 * joint;
    if (Math.abs(frames[j + 8]!) > LEVEL) return null;
    const across = toToolFrame(chain, [frames[j + 2]!, frames[j + 5]!, frames[j + 8]!]);
    if (joint === n - 1) {
      toolAxis = anyAcross(across);
      continue;
    }
    // The joint after it spins the tool about a direction that the wrist swings.
    const s = 12 * (n - 1);
    const spin: Vec3 = [frames[s + 2]!, frames[s + 5]!, frames[s + 8]!];
    const dot = spin[0] * frames[j + 2]! + spin[1] * frames[j + 5]! + spin[2] * frames[j + 8]!;
    if (prismatic[n - 1] === 1 || Math.abs(dot) > LEVEL) return null;
    toolAxis = toToolFrame(chain, spin);
  }
  return toolAxis ? { joint, toolAxis } : null;
}

/** A direction of the base frame in the tool frame of `chain.frames`. */
function toToolFrame({ n, frames }: Chain, v: Vec3): Vec3 {
  const o = 12 * n;
  return [0, 1, 2].map(
    (k) => frames[o + k]! * v[0] + frames[o + 3 + k]! * v[1] + frames[o + 6 + k]! * v[2],
  ) as Vec3;
}

/** A unit direction across `v`: of the frame's own axes the one most across it, made exactly so. */
function anyAcross(v: Vec3): Vec3 {
  const least = v.reduce((best, value, k) => (Math.abs(value) < Math.abs(v[best]!) ? k : best), 0);
  const across = [0, 1, 2].map((k) => (k === least ? 1 : 0) - v[least]! * v[k]!) as Vec3;
  const length = Math.hypot(...across);
  return [across[0] / length, across[1] / length, across[2] / length];
}
