import { gravityTorques } from '../dynamics';
import { type Chain, type RigidBody, seededRandom } from '../kinematics';

export interface WorstTorque {
  /** Largest size of the holding torque, N·m (sliding joints: force, N). */
  torque: number;
  /** A configuration that needs it, rad (m). */
  q: number[];
}

/** Random starts per joint beside the middle and the two corners of the joint box. */
const STARTS = 24;
const SWEEPS = 40;
/** A sweep that gains less than this share ends a climb; the best climb is then finished to rounding. */
const GAIN = 1e-4;
const LAST_GAIN = 1e-14;

/**
 * The largest holding torque of every joint over the whole joint box, standing still.
 *
 * Climbs one coordinate at a time from many starts. A climb is exact in each coordinate: with all else fixed, a
 * holding torque is a + b·cos q + c·sin q in a turning joint and a straight line in a sliding one, since every
 * mass's position is. Two further values tell all of it.
 *
 * @param options.payload - what the tool carries, in the tool frame
 * @param options.gravity - m/s² in the base frame; the chain's own unless given
 * @returns per joint; a joint that gravity never loads has torque 0 (to rounding)
 */
export function worstGravityTorques(
  chain: Chain,
  options: { payload?: RigidBody | null; gravity?: ArrayLike<number> } = {},
): WorstTorque[] {
  const starts = startsOf(chain);
  const out = new Float64Array(chain.n);
  const given = { payload: options.payload, gravity: options.gravity, out };
  return Array.from({ length: chain.n }, (_, joint) => {
    let worst = { torque: -1, q: new Float64Array(chain.n), sign: 1 };
    for (const start of starts)
      for (const sign of [1, -1]) {
        const q = start.slice();
        const torque = climb(chain, q, (at) => sign * gravityTorques(chain, at, given)[joint]!, GAIN);
        if (torque > worst.torque) worst = { torque, q, sign };
      }
    climb(chain, worst.q, (at) => worst.sign * gravityTorques(chain, at, given)[joint]!, LAST_GAIN);
    // The value is looked up at the place itself, not taken from the climb's arithmetic.
    return { torque: Math.abs(gravityTorques(chain, worst.q, given)[joint]!), q: Array.from(worst.q) };
  });
}

/** Changes q coordinate by coordinate to where `torque` is largest; returns it. */
function climb(chain: Chain, q: Float64Array, torque: (q: Float64Array) => number, gain: number): number {
  let now = torque(q);
  for (let sweep = 0; sweep < SWEEPS; sweep++) {
    const before = now;
    for (let i = 0; i < chain.n; i++)
      now = chain.prismatic[i] === 1 ? bestSlide(chain, q, i, torque) : bestTurn(chain, q, i, now, torque);
    if (now - before <= gain * Math.max(Math.abs(now), Number.MIN_VALUE)) break;
  }
  return now;
}

function bestTurn(
  chain: Chain,
  q: Float64Array,
  i: number,
  now: number,
  torque: (q: Float64Array) => number,
): number {
  const [lower, upper] = [chain.lower[i]!, chain.upper[i]!];
  const at = q[i]!;
  q[i] = at + Math.PI / 2;
  const quarter = torque(q);
  q[i] = at + Math.PI;
  const half = torque(q);
  const a = (now + half) / 2;
  const b = (now - half) / 2;
  const c = quarter - a;
  const value = (angle: number) => a + b * Math.cos(angle - at) + c * Math.sin(angle - at);
  let best = at;
  const top = at + Math.atan2(c, b);
  const turn = 2 * Math.PI;
  // The top within the limits, whichever turn it is on; otherwise one of the limits is best.
  const inside = top + turn * Math.ceil((lower - top) / turn);
  const candidates =
    inside <= upper || !Number.isFinite(lower) ? [Number.isFinite(lower) ? inside : top] : [lower, upper];
  for (const angle of candidates) if (value(angle) > value(best)) best = angle;
  q[i] = best;
  return value(best);
}

function bestSlide(chain: Chain, q: Float64Array, i: number, torque: (q: Float64Array) => number): number {
  q[i] = chain.lower[i]!;
  const atLower = torque(q);
  q[i] = chain.upper[i]!;
  const atUpper = torque(q);
  if (atUpper >= atLower) return atUpper;
  q[i] = chain.lower[i]!;
  return atLower;
}

/** Middle, corners and evenly drawn places of the joint box; a turning joint without limits counts one turn. */
function startsOf(chain: Chain): Float64Array[] {
  for (let i = 0; i < chain.n; i++)
    if (chain.prismatic[i] === 1 && !Number.isFinite(chain.upper[i]! - chain.lower[i]!))
      throw new RangeError(
        `joint ${i + 1} (${chain.names[i]}) slides without limits: its worst torque has no bound`,
      );
  const lower = chain.lower.map((value) => (Number.isFinite(value) ? value : -Math.PI));
  const upper = chain.upper.map((value) => (Number.isFinite(value) ? value : Math.PI));
  const middle = lower.map((value, i) => (value + upper[i]!) / 2);
  const random = seededRandom(7);
  const drawn = Array.from({ length: STARTS }, () =>
    lower.map((value, i) => value + random() * (upper[i]! - value)),
  );
  return [middle, lower, upper, ...drawn];
}
