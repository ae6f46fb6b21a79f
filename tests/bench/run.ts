import { readFileSync, writeFileSync } from 'node:fs';
import { cpus } from 'node:os';
import { wren } from '../../shared/arm/demo/wren';
import { forwardDynamics, inverseDynamics, massMatrix } from '../../shared/dynamics';
import {
  type Chain,
  compileChain,
  emptyTransform,
  forwardKinematics,
  jacobian,
  seededRandom,
  solveInverseKinematics,
  toolLine,
} from '../../shared/kinematics';
import {
  type AxisLimits,
  type AxisState,
  planPosition,
  planSynchronised,
  toolPath,
} from '../../shared/motion';
import { type ArmFile, modelOf } from '../reference/arm-data';
import { hold, juno, keep, press, setCeiling } from '../support/ready-arm';
import { Rig } from '../support/rig';
import { type Measurement, quantile, timesOf } from './measure';
import { mujocoArm } from './mujoco';
import { seven } from './seven';

/**
 * `npm run bench [-- --json FILE]`: time per call of the maths everything rests on, each beside a baseline
 * measured in the same run. A benchmark, never a test: it prints and judges nothing.
 */
const file = JSON.parse(
  readFileSync(new URL('../reference/arm-puma-560.json', import.meta.url), 'utf8'),
) as ArmFile;
const puma = compileChain(modelOf(file));
const states = file.configurations.map(({ q, qd, qdd, tau }) => ({
  q: Float64Array.from(q),
  qd: Float64Array.from(qd),
  qdd: Float64Array.from(qdd),
  tau: Float64Array.from(tau),
}));
const state = (k: number) => states[k % states.length]!;
const mujoco = await mujocoArm(file);
const found: Measurement[] = [];

function add(
  name: string,
  times: Float64Array,
  base: { name: string; times: Float64Array },
  notes: Record<string, number> = {},
): void {
  const median = quantile(times, 0.5);
  found.push({
    name,
    median,
    p99: quantile(times, 0.99),
    baseline: `${base.name} ${quantile(base.times, 0.5).toFixed(2)} µs`,
    ratio: median / quantile(base.times, 0.5),
    notes,
  });
}

// Kinematics and dynamics of the PUMA 560, against MuJoCo on the same arm.
const out = { out: new Float64Array(6) };
const matrix = new Float64Array(36);
const place = emptyTransform();
const base = {
  kinematics: {
    name: 'MuJoCo mj_kinematics',
    times: timesOf((k) => mujoco.kinematics(state(k).q), 200, 500),
  },
  inverse: {
    name: 'MuJoCo mj_inverse',
    times: timesOf((k) => mujoco.inverse(state(k).q, state(k).qd, state(k).qdd), 200, 500),
  },
  massMatrix: {
    name: 'MuJoCo kinematics + mj_crb',
    times: timesOf((k) => mujoco.massMatrix(state(k).q), 200, 500),
  },
};
mujoco.inverse(state(0).q, state(0).qd, state(0).qdd);
const apart = Math.max(
  ...inverseDynamics(puma, state(0).q, state(0).qd, state(0).qdd).map((tau, i) =>
    Math.abs(tau - mujoco.torques[i]!),
  ),
);
add(
  'forward kinematics',
  timesOf((k) => forwardKinematics(puma, state(k).q, place), 200, 2000),
  base.kinematics,
);
add(
  'Jacobian',
  timesOf((k) => jacobian(puma, state(k).q, matrix), 200, 2000),
  base.kinematics,
);
add(
  'inverse dynamics (RNE)',
  timesOf((k) => inverseDynamics(puma, state(k).q, state(k).qd, state(k).qdd, out), 200, 2000),
  base.inverse,
  { 'N·m apart from MuJoCo': apart },
);
add(
  'mass matrix',
  timesOf((k) => massMatrix(puma, state(k).q, matrix), 200, 2000),
  base.massMatrix,
);
add(
  'forward dynamics',
  timesOf((k) => forwardDynamics(puma, state(k).q, state(k).qd, state(k).tau, out), 200, 1000),
  base.inverse,
);

