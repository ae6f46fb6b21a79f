import {
  type Chain,
  fastestPointSpeed,
  followLine,
  forwardKinematics,
  type LinePath,
  type LineRefusal,
  type LineTarget,
  sampleLine,
  toolTilt,
} from '../kinematics';
import type { AxisLimits } from './profile';
import { type Spline, splineRates, splineThrough, splineValue } from './spline';

/**
 * A straight tool move (or a turn in place) as a joint path that one jerk-limited law of time can drive. Its
 * parameter is not the way of the tool but the time, s, that the place takes at the full ceiling: in the open
 * the tool then goes at an even speed, and where a joint would have to go faster than it can (near a singular
 * place) or to turn round sharply, the same steady parameter makes the tool slow down by itself, beforehand.
 */
export interface ToolPath {
  kind: 'tool';
  /** Largest value of the parameter, s at the full ceiling. */
  length: number;
  /** Joint values and their derivatives by the parameter. */
  spline: Spline;
  /** Speed of the fastest modelled point for a parameter that runs at 1 per s, the largest along the path; m/s. */
  pointSpeed: number;
  /** Soft limits of the joints: where the way touches one, the spline's rounding stays inside. */
  lower: Float64Array;
  upper: Float64Array;
  /** Why it ends where it does; null when it ends where it was meant to. */
  end: LineRefusal | null;
}

/** What a tool does at the full ceiling: the speed of its point, m/s, and of its turning, rad/s. Our own figures, inside the 250 mm/s of ISO 10218-1. */
export const LINE_SPEED_M_S = 0.25;
export const TURN_SPEED_RAD_S = Math.PI / 2;

/** Even steps of a line: a sample at least so often along the way of the tool, m and rad. */
const SAMPLE_M = 0.004;
const SAMPLE_RAD = 0.03;
const LEAST_SAMPLES = 32;
const MOST_SAMPLES = 256;
/** Even steps of the first, coarse look at how far a line can be followed. */
const COARSE = 24;
const SHORTEST_STEP = 2e-4;
/** Before a refusal the path ends so much earlier (fraction): a place just inside the limit. */
const INSIDE = 1e-3;
/** Where the tool is down to this share of its even speed, the path ends: nothing is gained by crawling on. */
const SLOWEST = 0.04;
/** Share of a joint's acceleration and jerk that the curve of the path may take up; the law of time has the rest. */
const CURVE_SHARE = 0.15;
/**
 * So much of the way is gone at one even speed, that of its slowest place: m, rad; all of a line that has an end.
 * But places that slow it to less than this share are left to themselves.
 */
const EVEN_M = 0.15;
const EVEN_RAD = 1.2;
const EVEN_LEAST = 0.25;
/** Slowing and quickening along the path are spread over about this long, s at full ceiling. */
const EASE_S = 0.2;
/** Knots at least this often: s at the full ceiling, and rad or share of an arm's length per joint. */
const KNOT_S = 0.025;
const KNOT_TRAVEL = 0.02;
const MOST_KNOTS = 800;
const LEAST_KNOTS = 24;
/** A path may be off its line by so much; otherwise it is planned again with so many times the samples. */
const OFF_LINE_M = 2e-5;
const FINER = [1, 3, 9];
/** Shorter than this a way is none, s at the full ceiling. */
const NOTHING = 1e-6;

/**
 * Plans a straight tool move from `from`.
 *
 * @param options.fraction - the ceiling it is meant for: curves are taken as wide as that speed needs. Any other
 *   ceiling keeps the limits too, but not as quickly
 * @param options.asFar - where the line cannot be followed to its end, go as far as it can, and say in `end` why
 * @returns the path; or the refusal alone, where not even its beginning can be followed (or, without `asFar`, its end)
 * @throws RangeError if the target has numbers that are not finite
 */
