import { describe, expect, it } from 'vitest';
import { RULES } from './rules';
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

/** Long enough for the driver to come upon the act that shows the bug. */
const PLANT_HOURS = 0.2;

describe('the checker finds a bug planted against', () => {
  it.each([...RULES])('%s', { timeout: 200_000 }, (rule) => {
    // Seldom needed acts need longer: stop as soon as it is found.
    const found = [0.03, 0.06, PLANT_HOURS].some((hours) =>
      simulate({ hours, seed: 4, plant: rule }).rulesBroken.includes(rule),
    );
    expect(found).toBe(true);
  });
});
