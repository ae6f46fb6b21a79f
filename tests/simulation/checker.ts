import type { ArmModel } from '../../shared/arm/model';
import { ModelledPoints } from './modelled-points';
import {
  type Cause,
  CREEP,
  NUDGE_POINT_TRAVEL_M,
  type Observation,
  POINT_SPEED_CREEP_M_S,
  POINT_SPEED_M_S,
  type Ramp,
  RULES,
  type Rule,
  shortestRamp,
  UNKNOWN_TRAVEL_M,
  UNKNOWN_TRAVEL_RAD,
  type Violation,
  WATCHDOG_S,
} from './rules';

/** Rounding of doubles through three differences at 10 ms: 1e-16·q / 1e-6 s³ is far below this share of a limit. */
const SLACK = 1e-4;
/** Below this share of its speed limit a joint counts as still. */
const STILL = 1e-7;
/** Set-points are looked at every tick, so a ramp may seem this many ticks longer than it is. */
const RAMP_TICKS = 3;
/** On a curve of the joints half of their acceleration may go into the curve, so a ramp takes up to twice as long, */
const CURVE_SHARE = 2;
/** and a joint may still gain for so many ticks while the tool slows down. */
const CURVE_TICKS = 8;
/** A joint that a single-joint motion leaves alone may change by rounding only, rad or m. */
const UNTOUCHED = 1e-9;
/** A rest position may differ from the shadow by 1 % of the joint's range or 0.2°, whichever is larger. */
const SHADOW_RANGE_SHARE = 0.01;
const SHADOW_ANGLE_RAD = (0.2 * Math.PI) / 180;
const MOST_VIOLATIONS = 100;

/** Since when something has to come down, and by when. */
interface Descent {
  since: number;
  ramp: Ramp;
}

/**
 * Watches an arm from outside. It knows the arm's limits, the set-points that reached the board and the
 * messages that were really delivered; velocity, acceleration and jerk are finite differences of those
 * set-points. Of the controller's own words it takes only what a page is shown: trust and stopping shadow.
 */
export class MotionChecker {
  readonly worst = Object.fromEntries(RULES.map((rule) => [rule, 0])) as Record<Rule, number>;
  readonly violations: Violation[] = [];
  ticks = 0;
  private readonly points: ModelledPoints;
  /** The last four set-points, newest last. */
  private readonly q: number[][] = [];
  private v: number[];
  private a: number[];
  private lastV: number[];
  private gap = true;
  private cause: Observation['cause'] = { kind: 'none', since: 0 };
  private letGo: Descent = { since: 0, ramp: { duration: 0, rising: 0 } };
  private lastShadow: readonly number[] | null = null;
  /** The shadow that was shown when letting go acted, until the arm rests. */
  private promise: readonly number[] | null = null;
  private lastCeiling = 0;
  private ceilingFell: Descent = this.letGo;
  private lastPointLimit = 0;
  private pointLimitFell: Descent = this.letGo;
  private linkLost: Descent | null = null;
  private nudgeStart: readonly (readonly number[])[] | null = null;

  constructor(
    private readonly model: ArmModel,
    private readonly dt: number,
  ) {
    this.points = new ModelledPoints(model);
    const zeros = () => model.joints.map(() => 0);
    this.v = zeros();
    this.a = zeros();
    this.lastV = zeros();
  }

  /** Something that is no matter of set-points broke a rule. */
  object(rule: Rule, t: number, detail: string): void {
    this.rate(rule, 2, { t }, detail);
  }

  observe(seen: Observation): void {
    this.ticks++;
    this.checkWatchdog(seen);
    if (seen.recounted || this.gap || seen.setpoint === null) this.startAfresh(seen);
    this.noteCause(seen);
    this.noteCeiling(seen);
    this.gap = seen.setpoint === null;
    if (seen.setpoint) {
      this.q.push([...seen.setpoint]);
      this.q.shift();
      this.lastV = this.v;
      this.v = this.model.joints.map((_, j) => this.difference(j, 1));
      this.a = this.model.joints.map((_, j) => this.difference(j, 2));
      for (const j of this.model.joints.keys()) this.checkJoint(j, seen);
      this.checkPoints(seen);
      this.checkTravel(seen);
      this.checkRest(seen);
    }
    this.lastShadow = seen.stopAt;
  }

  /** Where set-points begin anew the arm stands at its board's count, so they have to begin there. */
  private startAfresh({ counts, energised, setpoint }: Observation): void {
    this.q.length = 0;
    // What is sent to a resting joint says nothing yet.
    const from = counts.map((count, j) => (energised[j] ? count : (setpoint?.[j] ?? count)));
    for (let k = 0; k < 4; k++) this.q.push([...from]);
    this.v = this.v.map(() => 0);
    this.a = this.a.map(() => 0);
    this.promise = null;
    this.lastShadow = null;
  }