export function toolPath(
  chain: Chain,
  from: ArrayLike<number>,
  target: LineTarget,
  options: { fraction?: number; asFar?: boolean } = {},
): { path: ToolPath; refusal: null } | { path: null; refusal: LineRefusal } {
  const coarse = followLine(chain, from, target, { samples: COARSE, shortestStep: SHORTEST_STEP });
  if (coarse.refusal && !options.asFar) return refuseFinely(chain, from, target, coarse.refusal);
  let end = coarse.refusal;
  const share = end ? Math.max(0, end.fraction - INSIDE) : 1;
  if (end && share === 0) return { path: null, refusal: end };
  const shortened = share === 1 ? target : partOf(chain, from, target, share);
  let planned: ToolPath | null = null;
  for (const finer of FINER) {
    const samples = finer * samplesFor(chain, from, shortened);
    const line = followLine(chain, from, shortened, { samples });
    if (line.refusal) return { path: null, refusal: line.refusal };
    const pace = paceOf(chain, line.path, options.fraction ?? 1, options.asFar ?? false);
    const slow = slowPlace(chain, line.path, pace) ?? pinnedPlace(chain, line.path);
    if (slow) {
      end = { joint: slow.joint, fraction: (share * slow.at) / samples, reason: slow.reason };
      if (slow.at < 2 || !options.asFar) return { path: null, refusal: end };
    }
    planned = inTime(chain, line.path, pace, slow?.at ?? samples, finer, end);
    if (offLine(chain, planned, shortened) < OFF_LINE_M) break;
  }
  return { path: planned!, refusal: null };
}

/** Farthest that the tool point gets from its straight line, m, looked for between the knots. */
function offLine(chain: Chain, path: ToolPath, target: LineTarget): number {
  const { spline } = path;
  const q = new Float64Array(spline.n);
  splineValue(spline, 0, q);
  const tool = forwardKinematics(chain, q);
  const [x, y, z] = tool.position;
  const way = [target.position[0]! - x, target.position[1]! - y, target.position[2]! - z];
  const length = Math.hypot(way[0]!, way[1]!, way[2]!);
  let most = 0;
  for (let k = 0; k < spline.segments; k++) {
    splineValue(spline, (k + 0.5) * spline.step, q);
    forwardKinematics(chain, q, tool);
    const dx = tool.position[0] - x;
    const dy = tool.position[1] - y;
    const dz = tool.position[2] - z;
    const along = length > 0 ? (dx * way[0]! + dy * way[1]! + dz * way[2]!) / length : 0;
    most = Math.max(most, dx * dx + dy * dy + dz * dz - along * along);
  }
  return Math.sqrt(most);
}

/** The coarse look found that it does not go; the fraction is worth knowing exactly. */
function refuseFinely(
  chain: Chain,
  from: ArrayLike<number>,
  target: LineTarget,
  coarse: LineRefusal,
): { path: null; refusal: LineRefusal } {
  return { path: null, refusal: followLine(chain, from, target, { samples: COARSE }).refusal ?? coarse };
}

/** The first part of a line. Turns and tilts shrink with it; a rotation to get to becomes the turn that it is. */
function partOf(chain: Chain, from: ArrayLike<number>, target: LineTarget, share: number): LineTarget {
  const { position } = forwardKinematics(chain, from);
  const to = position.map((value, k) => value + share * (target.position[k]! - value));
  if (target.rotation) throw new RangeError('only lines given by a turn or a tilt are cut short');
  if (target.turn)
    return { position: to, turn: { axis: target.turn.axis, angle: share * target.turn.angle } };
  if (target.tilt !== undefined) return { position: to, tilt: share * target.tilt };
  return target.keep ? { position: to, keep: target.keep } : { position: to };
}

/** Why no straight line leads to a configuration: a refusal on the way, or an arrival in another posture of the arm. */
export interface LineEnd {
  joint: number;
  fraction: number;
  reason: LineRefusal['reason'] | 'posture';
}

/** An arrival so near is the configuration asked for, rad or m. */
const ARRIVED = 1e-6;

/**
 * The straight move of the tool from one configuration to another: its point on the line, its rotation about one
 * fixed axis, or, on an arm with too few joints for that, its tilt changing evenly.
 *
 * @returns the path; or why there is none, from the attempt that got farthest
 */
export function straightPath(
  chain: Chain,
  from: ArrayLike<number>,
  to: ArrayLike<number>,
  fraction = 1,
): { path: ToolPath; refusal: null } | { path: null; refusal: LineEnd } {
  let farthest: LineEnd | null = null;
  const arrived = new Float64Array(chain.n);
  for (const target of targetsTo(chain, from, to)) {
    const { path, refusal } = toolPath(chain, from, target, { fraction });
    if (path) {
      splineValue(path.spline, path.length, arrived);
      const off = arrived.findIndex((value, i) => Math.abs(value - to[i]!) > ARRIVED);
      if (off < 0) {
        // To the last digit: whoever asks where the arm stands gets the pose.
        path.spline.q.set(Float64Array.from(to), path.spline.segments * chain.n);
        return { path, refusal: null };
      }
      farthest = { joint: off, fraction: 1, reason: 'posture' };
    } else if (!farthest || refusal.fraction > farthest.fraction) farthest = refusal;
  }
  return { path: null, refusal: farthest! };
}

