import type { ArmModel } from '../../shared/arm/model';
import {
  CREEP,
  longestRamp,
  type Observation,
  POINT_SPEED_CREEP_M_S,
  POINT_SPEED_M_S,
  RULES,
  type Rule,
  UNKNOWN_TRAVEL_M,
  UNKNOWN_TRAVEL_RAD,
  type Violation,
} from './rules';

/** Rounding of doubles through three differences at 10 ms: 1e-16·q / 1e-6 s³ is far below this share of a limit. */
const SLACK = 1e-4;
/** Below this share of its speed limit a joint counts as still. */
const STILL = 1e-6;
/** A rest position may differ from the shadow by 1 % of the joint's range or 0.2°, whichever is larger. */
const SHADOW_RANGE_SHARE = 0.01;
const SHADOW_ANGLE_RAD = (0.2 * Math.PI) / 180;

/**
 * Watches an arm from outside. It knows the arm's limits, the set-points that reached the board and the
 * messages that were really delivered; velocity, acceleration and jerk are finite differences of those
 * set-points. Of the controller's own numbers it takes only what a page is shown (ceiling, trust, shadow).
 */
export class MotionChecker {
  readonly worst = Object.fromEntries(RULES.map((rule) => [rule, 0])) as Record<Rule, number>;
  readonly violations: Violation[] = [];
  ticks = 0;
  private readonly q: number[][] = [];
  private lastPoints: Observation['points'] = null;
  private lastSpeed: number[];
  private lastPointSpeed = 0;
  private lastShadow: readonly number[] | null = null;
  /** The shadow at the tick that took the letting-go, until the arm rests. */
  private promise: { shadow: readonly number[]; since: number } | null = null;
  private causeGoneSince = 0;
  private previousCause: Observation['cause'] = { kind: 'none' };

  constructor(
    private readonly model: ArmModel,
    private readonly dt: number,
  ) {
    this.lastSpeed = model.joints.map(() => 0);
  }

  /** Forgets the past where set-points legitimately begin anew: after motors off, a declaration, a restart. */
  rebase(): void {
    this.q.length = 0;
    this.lastPoints = null;
    this.lastSpeed = this.model.joints.map(() => 0);
    this.lastPointSpeed = 0;
    this.promise = null;
    this.lastShadow = null;
  }

  observe(seen: Observation): void {
    this.ticks++;
    if (!sameCause(seen.cause, this.previousCause)) {
      if (seen.cause.kind === 'none' || seen.cause.kind === 'letGo') {
        this.causeGoneSince = seen.t;
        this.promise = this.lastShadow ? { shadow: this.lastShadow, since: seen.t } : null;
      } else this.promise = null;
      this.previousCause = seen.cause;
    }
    const q = seen.setpoint ?? this.q.at(-1) ?? null;
    if (q === null) return;
    this.q.push([...q]);
    if (this.q.length > 4) this.q.shift();
    const speeds = this.model.joints.map((_, j) => this.difference(j, 1));
    for (const j of this.model.joints.keys()) this.checkJoint(j, speeds[j]!, seen);
    this.checkPoints(seen);
    this.checkRest(speeds, seen);
    this.lastSpeed = speeds.map(Math.abs);
    this.lastShadow = seen.stopAt ? [...seen.stopAt] : null;
  }

  /** The order-th finite difference of joint j's set-points over dt^order; zero while history is short. */
  private difference(j: number, order: 1 | 2 | 3): number {
    const h = this.q;
    const n = h.length;
    const at = (back: number) => h[Math.max(0, n - 1 - back)]![j]!;
    if (order === 1) return (at(0) - at(1)) / this.dt;
    if (order === 2) return (at(0) - 2 * at(1) + at(2)) / this.dt ** 2;
    return (at(0) - 3 * at(1) + 3 * at(2) - at(3)) / this.dt ** 3;
  }

  private checkJoint(j: number, speed: number, seen: Observation): void {
    const joint = this.model.joints[j]!;
    const { lower, upper, velocity, acceleration, jerk } = joint.limits;
    const v = Math.abs(speed);
    const moving = v > STILL * velocity;
    this.rate('velocity', v / velocity, seen, `${joint.name} ${speed}`);
    this.rate('acceleration', Math.abs(this.difference(j, 2)) / acceleration, seen, joint.name);
    this.rate('jerk', Math.abs(this.difference(j, 3)) / jerk, seen, joint.name);
    // Above the ceiling only while coming down to it.
    if (moving && v > this.lastSpeed[j]! - SLACK * velocity * 0.01 && v > this.lastSpeed[j]!)
      this.rate('ceiling', v / (velocity * seen.ceiling), seen, `${joint.name} at ceiling ${seen.ceiling}`);
    if (seen.positionKnown) {
      const q = this.q.at(-1)![j]!;
      const before = this.q.at(-2)?.[j] ?? q;
      const middle = (lower + upper) / 2;
      const outside = Math.abs(q - middle) / ((upper - lower) / 2);
      // Somebody may have declared a position outside the limits: from there only inwards.
      if (outside > 1 + SLACK && Math.abs(before - middle) >= Math.abs(q - middle))
        this.rate('position', 1, seen, '');
      else this.rate('position', outside, seen, `${joint.name} ${q}`);
    }
    if (moving && (!seen.energised[j] || !seen.linkSteady))
      this.rate(
        'conditions',
        2,
        seen,
        `${joint.name} moves while ${seen.linkSteady ? 'resting' : 'the link is lost'}`,
      );
    if (moving && v > this.lastSpeed[j]! * (1 + SLACK) + STILL * velocity) this.checkCause(j, v, seen);
    this.checkTravel(j, seen);
  }

