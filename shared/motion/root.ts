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