function targetsTo(chain: Chain, from: ArrayLike<number>, to: ArrayLike<number>): LineTarget[] {
  const { position, rotation } = forwardKinematics(chain, to);
  const targets: LineTarget[] = [{ position, rotation }];
  if (chain.n >= 6) return targets;
  const before = toolTilt(chain, from);
  const after = toolTilt(chain, to);
  if (before !== null && after !== null) {
    const turn = after - before;
    targets.push({ position, tilt: turn - 2 * Math.PI * Math.round(turn / (2 * Math.PI)) });
  }
  targets.push({ position });
  return targets;
}

function samplesFor(chain: Chain, from: ArrayLike<number>, target: LineTarget): number {
  const { position } = forwardKinematics(chain, from);
  const way = Math.hypot(...position.map((value, k) => target.position[k]! - value));
  // A rotation to get to is at most half a turn.
  const angle = target.turn ? Math.abs(target.turn.angle) : target.rotation ? Math.PI : (target.tilt ?? 0);
  const wanted = Math.max(way / SAMPLE_M, Math.abs(angle) / SAMPLE_RAD);
  return Math.round(Math.min(MOST_SAMPLES, Math.max(LEAST_SAMPLES, wanted)));
}

/** Per sample: the time (s at the full ceiling) that the whole way would take at the pace possible there, and what sets it. */
interface Pace {
  /** By the speed of the tool in the open alone. */
  open: number;
  /** By everything, smoothed: never quicker than what is possible. */
  seconds: Float64Array;
}

export function paceOf(chain: Chain, line: LinePath, fraction: number, asFar: boolean): Pace {
  const { n } = chain;
  const { samples, tangent, q } = line;
  const open = Math.max(line.length / LINE_SPEED_M_S, line.angle / TURN_SPEED_RAD_S, NOTHING);
  const raw = new Float64Array(samples + 1);
  const place = new Float64Array(n);
  const rate = new Float64Array(n);
  const h = 1 / samples;
  for (let k = 0; k <= samples; k++) {
    for (let i = 0; i < n; i++) {
      place[i] = q[k * n + i]!;
      rate[i] = tangent[k * n + i]!;
    }
    let least = Math.max(open, fastestPointSpeed(chain, place, rate) / LINE_SPEED_M_S);
    const a = Math.max(k - 1, 0);
    const b = Math.min(k + 1, samples);
    for (let i = 0; i < n; i++) {
      const bend = (tangent[b * n + i]! - tangent[a * n + i]!) / ((b - a) * h);
      const twist =
        k === 0 || k === samples
          ? 0
          : (tangent[b * n + i]! - 2 * tangent[k * n + i]! + tangent[a * n + i]!) / (h * h);
      least = Math.max(
        least,
        Math.abs(rate[i]!) / chain.velocity[i]!,
        fraction * Math.sqrt(Math.abs(bend) / (CURVE_SHARE * chain.acceleration[i]!)),
        fraction * Math.cbrt(Math.abs(twist) / (CURVE_SHARE * chain.jerk[i]!)),
      );
    }
    raw[k] = least;
  }
  const share = asFar
    ? Math.min(1, Math.max(EVEN_M / line.length, 0), Math.max(EVEN_RAD / line.angle, 0))
    : 1;
  let even = open;
  for (let k = 0; k <= share * samples; k++)
    if (raw[k]! > even && raw[k]! * EVEN_LEAST <= open) even = raw[k]!;
  for (let k = 0; k <= samples; k++) raw[k] = Math.max(raw[k]!, even);
  return { open, seconds: eased(raw, Math.max(2, Math.ceil((EASE_S / open) * samples))) };
}

/** The smoothest envelope of its kind: the largest value within reach of the window, averaged twice over half of it. */
function eased(raw: Float64Array, window: number): Float64Array {
  const half = Math.max(1, window >> 1);
  const envelope = raw.map((_, k) => {
    let most = 0;
    for (let j = Math.max(0, k - 2 * half); j <= Math.min(raw.length - 1, k + 2 * half); j++)
      if (raw[j]! > most) most = raw[j]!;
    return most;
  });
  return averaged(averaged(envelope, half), half);
}

