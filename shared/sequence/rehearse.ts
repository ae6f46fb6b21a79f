import type { Rehearsal, RehearsalProblem } from '../api/resources';
import { availableTorque, reflectedInertia } from '../arm/drives';
import type { ArmModel } from '../arm/model';
import { CARRIES_BELOW, GRIPPER_PACE, POINT_SPEED_CREEP_M_S, POINT_SPEED_M_S } from '../arm/motion-rules';
import { CEILINGS } from '../arm/trust';
import { shownValue } from '../arm/units';
import { inverseDynamics } from '../dynamics';
import { type Chain, compileChain, fastestPointSpeed } from '../kinematics';
import {
  alongPath,
  jointPath,
  lineWords,
  pathLimits,
  pathRates,
  planPosition,
  sampleProfile,
} from '../motion';
import type { ProgramStep } from './program';
import { type GoToProgramStep, type Stretch, stretchFrom } from './stretch';

export interface RehearsalInput {
  model: ArmModel;
  steps: readonly ProgramStep[];
  /** Share of the joint speed limits allowed, as the ceiling on Move. */
  ceiling: number;
}

/** A move is looked at this often, s, and at least so many times. */
const SAMPLE_S = 0.05;
const LEAST_SAMPLES = 12;
const MOST_PLOT_POINTS = 600;
/** From this share of the torque a step is called tight. */
const TIGHT = 0.8;
const AT_LIMIT = 1e-9;

/**
 * Computes one cycle, begun where the one before left the arm, against the arm's model, with the same paths and
 * laws of time that the controller uses: how long each step takes, how much torque it needs, how near it comes to
 * a soft limit, how fast the arm's fastest point gets. Each finding is attached to its step.
 */
export function rehearse(input: RehearsalInput): Rehearsal {
  const walk = new Walk(input);
  for (let index = 0; index < input.steps.length; ) index = walk.from(index);
  return walk.result();
}

/** The same, a step (or a blended stretch of steps) at a time: `breathe` may return a promise to wait for before the next step. */
export async function rehearseInTurns(
  input: RehearsalInput,
  breathe: () => Promise<void> | undefined,
): Promise<Rehearsal> {
  const walk = new Walk(input);
  for (let index = 0; index < input.steps.length; ) {
    index = walk.from(index);
    const pause = breathe();
    if (pause) await pause;
  }
  return walk.result();
}

class Walk {
  private readonly chain: Chain;
  private readonly tau: Float64Array;
  private readonly q: number[];
  private readonly qd: Float64Array;
  private readonly qdd: Float64Array;
  private gripper: number;
  private t = 0;
  private readonly durations: Record<string, number> = {};
  private readonly problems: RehearsalProblem[] = [];
  private nearest: Rehearsal['nearestLimit'] = null;
  private highest: Rehearsal['highestTorque'] = null;
  private fastest = 0;
  private readonly times: number[] = [];
  private readonly used: number[][];

  constructor(private readonly input: RehearsalInput) {
    const { model, steps } = input;
    this.chain = compileChain(model);
    const n = this.chain.n;
    this.tau = new Float64Array(n);
    this.qd = new Float64Array(n);
    this.qdd = new Float64Array(n);
    const last = steps.findLast((step) => step.kind === 'goTo');
    this.gripper = steps.findLast((step) => step.kind === 'grip')?.opening ?? 1;
    this.q = [...(last?.q ?? model.joints.map((j) => (j.limits.lower + j.limits.upper) / 2))];
    this.used = model.joints.map(() => []);
  }

  /** Does the step at `index`, and those it goes on into; returns the index of the next one. */
  from(index: number): number {
    const step = this.input.steps[index]!;
    if (step.kind === 'goTo') return this.goTo(index);
    const before = this.t;
    if (step.kind === 'grip') {
      const { gripper } = this.input.model;
      this.stand((Math.abs(step.opening - this.gripper) * (gripper?.travelTime ?? 0)) / GRIPPER_PACE, step);
      this.gripper = step.opening;
    } else this.stand(step.seconds, step);
    this.spend(step, this.t - before);
    return index + 1;
  }

  private spend(step: ProgramStep, seconds: number): void {
    this.durations[step.stepId] = (this.durations[step.stepId] ?? 0) + seconds;
  }

  private goTo(index: number): number {
    const { steps, ceiling } = this.input;
    const stretch = this.stretchFrom(index);
    const { path, last, corners, speed } = stretch;
    const run = steps.slice(index, last + 1) as GoToProgramStep[];
    for (const step of run) this.lookAtLimits(step);
    const limits = pathLimits(this.chain, path, {
      fraction: Math.min(speed, ceiling),
      pointSpeed: ceiling <= CEILINGS.creep ? POINT_SPEED_CREEP_M_S : POINT_SPEED_M_S,
    });
    const profile = planPosition({ position: 0, velocity: 0, acceleration: 0 }, path.length, limits);
    const samples = Math.max(LEAST_SAMPLES * run.length, Math.ceil(profile.duration / SAMPLE_S));
    const s = { position: 0, velocity: 0, acceleration: 0 };
    let doing = 0;
    let begun = 0;
    for (let k = 0; k <= samples && profile.duration > 0; k++) {
      const at = (profile.duration * k) / samples;
      sampleProfile(profile, at, s);
      while (doing < corners.length && s.position >= corners[doing]!) {
        this.spend(run[doing]!, at - begun);
        begun = at;
        doing++;
      }
      alongPath(path, s.position, this.q);
      pathRates(path, s, this.qd, this.qdd);
      this.look(this.t + at, run[doing]!);
    }
    const step = run.at(-1)!;
    this.t += profile.duration;
    this.spend(step, profile.duration - begun + step.settle);
    for (let i = 0; i < this.chain.n; i++) this.q[i] = step.q[i]!;
    if (step.settle > 0) this.stand(step.settle, step);
    return last + 1;
  }

