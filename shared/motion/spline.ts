/**
 * A cubic spline of n joints through evenly spaced knots, with continuous second derivative: what jerk-limited
 * motion along a curved joint path needs. Row by row: knot after knot, n joints each.
 *
 * @see Press et al., Numerical Recipes, §3.3 (cubic spline interpolation), here with clamped ends
 */
export interface Spline {
  n: number;
  /** Knots minus one. */
  segments: number;
  /** Distance of the knots in the parameter. */
  step: number;
  q: Float64Array;
  /** Second derivatives at the knots. */
  bend: Float64Array;
}

/**
 * @param q - (segments + 1) · n values
 * @param first @param last - derivatives by the parameter at both ends, n each
 */
export function splineThrough(
  n: number,
  q: Float64Array,
  step: number,
  first: ArrayLike<number>,
  last: ArrayLike<number>,
): Spline {
  const segments = q.length / n - 1;
  const bend = new Float64Array(q.length);
  // The tridiagonal system has the same matrix for every joint: 2 1 / 1 4 1 / … / 1 2.
  const factor = new Float64Array(segments + 1);
  const h = step;
  factor[0] = 0.5;
  for (let k = 1; k < segments; k++) factor[k] = 1 / (4 - factor[k - 1]!);
  for (let i = 0; i < n; i++) {
    bend[i] = (3 / h) * ((q[n + i]! - q[i]!) / h - first[i]!);
    for (let k = 1; k < segments; k++) {
      const o = k * n + i;
      const right = (6 / (h * h)) * (q[o + n]! - 2 * q[o]! + q[o - n]!);
      bend[o] = (right - bend[o - n]!) * factor[k]!;
    }
    const o = segments * n + i;
    const right = (6 / h) * (last[i]! - (q[o]! - q[o - n]!) / h);
    bend[o] = (right - bend[o - n]!) / (2 - factor[segments - 1]!);
    for (let k = segments - 1; k >= 0; k--) bend[k * n + i]! -= factor[k]! * bend[(k + 1) * n + i]!;
  }
  return { n, segments, step, q, bend };
}

/** Which segment s lies in, and how far into it, 0 to 1; clamped to the ends. */
function locate(spline: Spline, s: number): { k: number; u: number } {
  const x = Math.min(Math.max(s / spline.step, 0), spline.segments);
  const k = Math.min(Math.floor(x), spline.segments - 1);
  return { k, u: x - k };
}

/** Joint values at parameter s into `out`. */
export function splineValue(spline: Spline, s: number, out: number[] | Float64Array): void {
  const { n, step, q, bend } = spline;
  const { k, u } = locate(spline, s);
  const v = 1 - u;
  const c = (step * step) / 6;
  const cv = c * (v * v * v - v);
  const cu = c * (u * u * u - u);
  for (let i = 0; i < n; i++) {
    const a = k * n + i;
    out[i] = v * q[a]! + u * q[a + n]! + cv * bend[a]! + cu * bend[a + n]!;
  }
}

/** First and second derivative by the parameter at s. */
export function splineRates(
  spline: Spline,
  s: number,
  first: number[] | Float64Array,
  second: number[] | Float64Array,
): void {
  const { n, step, q, bend } = spline;
  const { k, u } = locate(spline, s);
  const v = 1 - u;
  for (let i = 0; i < n; i++) {
    const a = k * n + i;
    first[i] =
      (q[a + n]! - q[a]!) / step + (step / 6) * ((3 * u * u - 1) * bend[a + n]! - (3 * v * v - 1) * bend[a]!);
    second[i] = v * bend[a]! + u * bend[a + n]!;
  }
}