function averaged(values: Float64Array, half: number): Float64Array {
  const sums = new Float64Array(values.length + 1);
  for (let k = 0; k < values.length; k++) sums[k + 1] = sums[k]! + values[k]!;
  return values.map((_, k) => {
    // The window stays whole by staying even about k: at the ends it shrinks.
    const reach = Math.min(half, k, values.length - 1 - k);
    return (sums[k + reach + 1]! - sums[k - reach]!) / (2 * reach + 1);
  });
}

/** A sample at which a path ends early, and the joint it is for. */
interface Place {
  at: number;
  joint: number;
  reason: LineRefusal['reason'];
}

/**
 * The first sample at which a joint has come to its limit though the line goes on, or leaves the limit it stood at,
 * with an arm that has joints to spare: there that joint would stop or start from one moment to the next.
 */
function pinnedPlace(chain: Chain, { samples, q }: LinePath): Place | null {
  const { n, lower, upper } = chain;
  for (let k = 1; k < samples; k++)
    for (let i = 0; i < n; i++) {
      const at = (row: number) => q[row * n + i]! <= lower[i]! || q[row * n + i]! >= upper[i]!;
      const changes = at(k) !== at(k - 1);
      // Leaving a limit with the first sample is a start like any other.
      if (changes && (k > 1 || at(k))) return { at: k - 1, joint: i, reason: 'limit' };
    }
  return null;
}

/** The first sample at which the tool would only crawl, and the joint that would have to turn fastest there. */
function slowPlace(chain: Chain, line: LinePath, pace: Pace): Place | null {
  const { n } = chain;
  for (let k = 0; k <= line.samples; k++) {
    let fastest = 0;
    let most = 0;
    for (let i = 0; i < n; i++) {
      const seconds = Math.abs(line.tangent[k * n + i]!) / chain.velocity[i]!;
      if (seconds <= most) continue;
      most = seconds;
      fastest = i;
    }
    if (pace.open < SLOWEST * most) return { at: k, joint: fastest, reason: 'singularity' };
  }
  return null;
}

/** The first `last` samples of a line, with the time at full ceiling as parameter. */
export function inTime(
  chain: Chain,
  line: LinePath,
  pace: Pace,
  last: number,
  finer: number,
  end: LineRefusal | null,
): ToolPath {
  const { n } = chain;
  const h = 1 / line.samples;
  // Seconds per fraction is straight between samples, so the time up to a place is exact and can be turned round.
  const at = new Float64Array(last + 1);
  for (let k = 0; k < last; k++) at[k + 1] = at[k]! + (h * (pace.seconds[k]! + pace.seconds[k + 1]!)) / 2;
  const length = at[last]!;
  const segments = finer * knotsFor(chain, line, last, length);
  const step = length / segments;
  const q = new Float64Array(n * (segments + 1));
  const row = new Float64Array(n);
  let k = 0;
  for (let j = 0; j <= segments; j++) {
    const time = Math.min(j * step, length);
    while (k < last - 1 && at[k + 1]! < time) k++;
    const a = pace.seconds[k]!;
    const slope = (pace.seconds[k + 1]! - a) / h;
    const left = Math.max(0, time - at[k]!);
    // a·x + slope·x²/2 = left, in the form that has no cancellation.
    const x = (2 * left) / (a + Math.sqrt(Math.max(0, a * a + 2 * slope * left)));
    sampleLine(line, (k + x / h) * h, row);
    q.set(row, j * n);
  }
  const edge = (k: number) =>
    Array.from({ length: n }, (_, i) => line.tangent[k * n + i]! / pace.seconds[k]!);
  const spline = splineThrough(n, q, step, edge(0), edge(last));
  const { lower, upper } = chain;
  return { kind: 'tool', length, spline, pointSpeed: fastestAlong(chain, spline), lower, upper, end };
}

function knotsFor(chain: Chain, line: LinePath, last: number, length: number): number {
  const { n } = chain;
  let most = 0;
  for (let i = 0; i < n; i++) {
    let travel = 0;
    for (let k = 0; k < last; k++) travel += Math.abs(line.q[(k + 1) * n + i]! - line.q[k * n + i]!);
    most = Math.max(most, travel);
  }
  const wanted = Math.max(length / KNOT_S, most / KNOT_TRAVEL);
  return Math.round(Math.min(MOST_KNOTS, Math.max(LEAST_KNOTS, wanted)));
}

