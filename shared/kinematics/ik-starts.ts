import type { Chain } from './chain';
import type { IkMemory } from './ik-memory';

/** Share of a joint's range, to each side of the seed, from which near starts are drawn. */
const NEAR_SHARE = 0.35;

/** Draws a start anywhere within the limits into `memory.q`. */
export function drawAnywhere(chain: Chain, memory: IkMemory, random: () => number): void {
  const { q, drawLower, drawUpper } = memory;
  for (let i = 0; i < chain.n; i++) q[i] = drawLower[i]! + random() * (drawUpper[i]! - drawLower[i]!);
}

/** Draws a start in the wider neighbourhood of the seed: solutions found from there tend to be near it. */
export function drawAroundSeed(chain: Chain, memory: IkMemory, random: () => number): void {
  const { q, seed, drawLower, drawUpper } = memory;
  for (let i = 0; i < chain.n; i++) {
    const range = drawUpper[i]! - drawLower[i]!;
    const span = chain.prismatic[i] === 1 ? range : Math.min(range, 2 * Math.PI);
    const value = seed[i]! + (2 * random() - 1) * span * NEAR_SHARE;
    q[i] = Math.min(Math.max(value, chain.lower[i]!), chain.upper[i]!);
  }
}

/** How far outside a limit still is rounding; what is let in is then put onto the limit. */
const LIMIT_ROUNDING = 1e-9;

/**
 * Moves turning joints by whole turns, within their limits, as near to the seed as they go.
 *
 * @returns whether every joint could be brought within its limits
 */
export function unwindTowardsSeed(chain: Chain, q: Float64Array, seed: ArrayLike<number>): boolean {
  let inside = true;
  for (let i = 0; i < chain.n; i++) {
    const lower = chain.lower[i]!;
    const upper = chain.upper[i]!;
    if (chain.prismatic[i] === 0) {
      const turn = 2 * Math.PI;
      const fewest = Math.ceil((lower - LIMIT_ROUNDING - q[i]!) / turn);
      const most = Math.floor((upper + LIMIT_ROUNDING - q[i]!) / turn);
      const nearest = Math.round((seed[i]! - q[i]!) / turn);
      if (fewest > most) inside = false;
      else q[i] = q[i]! + turn * Math.min(Math.max(nearest, fewest), most);
    }
    q[i] = Math.min(Math.max(q[i]!, lower), upper);
  }
  return inside;
}

/** Squared distance of two configurations, joints in rad or shares of the arm's size. */
export function squaredDistance(memory: IkMemory, a: ArrayLike<number>, b: ArrayLike<number>): number {
  let sum = 0;
  for (let i = 0; i < memory.unit.length; i++) sum += ((a[i]! - b[i]!) / memory.unit[i]!) ** 2;
  return sum;
}

/** Largest move of a joint between two configurations, rad or shares of the arm's size. */
export function largestMove(memory: IkMemory, a: ArrayLike<number>, b: ArrayLike<number>): number {
  let largest = 0;
  for (let i = 0; i < memory.unit.length; i++)
    largest = Math.max(largest, Math.abs(a[i]! - b[i]!) / memory.unit[i]!);
  return largest;
}