// Inverse kinematics: 1,000 random targets each, from random seeds and from near ones.
const TARGETS = 1000;
function inverseKinematics(name: string, chain: Chain): void {
  const random = seededRandom(20261201);
  const draw = () =>
    Float64Array.from(
      { length: chain.n },
      (_, i) => chain.lower[i]! + random() * (chain.upper[i]! - chain.lower[i]!),
    );
  const goals = Array.from({ length: TARGETS }, draw);
  const tasks = goals.map((q) => {
    const { position, rotation } = forwardKinematics(chain, q);
    return { position: [...position], rotation: Float64Array.from(rotation) };
  });
  const far = Array.from({ length: TARGETS }, draw);
  const near = goals.map((q) =>
    q.map((value, i) =>
      Math.min(chain.upper[i]!, Math.max(chain.lower[i]!, value + 0.1 * (2 * random() - 1))),
    ),
  );
  for (const [seeds, words] of [
    [far, 'random seed'],
    [near, 'near seed'],
  ] as const) {
    let solved = 0;
    const solve = (k: number) => solveInverseKinematics(chain, tasks[k % TARGETS]!, seeds[k % TARGETS]!);
    for (let k = 0; k < TARGETS; k++) if (solve(k).converged) solved++;
    add(`inverse kinematics, ${name}, ${words}`, timesOf(solve, TARGETS, 1), base.inverse, {
      'solved %': (100 * solved) / TARGETS,
    });
  }
}
inverseKinematics('PUMA 560 (closed form)', puma);
inverseKinematics('Wren, 6 joints', compileChain(wren));
inverseKinematics('7 joints', seven());

// Laws of time.
const random = seededRandom(5);
const spread = (most: number) => most * (2 * random() - 1);
const cases = Array.from({ length: 500 }, () => ({
  start: { position: spread(2), velocity: spread(1), acceleration: spread(2) } satisfies AxisState,
  target: spread(2),
  limits: {
    velocity: 1 + random(),
    acceleration: 3 + random(),
    jerk: 20 + 10 * random(),
  } satisfies AxisLimits,
}));
const axes = Array.from({ length: 200 }, (_, k) => {
  const six = Array.from({ length: 6 }, (_, i) => cases[(7 * k + 31 * i) % cases.length]!);
  return {
    starts: six.map((c) => c.start),
    targets: six.map((c) => c.target),
    limits: six.map((c) => c.limits),
  };
});
add(
  'position profile, one axis',
  timesOf(
    (k) => {
      const { start, target, limits } = cases[k % cases.length]!;
      planPosition(start, target, limits);
    },
    400,
    500,
  ),
  base.inverse,
);
add(
  'synchronised profiles, 6 axes',
  timesOf(
    (k) => {
      const { starts, targets, limits } = axes[k % axes.length]!;
      planSynchronised(starts, targets, limits);
    },
    400,
    20,
  ),
  base.inverse,
);

// A straight line of the tool, and the controller's step while the tool is jogged.
const chain = compileChain(wren);
const bent = [0.2, 1.66, -1.92, 0.3, -0.87, 0.2];
const line = toolLine(chain, bent, 'base', 'z', 0.1)!;
add(
  'straight move of 100 mm, planned',
  timesOf(() => toolPath(chain, bent, line), 400, 1),
  base.inverse,
);
const rig = new Rig(wren);
rig.energise(juno);
rig.declare(juno);
setCeiling(rig, 0.25);
hold(rig, { kind: 'joints', q: bent });
rig.settle(60);
/** A new hold every three seconds. */
const HOLD_TICKS = 300;
const steps = timesOf(
  (k) => {
    if (k % HOLD_TICKS === 0) {
      rig.send(juno, { type: 'hold.end', holdId: 'h' });
      press(rig, { kind: 'jog', frame: 'joint', axis: 0, direction: k % (2 * HOLD_TICKS) === 0 ? 1 : -1 });
    }
    if (k % 5 === 0) keep(rig, 'h', k);
    rig.tick();
  },
  6000,
  1,
);
add('controller step and simulated board, 6 joints', steps, base.inverse);

const columns = found.map(({ name, median, p99, baseline, ratio, notes }) => ({
  '': name,
  'median µs': median.toFixed(2),
  'p99 µs': p99.toFixed(2),
  '× baseline': ratio.toFixed(2),
  baseline,
  notes: Object.entries(notes)
    .map(([what, value]) => `${what} ${Number(value.toPrecision(4))}`)
    .join(', '),
}));
console.table(columns);
const json = process.argv.indexOf('--json');
if (json > 0) {
  const to = process.argv[json + 1];
  if (!to) throw new Error('--json needs a file');
  writeFileSync(
    to,
    `${JSON.stringify({ node: process.version, cpu: cpus()[0]?.model ?? '', measurements: found }, null, 2)}\n`,
  );
}