  /** A joint that gets faster needs something that may move it. */
  private checkCause(j: number, v: number, seen: Observation): void {
    const joint = this.model.joints[j]!;
    if (seen.controlHolder === null && seen.cause.kind !== 'run')
      this.rate('conditions', 2, seen, `${joint.name} speeds up with nobody in control`);
    if (seen.cause.kind !== 'none' && seen.cause.kind !== 'letGo') return;
    // Letting go while speeding up: the acceleration is let off first, within a/j.
    const { acceleration, jerk } = joint.limits;
    const since = seen.t - this.causeGoneSince;
    const allowed = acceleration / jerk + 3 * this.dt;
    this.rate(
      'conditions',
      since / allowed,
      seen,
      `${joint.name} speeds up to ${v} ${since.toFixed(3)} s after its cause ended`,
    );
  }

  private checkTravel(j: number, seen: Observation): void {
    const { cause } = seen;
    const q = this.q.at(-1)![j]!;
    const sliding = this.model.joints[j]!.type === 'prismatic';
    if (cause.kind === 'hold' && !seen.positionKnown && cause.motion === 'jog') {
      const most = sliding ? UNKNOWN_TRAVEL_M : UNKNOWN_TRAVEL_RAD;
      this.rate('unknownTravel', Math.abs(q - cause.from[j]!) / most, seen, this.model.joints[j]!.name);
    }
    if (cause.kind === 'nudge') {
      const most = j === cause.joint ? Math.abs(cause.amount) : STILL;
      this.rate('nudgeTravel', Math.abs(q - cause.from[j]!) / most, seen, this.model.joints[j]!.name);
    }
  }

  private checkPoints(seen: Observation): void {
    if (!seen.points) return;
    if (this.lastPoints) {
      let fastest = 0;
      for (const [i, p] of seen.points.entries()) {
        const b = this.lastPoints[i]!;
        fastest = Math.max(fastest, Math.hypot(p[0] - b[0], p[1] - b[1], p[2] - b[2]) / this.dt);
      }
      const creeping = seen.ceiling <= CREEP + 1e-9 || !seen.positionKnown;
      const limit =
        seen.peopleClear && seen.ceiling === 1
          ? Infinity
          : creeping
            ? POINT_SPEED_CREEP_M_S
            : POINT_SPEED_M_S;
      // As with the ceiling: above it only while coming down.
      if (fastest > this.lastPointSpeed) this.rate('pointSpeed', fastest / limit, seen, `${fastest} m/s`);
      this.lastPointSpeed = fastest;
    }
    this.lastPoints = seen.points;
  }

  /** With its cause gone the arm is at rest within the ramp, and rests where the shadow said. */
  private checkRest(speeds: readonly number[], seen: Observation): void {
    if (seen.cause.kind !== 'none' && seen.cause.kind !== 'letGo') return;
    const since = seen.t - this.causeGoneSince;
    let still = true;
    for (const [j, joint] of this.model.joints.entries()) {
      if (Math.abs(speeds[j]!) <= STILL * joint.limits.velocity) continue;
      still = false;
      const allowed = longestRamp(this.model, j, joint.limits.velocity) + 3 * this.dt;
      this.rate(
        'holdEnds',
        since / allowed,
        seen,
        `${joint.name} still moves ${since.toFixed(3)} s after letting go`,
      );
    }
    if (!still || !this.promise) return;
    const { shadow } = this.promise;
    this.promise = null;
    for (const [j, joint] of this.model.joints.entries()) {
      const range = joint.limits.upper - joint.limits.lower;
      const allowed =
        joint.type === 'revolute'
          ? Math.max(SHADOW_RANGE_SHARE * range, SHADOW_ANGLE_RAD)
          : SHADOW_RANGE_SHARE * range;
      const off = Math.abs(this.q.at(-1)![j]! - shadow[j]!);
      this.rate('stoppingShadow', off / allowed, seen, `${joint.name} rests ${off} off its shadow`);
    }
  }

  private rate(rule: Rule, ratio: number, seen: Observation, detail: string): void {
    if (!(ratio <= this.worst[rule])) this.worst[rule] = ratio;
    if (!(ratio <= 1 + SLACK) && this.violations.length < 100)
      this.violations.push({ rule, t: seen.t, ratio, detail });
  }
}

function sameCause(a: Observation['cause'], b: Observation['cause']): boolean {
  if (a.kind !== b.kind) return false;
  return a.kind !== 'letGo' || b.kind !== 'letGo' || a.since === b.since;
}
