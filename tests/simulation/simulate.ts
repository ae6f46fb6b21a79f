import { DEMO_ARMS } from '../../shared/arm/demo-arms';
import { TICK_S } from '../support/rig';
import { Simulation } from './driver';
import { PLANTS } from './plants';
import { RULES, type Rule, type Violation } from './rules';

/** Every arm starts cold and is used for this long, s. */
const EPISODE_S = 600;
/** Seeds of the episodes lie this far apart: a prime, so that neighbouring seeds share none. */
const SEED_STEP = 7919;

export interface Report {
  hours: number;
  ticks: number;
  commands: number;
  /** How near each rule came to being broken: 1 = at the limit. */
  worst: Record<Rule, number>;
  rulesBroken: Rule[];
  violations: (Violation & { episode: number })[];
  /** How often each command got which answer. */
  tried: Map<string, number>;
}

/** Simulated random use of the demo arms in turn, the same for the same seed. */
export function simulate(options: { hours: number; seed: number; plant?: Rule | null }): Report {
  const total = Math.round((options.hours * 3600) / TICK_S);
  const arms = Object.values(DEMO_ARMS);
  const report: Report = {
    hours: options.hours,
    ticks: 0,
    commands: 0,
    worst: Object.fromEntries(RULES.map((rule) => [rule, 0])) as Record<Rule, number>,
    rulesBroken: [],
    violations: [],
    tried: new Map(),
  };
  for (let episode = 0; report.ticks < total; episode++) {
    const plant = options.plant ? PLANTS[options.plant]() : undefined;
    const arm = arms[(options.seed + episode) % arms.length]!;
    const simulation = new Simulation(arm, options.seed * SEED_STEP + episode, plant);
    simulation.run(Math.min(total - report.ticks, EPISODE_S / TICK_S));
    add(report, simulation, episode);
  }
  const broken = new Set(report.violations.map((v) => v.rule));
  report.rulesBroken = RULES.filter((rule) => broken.has(rule));
  return report;
}

function add(report: Report, { checker, commands, tried }: Simulation, episode: number): void {
  report.ticks += checker.ticks;
  report.commands += commands;
  for (const rule of RULES) report.worst[rule] = Math.max(report.worst[rule], checker.worst[rule]);
  report.violations.push(...checker.violations.map((v) => ({ ...v, episode })));
  for (const [what, times] of tried) report.tried.set(what, (report.tried.get(what) ?? 0) + times);
}
