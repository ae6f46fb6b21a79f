import type { Controller, Incoming } from '../../server/control/state';
import type { ArmModel, JointLimits } from '../../shared/arm/model';
import { NUDGE_ANGLES, NUDGE_LENGTHS } from '../../shared/live/client-messages';
import type { Rule } from './rules';

/** A bug planted on purpose: something on the way through the controller that is not as it should be. */
export interface Plant {
  /** What the controller takes the arm to be. */
  model?: (model: ArmModel) => ArmModel;
  /** What arrives at the controller instead of what was delivered. */
  incoming?: (incoming: Incoming) => Incoming;
  /** Spoils the controller's memory before a tick. */
  spoil?: (controller: Controller) => void;
  /** What reaches the board instead of the controller's set-point. */
  setpoint?: (q: readonly number[]) => readonly number[];
  /** What the page is shown as stopping shadow. */
  stopAt?: (q: readonly number[], model: ArmModel) => readonly number[];
  /** What the board does with the link lost, instead of stopping: its next count after the last two. */
  runaway?: (last: readonly number[], before: readonly number[]) => readonly number[];
}

/** Per rule a bug that breaks it, made afresh for every simulated arm. */
export const PLANTS: Record<Rule, () => Plant> = {
  position: () => withLimits(({ lower, upper }) => ({ lower: lower - 0.02, upper: upper + 0.02 })),
  velocity: () => withLimits(({ velocity }) => ({ velocity: 1.2 * velocity })),
  ceiling: () => ({ incoming: raisedCeiling }),
  // With its own jerk alone a slow move would never get as far as its acceleration.
  acceleration: () =>
    withLimits(({ acceleration, jerk }) => ({ acceleration: 1.6 * acceleration, jerk: 4 * jerk })),
  jerk: () => withLimits(({ jerk }) => ({ jerk: 1.2 * jerk })),
  pointSpeed: () => ({ model: shorter }),
  conditions: drifting,
  holdEnds: () => ({ spoil: keepAlive }),
  unknownTravel: stretching,
  nudgeTravel: () => ({ incoming: largerNudge }),
  stoppingShadow: () => ({ stopAt: shiftedShadow }),
  watchdog: () => ({ runaway: (last, before) => last.map((q, j) => 2 * q - before[j]!) }),
  lastWord: jumping,
};

function withLimits(change: (limits: JointLimits) => Partial<JointLimits>): Plant {
  return {
    model: (model) => ({
      ...model,
      joints: model.joints.map((joint) => ({
        ...joint,
        limits: { ...joint.limits, ...change(joint.limits) },
      })),
    }),
  };
}

/** The arm is longer than its model says. */
function shorter(model: ArmModel): ArmModel {
  const shrink = (xyz: readonly [number, number, number]): [number, number, number] => [
    0.4 * xyz[0],
    0.4 * xyz[1],
    0.4 * xyz[2],
  ];
  return {
    ...model,
    tool: { ...model.tool, xyz: shrink(model.tool.xyz) },
    joints: model.joints.map((joint) => ({
      ...joint,
      origin: { ...joint.origin, xyz: shrink(joint.origin.xyz) },
      link: { ...joint.link, end: shrink(joint.link.end) },
      // Few joints are quick enough to bring a point to its limit by themselves.
      limits: { ...joint.limits, velocity: 3 * joint.limits.velocity },
    })),
  };
}

function raisedCeiling(incoming: Incoming): Incoming {
  if (incoming.kind !== 'command' || incoming.message.type !== 'ceiling.set') return incoming;
  const { message } = incoming;
  if (message.peopleClear) return incoming;
  return { ...incoming, message: { ...message, fraction: Math.min(1, 1.5 * message.fraction) } };
}

function largerNudge(incoming: Incoming): Incoming {
  if (incoming.kind !== 'command' || incoming.message.type !== 'nudge') return incoming;
  const { message } = incoming;
  for (const sizes of [NUDGE_ANGLES, NUDGE_LENGTHS]) {
    const size = sizes.findIndex((s) => Math.abs(s - Math.abs(message.amount)) < 1e-9);
    const larger = sizes[size + 1];
    if (size >= 0 && larger !== undefined)
      return { ...incoming, message: { ...message, amount: Math.sign(message.amount) * larger } };
  }
  return incoming;
}

/** A hold outlives its keep-alives. */
function keepAlive({ state }: Controller): void {
  if (state.hold) state.hold.lastKeepS = state.nowS;
}

/** Every now and then the first joint swings out and back by itself, softly. */
function drifting(): Plant {
  const period = 3000;
  const swing = 400;
  let tick = 0;
  return {
    setpoint: (q) => {
      const u = (tick++ % period) / swing;
      const away = u < 1 ? 0.002 * Math.sin(Math.PI * u) ** 4 : 0;
      return q.map((value, j) => (j === 0 ? value + away : value));
    },
  };
}

/** A belt ratio entered wrongly: every way is a fifth longer. */
function stretching(): Plant {
  let first: readonly number[] | null = null;
  return {
    setpoint: (q) => {
      first ??= [...q];
      const from = first;
      return q.map((value, j) => value + 0.2 * (value - from[j]!));
    },
  };
}

function shiftedShadow(q: readonly number[], { joints }: ArmModel): number[] {
  return q.map((value, j) => value + 0.02 * (joints[j]!.limits.upper - joints[j]!.limits.lower));
}

/** In mid-motion the place of the first joint is overwritten. */
function jumping(): Plant {
  let moving = 0;
  return {
    spoil: ({ state }) => {
      if (!state.move || state.move.s.velocity === 0) return;
      moving++;
      const { path } = state.move;
      if (moving % 500 !== 499) return;
      if (path.kind === 'joint') path.from[0] = path.from[0]! + 0.1;
      else for (let k = 0; k < path.spline.q.length; k += path.spline.n) path.spline.q[k]! += 0.1;
    },
  };
}