  private lookAtLimits(step: GoToProgramStep): void {
    for (const [i, joint] of this.input.model.joints.entries()) {
      const { lower, upper } = joint.limits;
      const margin = Math.min(step.q[i]! - lower, upper - step.q[i]!);
      if (margin < -AT_LIMIT)
        this.problem(
          step,
          'blocks',
          'beyondLimit',
          `${joint.name} would have to go to ${shownValue(joint.type, step.q[i]!)}; its soft limits are ${shownValue(joint.type, lower)} and ${shownValue(joint.type, upper)}. Re-teach “${step.label}” inside them.`,
        );
      // As a share of the joint's range, so that rad and m compare.
      const share = margin / (upper - lower);
      const best = this.nearest ? this.nearest.margin / this.rangeOf(this.nearest.joint) : Infinity;
      if (share < best) this.nearest = { joint: i, margin, path: step.path };
    }
  }

  /** Where no straight way leads to a pose its step is blocked, and rehearsed as if it went by joints, alone. */
  private stretchFrom(index: number): Stretch {
    const { model, steps, ceiling } = this.input;
    const { stretch, refused } = stretchFrom(this.chain, this.q, steps, index, { ceiling, single: false });
    if (stretch) return stretch;
    this.problem(
      refused.step,
      'blocks',
      'notStraight',
      `No straight way to “${refused.step.label}”: ${lineWords(
        model.joints.map((joint) => joint.name),
        refused.end,
        true,
      )} Use Go to, or another pose before it.`,
    );
    const step = steps[index] as GoToProgramStep;
    return { path: jointPath(this.chain, this.q, step.q), last: index, corners: [], speed: step.speed };
  }

  private rangeOf(joint: number): number {
    const { lower, upper } = this.input.model.joints[joint]!.limits;
    return upper - lower;
  }

  private stand(seconds: number, step: ProgramStep): void {
    this.qd.fill(0);
    this.qdd.fill(0);
    this.look(this.t, step);
    this.t += seconds;
    this.look(this.t, step);
  }

  /** Torque and speed at one moment. */
  private look(t: number, step: ProgramStep): void {
    const { model } = this.input;
    const payload = model.payload && this.gripper < CARRIES_BELOW ? model.payload : null;
    inverseDynamics(this.chain, this.q, this.qd, this.qdd, { payload, out: this.tau });
    this.times.push(t);
    for (const [i, joint] of model.joints.entries()) {
      const asked = Math.abs(this.tau[i]! + reflectedInertia(joint.drive) * this.qdd[i]!);
      const used = asked / availableTorque(joint.drive, this.qd[i]!);
      this.used[i]!.push(used);
      if (!this.highest || used > this.highest.used) this.highest = { joint: i, used, path: step.path };
      if (used > 1)
        this.problem(
          step,
          'blocks',
          'noTorqueLeft',
          `${joint.name} needs ${Math.round(used * 100)} % of its torque here. Set the step slower, or move the pose nearer to the base.`,
        );
      else if (used > TIGHT)
        this.problem(
          step,
          'caution',
          'tight',
          `${joint.name} is tight: it uses up to ${Math.round(used * 100)} % of its torque. Set the step slower, or move the pose nearer.`,
        );
    }
    this.fastest = Math.max(this.fastest, fastestPointSpeed(this.chain, this.q, this.qd));
  }

  /** One finding of a kind per step and joint; the worst wording comes last and stays. */
  private problem(
    step: ProgramStep,
    severity: RehearsalProblem['severity'],
    code: string,
    message: string,
  ): void {
    const joint = message.split(' ')[0];
    const same = this.problems.findIndex(
      (p) => p.stepId === step.stepId && p.code === code && p.message.startsWith(joint ?? ''),
    );
    const found = { stepId: step.stepId, path: step.path, severity, code, message };
    if (same < 0) this.problems.push(found);
    else if (percent(message) >= percent(this.problems[same]!.message)) this.problems[same] = found;
  }

  result(): Rehearsal {
    const every = Math.max(1, Math.ceil(this.times.length / MOST_PLOT_POINTS));
    const thin = (list: number[]) => list.filter((_, k) => k % every === 0 || k === list.length - 1);
    return {
      duration: this.t,
      ceiling: this.input.ceiling,
      stepDurations: this.durations,
      problems: this.problems,
      nearestLimit: this.nearest,
      highestTorque: this.highest,
      highestSpeed: this.fastest,
      plot: { t: thin(this.times), torqueUsed: this.used.map(thin) },
    };
  }
}

function percent(message: string): number {
  return Number(/(\d+) %/.exec(message)?.[1] ?? 0);
}