function fastestAlong(chain: Chain, spline: Spline): number {
  const q = new Float64Array(spline.n);
  const first = new Float64Array(spline.n);
  const second = new Float64Array(spline.n);
  let fastest = 0;
  for (let k = 0; k <= 2 * spline.segments; k++) {
    const s = (k * spline.step) / 2;
    splineValue(spline, s, q);
    splineRates(spline, s, first, second);
    fastest = Math.max(fastest, fastestPointSpeed(chain, q, first));
  }
  return fastest;
}

const UNLIMITED = 1e6;
/** Share of a joint's acceleration, and of its jerk, that the curve may take up at the speed in hand. */
const MOST_CURVE = 0.5;

/**
 * Limits of the parameter that keep every joint inside its own velocity, acceleration and jerk limits anywhere on
 * the path: by the chain rule q̇ = q′ṡ, q̈ = q′s̈ + q″ṡ², q⃛ = q′s⃛ + 3q″ṡs̈ + q‴ṡ³.
 *
 * @param fraction - share of the joints' speed limits and of the tool's
 * @param pointSpeed - largest speed of the fastest modelled point, m/s
 * @param going - how fast the parameter runs already: when that is more, the curve takes up more too
 * @param stretch - the part of the path that counts, from and to in the parameter; without it all of it
 */
export function toolPathLimits(
  chain: Chain,
  path: ToolPath,
  fraction: number,
  pointSpeed: number,
  going = 0,
  stretch?: readonly [number, number],
): AxisLimits {
  const { n, segments, step, q, bend } = path.spline;
  const first = stretch ? Math.min(Math.max(Math.floor(stretch[0] / step), 0), segments - 1) : 0;
  const after = stretch ? Math.min(Math.max(Math.ceil(stretch[1] / step), first + 1), segments) : segments;
  let velocity = fraction;
  if (path.pointSpeed > 0) velocity = Math.min(velocity, pointSpeed / path.pointSpeed);
  for (let k = first; k < after; k++)
    for (let i = 0; i < n; i++) {
      const o = k * n + i;
      const sharpest = Math.max(Math.abs(bend[o]!), Math.abs(bend[o + n]!));
      const twist = Math.abs(bend[o + n]! - bend[o]!) / step;
      velocity = Math.min(
        velocity,
        (chain.velocity[i]! * fraction) / steepest(q, bend, o, n, step),
        Math.sqrt((MOST_CURVE * chain.acceleration[i]!) / sharpest),
        Math.cbrt((MOST_CURVE * 0.5 * chain.jerk[i]!) / twist),
      );
    }
  const fast = Math.max(velocity, going);
  let acceleration = Number.POSITIVE_INFINITY;
  let jerk = Number.POSITIVE_INFINITY;
  for (let pass = 0; pass < 2; pass++)
    for (let k = first; k < after; k++)
      for (let i = 0; i < n; i++) {
        const o = k * n + i;
        const slope = steepest(q, bend, o, n, step);
        const sharpest = Math.max(Math.abs(bend[o]!), Math.abs(bend[o + n]!));
        if (pass === 0)
          acceleration = Math.min(
            acceleration,
            Math.max(chain.acceleration[i]! - sharpest * fast * fast, 0.1 * chain.acceleration[i]!) / slope,
            (MOST_CURVE * 0.5 * chain.jerk[i]!) / (3 * sharpest * fast),
          );
        else {
          const twist = Math.abs(bend[o + n]! - bend[o]!) / step;
          const curve = 3 * sharpest * fast * acceleration + twist * fast ** 3;
          jerk = Math.min(jerk, Math.max(chain.jerk[i]! - curve, 0.1 * chain.jerk[i]!) / slope);
        }
      }
  // Joints without limits of their own: any figure does, as long as it is one.
  if (!Number.isFinite(acceleration)) acceleration = UNLIMITED;
  if (!Number.isFinite(jerk)) jerk = UNLIMITED;
  return { velocity, acceleration, jerk };
}

/** Largest |q′| of one joint in one segment: q′ is a parabola there, at most as far beyond its ends as its middle shows. */
function steepest(q: Float64Array, bend: Float64Array, o: number, n: number, step: number): number {
  const chord = (q[o + n]! - q[o]!) / step;
  const a = bend[o]!;
  const b = bend[o + n]!;
  const start = chord - (step / 6) * (2 * a + b);
  const end = chord + (step / 6) * (a + 2 * b);
  let most = Math.max(Math.abs(start), Math.abs(end));
  // Where q″ changes its sign, q′ turns round: there is the extreme.
  if (a * b < 0) {
    const u = a / (a - b);
    most = Math.max(most, Math.abs(start + step * u * (a + (u * (b - a)) / 2)));
  }
  return most;
}