  private noteCause(seen: Observation): void {
    const { cause } = seen;
    if (cause.kind === 'none' && (this.cause.kind !== 'none' || this.cause.since !== cause.since)) {
      this.letGo = isCurved(this.cause) ? this.curvedDescent(seen.t) : this.descent(seen.t);
      this.promise = this.lastShadow;
    }
    if (cause.kind !== 'none') this.promise = null;
    if (cause.kind === 'nudge' && this.cause.kind !== 'nudge')
      this.nudgeStart = this.points.at(cause.from).map((p) => [...p]);
    this.cause = cause;
  }

  private noteCeiling(seen: Observation): void {
    const limit = pointLimit(seen);
    if (seen.ceiling < this.lastCeiling) this.ceilingFell = this.descent(seen.t);
    if (limit < this.lastPointLimit) this.pointLimitFell = this.descent(seen.t);
    this.lastCeiling = seen.ceiling;
    this.lastPointLimit = limit;
  }

  private descent(since: number): Descent {
    return { since, ramp: shortestRamp(this.model, this.v, this.a) };
  }

  /** A straight line of the tool is a curve of the joints: part of every limit goes into the curve. */
  private curvedDescent(since: number): Descent {
    const { duration, rising } = shortestRamp(this.model, this.v, this.a);
    return {
      since,
      ramp: { duration: CURVE_SHARE * duration, rising: CURVE_SHARE * rising + CURVE_TICKS * this.dt },
    };
  }

  /** Whether something that became too fast by a lower ceiling is still coming down in time, and does. */
  private comingDown({ since, ramp }: Descent, faster: boolean, t: number): boolean {
    const for_ = t - since;
    const spare = RAMP_TICKS * this.dt;
    return for_ <= ramp.duration + spare && (!faster || for_ <= ramp.rising + spare);
  }

  /** The order-th finite difference of joint j's set-points over dt^order. */
  private difference(j: number, order: 1 | 2 | 3): number {
    const [q3, q2, q1, q0] = this.q.map((q) => q[j]!) as [number, number, number, number];
    if (order === 1) return (q0 - q1) / this.dt;
    if (order === 2) return (q0 - 2 * q1 + q2) / this.dt ** 2;
    return (q0 - 3 * q1 + 3 * q2 - q3) / this.dt ** 3;
  }

  private faster(j: number): boolean {
    const { velocity } = this.model.joints[j]!.limits;
    return Math.abs(this.v[j]!) > Math.abs(this.lastV[j]!) + STILL * velocity;
  }

  private checkJoint(j: number, seen: Observation): void {
    const { name, limits } = this.model.joints[j]!;
    const v = Math.abs(this.v[j]!);
    const moving = v > STILL * limits.velocity;
    this.rate('velocity', v / limits.velocity, seen, name);
    this.rate('acceleration', Math.abs(this.a[j]!) / limits.acceleration, seen, name);
    this.rate('jerk', Math.abs(this.difference(j, 3)) / limits.jerk, seen, name);
    if (!this.comingDown(this.ceilingFell, this.faster(j), seen.t))
      this.rate('ceiling', v / (limits.velocity * seen.ceiling), seen, `${name}, ceiling ${seen.ceiling}`);
    if (seen.known[j]) this.checkPosition(j, seen);
    if (!moving) return;
    if (!seen.energised[j]) this.object('conditions', seen.t, `${name} moves without power`);
    if (!seen.linkSteady) this.object('conditions', seen.t, `${name} moves without a link`);
    if (seen.cause.kind !== 'none' || !this.faster(j)) return;
    // The acceleration under way is let off first; that is all the getting faster there may be.
    const { since, ramp } = this.letGo;
    const allowed = ramp.rising + RAMP_TICKS * this.dt;
    this.rate('conditions', (seen.t - since) / allowed, seen, `${name} gets faster though nobody moves it`);
  }

  private checkPosition(j: number, seen: Observation): void {
    const { name, limits } = this.model.joints[j]!;
    const middle = (limits.lower + limits.upper) / 2;
    const now = this.q[3]![j]! - middle;
    const before = this.q[2]![j]! - middle;
    const outside = Math.abs(now) / ((limits.upper - limits.lower) / 2);
    // Somebody may have declared a place outside the limits: from there only inwards.
    const deeper = Math.abs(now) > Math.abs(before) + UNTOUCHED;
    if (outside <= 1 || deeper) this.rate('position', outside, seen, name);
  }

