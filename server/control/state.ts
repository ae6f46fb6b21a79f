import type { ArmModel } from '../../shared/arm/model';
import { CEILINGS, type Trust } from '../../shared/arm/trust';
import { type Chain, compileChain, worstReach } from '../../shared/kinematics';
import type { HoldMotion } from '../../shared/live/client-messages';
import type { EventMessage, FaultState, RUN_PHASES } from '../../shared/live/server-messages';
import type { AxisState, MotionPath, Profile } from '../../shared/motion';
import type { Program } from '../../shared/sequence/program';
import type { Role } from '../../shared/team/roles';
import type { BoardOrder, BoardSample, Setpoint } from './arm-link';
import type { ArmRecord, ToArmProcess } from './process-messages';

/** What never changes while a controller lives: the arm and what is computed from it once. */
export interface Arm {
  model: ArmModel;
  chain: Chain;
  /** Farthest any point beyond each joint can be from it, m: what speed is judged by while the position is unknown. */
  reach: Float64Array;
}

export interface Holder {
  userId: string;
  name: string;
  role: Role;
  sessionId: string;
  socketId: string;
  sinceMs: number;
  /** Arm time at which the holder's socket was lost; null while it is there. */
  awaySinceS: number | null;
}

/** Somebody asks for control (or, forced, takes it as soon as the arm is still). */
export interface ControlRequest {
  holder: Omit<Holder, 'sinceMs' | 'awaySinceS'>;
  untilS: number;
  untilMs: number;
  forced: boolean;
}

/** One motion: a path and the law of time on it. */
export interface Move {
  path: MotionPath;
  /** What keeps it going: with its hold or run gone it has to be on its ramp to rest. */
  by: 'hold' | 'nudge' | 'run';
  /** Share of each joint's speed limit that the act itself asks for; the ceiling comes on top. */
  fraction: number;
  profile: Profile;
  /** Time into the profile, s. */
  t: number;
  /** Where on the path, and how fast. */
  s: AxisState;
  /** Letting go: on the way to rest, wherever that is. */
  ending: boolean;
  /** Where a person wants to get to, drawn as target; null for jogging. */
  target: number[] | null;
}

export interface Hold {
  holdId: string;
  userId: string;
  socketId: string;
  motion: HoldMotion;
  lastSeq: number;
  lastKeepS: number;
  /** Where the joints stood when the button was pressed. */
  from: number[];
}

/** What the present step of a run is waiting for, beyond a move. */
export type StepActivity =
  | { kind: 'none' }
  /** `corners`: where on the path the next step takes over; `speed`: what the steps ask for. */
  | { kind: 'move'; corners: number[]; speed: number }
  | { kind: 'grip' }
  | { kind: 'wait'; leftS: number };

export interface Run {
  program: Program;
  /** Who started it: nobody else may resume it. */
  userId: string;
  phase: (typeof RUN_PHASES)[number];
  held: boolean;
  single: boolean;
  cycle: number;
  cycles: number | null;
  stepIndex: number;
  activity: StepActivity;
  countdownS: number;
  cycleSeconds: number;
  /** A cycle that began in the middle is not timed against whole ones, nor does it prove the program. */
  cycleWhole: boolean;
  cycleTimes: number[];
  startedAtMs: number;
  reason: string | null;
}

export interface ControllerState {
  nowS: number;
  wallMs: number;
  link: 'connecting' | 'steady' | 'lost';
  linkKind: 'builtIn' | 'board';
  answerMs: number | null;
  bootId: number | null;
  sample: BoardSample | null;
  /** Arm time at which the board's clock was last seen to move on. */
  heardS: number;
  /** Since when the board has not been where, or as, it was told to be; null while it is. */
  astraySinceS: number | null;
  /** After a fault was cleared the board gets until then to say so. */
  clearingUntilS: number;
  energised: boolean[];
  gripperEnergised: boolean;
  /** Joints still to be energised, in order, with the servo angles that go with them. */
  energising: { joint: number; assumed: number }[];
  nextEnergiseS: number;
  motorsSinceMs: number;
  motorsBy: string | null;
  /** When each servo has stood long enough to have arrived, arm time; null for steppers and resting servos. */
  servoSettledS: (number | null)[];
  trust: Trust[];
  trustNote: string;
  trustSinceMs: number;
  personCeiling: number;
  peopleClear: boolean;
  turn: number;
  control: Holder | null;
  request: ControlRequest | null;
  unattended: boolean;
  fault: FaultState | null;
  stop: StopAct | null;
  hold: Hold | null;
  move: Move | null;
  run: Run | null;
  /** Commanded joint values, their speeds and accelerations; rad, m. */
  q: number[];
  qd: number[];
  qdd: number[];
  gripper: { opening: number; target: number } | null;
  torqueUsed: (number | null)[];
  blocked: { joint: number; reason: string } | null;
  referencing: Referencing | null;
}

