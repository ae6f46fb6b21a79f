import { describe, expect, it } from 'vitest';
import { RULES, type Rule } from './rules';
import { simulate } from './simulate';

/** Three seeds, of which each begins with another arm; an hour and a little in all. */
const SEEDS = [11, 12, 13];
const HOURS_EACH = 0.35;

describe('an hour of simulated random use', () => {
  it.each(SEEDS)('breaks no rule of motion, seed %i', { timeout: 300_000 }, (seed) => {
    const report = simulate({ hours: HOURS_EACH, seed });
    expect(report.violations.slice(0, 5)).toEqual([]);
    expect(report.rulesBroken).toEqual([]);
    expect(report.ticks).toBe(Math.round(HOURS_EACH * 360_000));
    // It was really used: motion near its limits, and thousands of commands.
    expect(report.commands).toBeGreaterThan(3000);
    expect(report.worst.ceiling).toBeGreaterThan(0.99);
    expect(report.worst.jerk).toBeGreaterThan(0.9);
  });

  it('is the same for the same seed', { timeout: 120_000 }, () => {
    const once = simulate({ hours: 0.02, seed: 5 });
    const again = simulate({ hours: 0.02, seed: 5 });
    expect(again.worst).toEqual(once.worst);
    expect(again.commands).toBe(once.commands);
  });
});

/** Not every few minutes of use come upon the act that shows a bug: so many stretches of use at most. */
const MOST_SEEDS = 16;
const PLANT_HOURS = 0.06;
/** What a planted bug breaks first may be another rule: too fast a joint is above its ceiling before its limit. */
const FIRST_SEEN_ELSEWHERE: readonly Rule[] = ['velocity', 'unknownTravel'];

describe('the checker finds a bug planted against', () => {
  it.each([...RULES])('%s', { timeout: 200_000 }, (rule) => {
    const shows = (broken: readonly Rule[]) =>
      FIRST_SEEN_ELSEWHERE.includes(rule) ? broken.length > 0 : broken.includes(rule);
    let seed = 1;
    while (seed <= MOST_SEEDS && !shows(simulate({ hours: PLANT_HOURS, seed, plant: rule }).rulesBroken))
      seed++;
    expect(seed, 'stretches of use looked at').toBeLessThanOrEqual(MOST_SEEDS);
  });
});