  private checkPoints(seen: Observation): void {
    const q = this.q[3]!;
    const before = this.q[2]!;
    if (q.every((value, j) => value === before[j])) return;
    let fastest = this.points.travel(before, q) / this.dt;
    if (!seen.known.every(Boolean)) {
      // Nobody knows where it stands, so the same step is looked at where it really stands.
      const really = seen.truth.map((value, j) => value + q[j]! - before[j]!);
      fastest = Math.max(fastest, this.points.travel(seen.truth, really) / this.dt);
    }
    const faster = this.model.joints.some((_, j) => this.faster(j));
    if (!this.comingDown(this.pointLimitFell, faster, seen.t))
      this.rate('pointSpeed', fastest / pointLimit(seen), seen, `${fastest} m/s`);
  }

  private checkTravel(seen: Observation): void {
    const { cause } = seen;
    if (cause.kind !== 'hold' && cause.kind !== 'nudge') return;
    const q = this.q[3]!;
    for (const [j, joint] of this.model.joints.entries()) {
      const travel = Math.abs(q[j]! - cause.from[j]!);
      if (cause.joint !== null && cause.joint !== j) {
        if (travel > UNTOUCHED)
          this.object('conditions', seen.t, `${joint.name} moves though another joint was asked for`);
      } else if (cause.kind === 'nudge' && cause.joint !== null)
        this.rate('nudgeTravel', travel / Math.abs(cause.amount), seen, joint.name);
      else if (cause.kind === 'hold' && cause.motion === 'jog' && !seen.known.every(Boolean)) {
        const most = joint.type === 'prismatic' ? UNKNOWN_TRAVEL_M : UNKNOWN_TRAVEL_RAD;
        this.rate('unknownTravel', travel / most, seen, joint.name);
      }
    }
    if (cause.kind === 'nudge' && this.nudgeStart && seen.known.every(Boolean))
      for (const [i, p] of this.points.at(q).entries()) {
        const from = this.nudgeStart[i]!;
        const travel = Math.hypot(p[0] - from[0]!, p[1] - from[1]!, p[2] - from[2]!);
        this.rate('nudgeTravel', travel / NUDGE_POINT_TRAVEL_M, seen, `${travel} m`);
      }
  }

  /** With its cause gone the arm is at rest within the ramp, and rests where the shadow said. */
  private checkRest(seen: Observation): void {
    if (seen.cause.kind !== 'none') return;
    const { since, ramp } = this.letGo;
    const moving = this.model.joints.findIndex(
      ({ limits }, j) => Math.abs(this.v[j]!) > STILL * limits.velocity,
    );
    if (moving >= 0) {
      const allowed = ramp.duration + RAMP_TICKS * this.dt;
      this.rate('holdEnds', (seen.t - since) / allowed, seen, this.model.joints[moving]!.name);
      return;
    }
    if (!this.promise) return;
    for (const [j, { name, type, limits }] of this.model.joints.entries()) {
      const share = SHADOW_RANGE_SHARE * (limits.upper - limits.lower);
      const allowed = type === 'revolute' ? Math.max(share, SHADOW_ANGLE_RAD) : share;
      const off = Math.abs(this.q[3]![j]! - this.promise[j]!);
      this.rate('stoppingShadow', off / allowed, seen, `${name} rests ${off} off`);
    }
    this.promise = null;
  }

  private checkWatchdog(seen: Observation): void {
    if (seen.linkSteady) this.linkLost = null;
    else this.linkLost ??= this.descent(seen.t);
    if (!this.linkLost || !seen.boardMoving) return;
    const allowed = WATCHDOG_S + this.linkLost.ramp.duration + RAMP_TICKS * this.dt;
    this.rate('watchdog', (seen.t - this.linkLost.since) / allowed, seen, 'the board still moves');
  }

  private rate(rule: Rule, ratio: number, seen: { t: number }, detail: string): void {
    if (!(ratio <= this.worst[rule])) this.worst[rule] = ratio;
    if (!(ratio <= 1 + SLACK) && this.violations.length < MOST_VIOLATIONS)
      this.violations.push({ rule, t: seen.t, ratio, detail });
  }
}

/** Largest speed that a modelled point may have, m/s. */
function pointLimit(seen: Observation): number {
  const known = seen.known.every(Boolean);
  if (known && seen.peopleClear && seen.ceiling === 1) return Infinity;
  return known && seen.ceiling > CREEP + 1e-9 ? POINT_SPEED_M_S : POINT_SPEED_CREEP_M_S;
}

/** Whether the motion was a line of the tool, which bends the way of the joints. */
function isCurved(cause: Cause): boolean {
  if (cause.kind === 'none') return false;
  if (cause.kind === 'run') return cause.curved;
  return cause.joint === null && (cause.kind === 'nudge' || cause.motion === 'jog');
}