export interface StopAct {
  by: string;
  atMs: number;
  /** Board time of the newest sample when Stop was pressed: a later one shows that the board has heard since. */
  boardT: number;
  acknowledged: boolean;
  /** By then the board has to show the arm standing; null once it has. */
  restByS: number | null;
}

export interface Referencing {
  joint: number;
  /** The latch of an earlier search is gone: what it shows now is ours. */
  armed: boolean;
  /** What the joint's trust was before it went looking. */
  before: Trust;
}

/** The last set-points that went out: the supervisor judges by them and not by the generator's own figures. */
export interface Watch {
  /** Newest last; at most three. */
  sent: number[][];
  gripper: number | null;
  /** Ticks in a row in which something moved undiminished though it should have been on its way to rest. */
  strikes: number;
}

/** What a step hands to the outside. */
export interface Outputs {
  orders: BoardOrder[];
  setpoint: Setpoint | null;
  /** The set-point replaces what the board has buffered: a ramp begins. */
  replace: boolean;
  /** The board shall ramp down by itself and latch. */
  linkStop: boolean;
  answers: { socketId: string; id: string; refused: null | { code: string; message: string } }[];
  events: { event: EventMessage; socketId: string | null }[];
  records: ArmRecord[];
}

export type Incoming = Extract<
  ToArmProcess,
  { kind: 'command' | 'socketClosed' | 'sessionEnded' | 'stop' | 'settings' }
>;

export interface Inputs {
  /** Monotonic, s. */
  nowS: number;
  /** Wall clock, for labels only. */
  wallMs: number;
  incoming: readonly Incoming[];
  sample: BoardSample | null;
  linkClosed: boolean;
  answerMs: number | null;
  /** s of set-points buffered ahead. */
  lead: number;
}

/** Plain data, changed in place by `step` and by nothing else. */
export interface Controller {
  arm: Arm;
  state: ControllerState;
  watch: Watch;
}

export interface ControllerOptions {
  linkKind: 'builtIn' | 'board';
  unattended: boolean;
  lastSeen: readonly number[] | null;
  nowS: number;
  wallMs: number;
}

/** A controller begins resting, nobody in control, position unknown; nothing is carried over but a drawing. */
export function createController(model: ArmModel, options: ControllerOptions): Controller {
  const chain = compileChain(model);
  const n = chain.n;
  const zeros = () => new Array<number>(n).fill(0);
  const seen = options.lastSeen?.length === n ? [...options.lastSeen] : startPosition(model);
  return {
    arm: { model, chain, reach: worstReach(chain) },
    watch: { sent: [], gripper: null, strikes: 0 },
    state: {
      nowS: options.nowS,
      wallMs: options.wallMs,
      link: 'connecting',
      linkKind: options.linkKind,
      answerMs: null,
      bootId: null,
      sample: null,
      heardS: options.nowS,
      astraySinceS: null,
      clearingUntilS: options.nowS,
      energised: new Array<boolean>(n).fill(false),
      gripperEnergised: false,
      energising: [],
      nextEnergiseS: 0,
      motorsSinceMs: options.wallMs,
      motorsBy: null,
      servoSettledS: new Array<number | null>(n).fill(null),
      trust: new Array<Trust>(n).fill('unknown'),
      trustNote: 'Just powered.',
      trustSinceMs: options.wallMs,
      personCeiling: CEILINGS.creep,
      peopleClear: false,
      turn: 0,
      control: null,
      request: null,
      unattended: options.unattended,
      fault: null,
      stop: null,
      hold: null,
      move: null,
      run: null,
      q: seen,
      qd: zeros(),
      qdd: zeros(),
      gripper: model.gripper ? { opening: 1, target: 1 } : null,
      torqueUsed: new Array<number | null>(n).fill(null),
      blocked: null,
      referencing: null,
    },
  };
}

/** Before anything is known the arm is drawn in the middle of its range. */
function startPosition(model: ArmModel): number[] {
  return model.joints.map(({ limits }) => (limits.lower + limits.upper) / 2);
}

export function newOutputs(): Outputs {
  return {
    orders: [],
    setpoint: null,
    replace: false,
    linkStop: false,
    answers: [],
    events: [],
    records: [],
  };
}
