import { type Chain, forwardKinematics, type LinePath } from '../kinematics';
import { alongPath, type MotionPath, pathRates } from './path';
import { splineValue } from './spline';
import { inTime, LINE_SPEED_M_S, paceOf, type ToolPath } from './tool-path';

/** The blended way is looked at in so many places, more on a long one: one each so many seconds at the full ceiling. */
const LEAST_SAMPLES = 160;
const MOST_SAMPLES = 1200;
const SAMPLE_S = 0.01;
/** Of either path at most this share goes into one corner, so that the next corner has room too. */
const MOST_SHARE = 0.5;
/** How finely the place where the corner begins is looked for, as a share of the path. */
const SEARCH = 400;

/**
 * Goes from one path over into the next without standing at the corner between them. The tool leaves the first
 * path no farther than `corner` before its end and is on the second one no farther than `corner` after its
 * start; in between the end of the one and the start of the other are laid over each other, so that speed and
 * acceleration are continuous and the arm may slow in the bend as its joints need.
 *
 * @param second - begins where `first` ends
 * @param corner - m, distance of the tool point from the corner
 * @param fraction - the ceiling it is meant for, as in `toolPath`
 * @returns one path over both; null where a joint would leave its soft limits in the bend or has been outside before
 * @throws RangeError if the paths do not meet
 */
export function blendPaths(
  chain: Chain,
  first: MotionPath,
  second: MotionPath,
  corner: number,
  fraction = 1,
): ToolPath | null {
  const { n } = chain;
  const end = alongPath(first, first.length, new Float64Array(n));
  const start = alongPath(second, 0, new Float64Array(n));
  if (end.some((value, i) => Math.abs(value - start[i]!) > 1e-6))
    throw new RangeError('the second path does not begin where the first one ends');
  const [a, b] = [secondsPerUnit(chain, first), secondsPerUnit(chain, second)];
  // Both paths give as much of their time as the one that gets away from the corner sooner.
  const half = Math.min(
    a * cornerLength(chain, first, corner, -1),
    b * cornerLength(chain, second, corner, 1),
  );
  const before = a * first.length - half;
  const total = a * first.length + b * second.length;
  const samples = Math.round(Math.min(MOST_SAMPLES, Math.max(LEAST_SAMPLES, total / SAMPLE_S)));
  const q = new Float64Array(n * (samples + 1));
  const tangent = new Float64Array(n * (samples + 1));
  const memory = { at: new Float64Array(n), rate: new Float64Array(n), bend: new Float64Array(n) };
  for (let k = 0; k <= samples; k++) {
    const time = (total * k) / samples;
    const u = half > 0 ? Math.min(1, Math.max(0, (time - before) / (2 * half))) : time > before ? 1 : 0;
    // Within the corner the first path runs out and the second sets in, each over the whole of the bend.
    const one = Math.min(time, before) + 2 * half * (u - setIn(u));
    const two = 2 * half * setIn(u) + Math.max(0, time - before - 2 * half);
    const slope = u > 0 && u < 1 ? smooth(u) : u;
    addTo(q, tangent, k, first, one / a, (1 - slope) / a, total, memory);
    addTo(q, tangent, k, second, two / b, slope / b, total, memory);
    for (let i = 0; i < n; i++) q[k * n + i]! -= end[i]!;
  }
  const line: LinePath = { samples, q, tangent, length: total * LINE_SPEED_M_S, angle: 0 };
  const path = inTime(chain, line, paceOf(chain, line, fraction, true), samples, 1, null);
  return staysInside(path) ? path : null;
}

/** Beyond a limit by more than this, rad or m, is no rounding any more: kept back to the limit it would be felt as a jerk. */
const ROUNDING = 1e-8;

function staysInside({ spline, lower, upper }: ToolPath): boolean {
  const { n, segments, step } = spline;
  const q = new Float64Array(n);
  for (let k = 0; k <= 2 * segments; k++) {
    splineValue(spline, (k * step) / 2, q);
    for (let i = 0; i < n; i++)
      if (q[i]! < lower[i]! - ROUNDING || q[i]! > upper[i]! + ROUNDING) return false;
  }
  return true;
}

/** From 0 to 1 with no slope and no bend at either end. */
const smooth = (u: number) => u * u * u * (10 + u * (6 * u - 15));
/** Its integral from 0. */
const setIn = (u: number) => u ** 4 * (2.5 + u * (u - 3));

/** A joint path's parameter is a travel; in seconds at the full ceiling every path is alike. */
function secondsPerUnit(chain: Chain, path: MotionPath): number {
  if (path.kind === 'tool') return 1;
  let seconds = path.pointSpeed / LINE_SPEED_M_S;
  for (let i = 0; i < chain.n; i++)
    seconds = Math.max(seconds, Math.abs(path.direction[i]!) / chain.velocity[i]!);
  return seconds;
}

/** How much of a path, in its parameter, lies within `corner` of its end (−1) or start (1). */
function cornerLength(chain: Chain, path: MotionPath, corner: number, side: 1 | -1): number {
  const q = new Float64Array(chain.n);
  const from = side > 0 ? 0 : path.length;
  const at = [...forwardKinematics(chain, alongPath(path, from, q)).position] as const;
  const most = MOST_SHARE * path.length;
  for (let k = 1; k <= SEARCH; k++) {
    const length = (most * k) / SEARCH;
    const { position } = forwardKinematics(chain, alongPath(path, from + side * length, q));
    const away = Math.hypot(position[0] - at[0], position[1] - at[1], position[2] - at[2]);
    if (away > corner) return (most * (k - 1)) / SEARCH;
  }
  return most;
}

/** Adds a path's place and its slope (per fraction of the whole way) to sample k. */
function addTo(
  q: Float64Array,
  tangent: Float64Array,
  k: number,
  path: MotionPath,
  s: number,
  rate: number,
  total: number,
  memory: { at: Float64Array; rate: Float64Array; bend: Float64Array },
): void {
  const n = memory.at.length;
  alongPath(path, s, memory.at);
  pathRates(path, { position: s, velocity: 1, acceleration: 0 }, memory.rate, memory.bend);
  for (let i = 0; i < n; i++) {
    q[k * n + i]! += memory.at[i]!;
    tangent[k * n + i]! += total * rate * memory.rate[i]!;
  }
}
