/** Enough halvings to separate any two doubles; superlinear steps need about eight. */
const MOST_STEPS = 200;

/**
 * Where a rising function crosses zero, between `low` (value ≤ 0) and `high` (value ≥ 0).
 * Regula falsi with the Anderson–Björck weight, which keeps the bracket and converges superlinearly.
 *
 * @param tolerance - a value this near zero is good enough
 * @see Anderson & Björck, BIT 13 (1973) 253–264
 */
export function risingRoot(f: (x: number) => number, low: number, high: number, tolerance: number): number {
  let a = low;
  let b = high;
  let fa = f(a);
  let fb = f(b);
  if (fa >= 0) return a;
  if (fb <= 0) return b;
  for (let i = 0; i < MOST_STEPS; i++) {
    // Every fifth step halves the bracket, so that no shape of function can crawl.
    let x = i % 5 === 4 ? (a + b) / 2 : (a * fb - b * fa) / (fb - fa);
    if (!(x > a && x < b)) x = (a + b) / 2;
    if (x === a || x === b) break;
    const fx = f(x);
    if (Math.abs(fx) <= tolerance) return x;
    if (fx > 0) {
      const weight = 1 - fx / fb;
      fa *= weight > 0 ? weight : 0.5;
      b = x;
      fb = fx;
    } else {
      const weight = 1 - fx / fa;
      fb *= weight > 0 ? weight : 0.5;
      a = x;
      fa = fx;
    }
  }
  return (a + b) / 2;
}

/** A function and its slope at the place it was last asked for. */
export interface Sloped {
  value: number;
  slope: number;
}

/**
 * The same for a function whose slope is known: Newton's steps from a guess, inside a bracket that only shrinks.
 *
 * @param f - fills and returns `out`; rising between `low` and `high`
 */
export function risingRootNewton(
  f: (x: number, out: Sloped) => Sloped,
  low: number,
  high: number,
  guess: number,
  tolerance: number,
): number {
  let a = low;
  let b = high;
  let x = guess > a && guess < b ? guess : (a + b) / 2;
  for (let i = 0; i < MOST_STEPS; i++) {
    const { value, slope } = f(x, sloped);
    if (value <= tolerance && value >= -tolerance) return x;
    if (value > 0) b = x;
    else a = x;
    const next = x - value / slope;
    // A step that leaves the bracket, or no slope at all, halves it instead.
    const to = next > a && next < b ? next : (a + b) / 2;
    if (to === x || to === a || to === b) return to;
    x = to;
  }
  return x;
}
const sloped: Sloped = { value: 0, slope: 1 };
