import { parseArgs } from 'node:util';
import { RULES, type Rule } from './rules';
import { simulate } from './simulate';

/**
 * `npm run sim -- --hours 1 --seed 7`: one line of JSON about so many hours of simulated random use; exits 1
 * if a rule of motion broke. `--break RULE` plants a bug that breaks the rule, to see that the checker finds
 * it; `--verbose` tells on stderr what was tried and what broke.
 */
const { values } = parseArgs({
  options: {
    hours: { type: 'string', default: '1' },
    seed: { type: 'string', default: '1' },
    break: { type: 'string' },
    verbose: { type: 'boolean', default: false },
  },
});
const hours = Number(values.hours);
const seed = Number(values.seed);
const plant = values.break === undefined ? null : RULES.find((rule) => rule === values.break);
if (!(hours > 0 && Number.isFinite(hours))) fail(`--hours ${values.hours}: expected a positive number`);
if (!Number.isSafeInteger(seed) || seed < 0) fail(`--seed ${values.seed}: expected a whole number from 0`);
if (plant === undefined) fail(`--break ${values.break}: expected one of ${RULES.join(', ')}`);

const { ticks, commands, worst, rulesBroken, violations, tried } = simulate({ hours, seed, plant });
const rounded = (ratio: number) => Math.round(ratio * 1e6) / 1e6;
console.log(
  JSON.stringify({
    hours,
    ticks,
    commands,
    worst: Object.fromEntries(RULES.map((rule: Rule) => [rule, rounded(worst[rule])])),
    rulesBroken,
  }),
);
if (values.verbose) {
  for (const [what, times] of [...tried].sort()) console.error(`${what} ${times}`);
  for (const { rule, episode, t, ratio, detail } of violations)
    console.error(`${rule} in episode ${episode} at ${t.toFixed(2)} s: ${ratio.toFixed(4)} ${detail}`);
}
process.exitCode = rulesBroken.length > 0 ? 1 : 0;

function fail(message: string): never {
  console.error(message);
  process.exit(2);
}
