import type { Pose } from '../../../shared/api/resources';
import { availableTorque, torqueWord } from '../../../shared/arm/drives';
import type { ArmModel } from '../../../shared/arm/model';
import { CARRIES_BELOW, POINT_SPEED_CREEP_M_S, POINT_SPEED_M_S } from '../../../shared/arm/motion-rules';
import { CEILINGS } from '../../../shared/arm/trust';
import { shownValue } from '../../../shared/arm/units';
import { gravityTorques } from '../../../shared/dynamics';
import { type Chain, compileChain } from '../../../shared/kinematics';
import { jointPath, pathLimits, planPosition } from '../../../shared/motion';
import { freedomOf, freedomWord } from '../../components/freedom';

/** What today's arm says about a pose. */
export interface PoseFacts {
  /** Joints whose value lies outside today's soft limits; empty when it can be reached. */
  beyond: number[];
  /** False for a pose of an arm with another number of joints. */
  fits: boolean;
  /** Joint nearest to one of its limits, and how far away, rad or m. */
  nearest: { joint: number; margin: number; side: 'lower' | 'upper' } | null;
  /** Joint that uses the largest share of its torque to stand there (1 = all), with what the fingers carry. */
  torque: { joint: number; used: number } | null;
  /** How far stretched, and how far from losing a way to move the tool, 0 to 1. */
  freedom: { stretched: number; isotropy: number } | null;
}

const AT_LIMIT = 1e-9;
/** Nearer to a limit than this share of its range a joint is worth a warning. */
export const NEAR_LIMIT = 0.06;

const chains = new WeakMap<ArmModel, Chain>();
function chainOf(model: ArmModel): Chain {
  let chain = chains.get(model);
  if (!chain) {
    chain = compileChain(model);
    chains.set(model, chain);
  }
  return chain;
}

const freedoms = new WeakMap<ArmModel, ReturnType<typeof freedomOf>>();
function freedomOfModel(model: ArmModel): ReturnType<typeof freedomOf> {
  let freedom = freedoms.get(model);
  if (!freedom) {
    freedom = freedomOf(model);
    freedoms.set(model, freedom);
  }
  return freedom;
}

export function poseFacts(model: ArmModel, pose: Pick<Pose, 'q' | 'gripper'>): PoseFacts {
  const { q, gripper } = pose;
  if (q.length !== model.joints.length)
    return { beyond: [], fits: false, nearest: null, torque: null, freedom: null };
  const beyond: number[] = [];
  let nearest: PoseFacts['nearest'] = null;
  let least = Infinity;
  for (const [i, { limits }] of model.joints.entries()) {
    const below = q[i]! - limits.lower;
    const above = limits.upper - q[i]!;
    const margin = Math.min(below, above);
    if (margin < -AT_LIMIT) beyond.push(i);
    // As a share of the range, so that turning and sliding joints compare.
    const share = margin / (limits.upper - limits.lower);
    if (share < least) {
      least = share;
      nearest = { joint: i, margin, side: below < above ? 'lower' : 'upper' };
    }
  }
  const payload = gripper !== null && gripper < CARRIES_BELOW ? model.payload : null;
  const tau = gravityTorques(chainOf(model), q, { payload });
  let torque: PoseFacts['torque'] = null;
  for (const [i, joint] of model.joints.entries()) {
    const used = Math.abs(tau[i]!) / availableTorque(joint.drive, 0);
    if (!torque || used > torque.used) torque = { joint: i, used };
  }
  return { beyond, fits: true, nearest, torque, freedom: freedomOfModel(model)(q) };
}

/** The one note of a card: what is wrong before what a person wrote before what it costs. */
export function cardNote(
  model: ArmModel,
  pose: Pick<Pose, 'note' | 'trust' | 'origin'>,
  facts: PoseFacts,
): { text: string; warns: boolean } {
  const nameOf = (joint: number) => model.joints[joint]?.name ?? '';
  if (!facts.fits) return { text: 'Taught on an arm with other joints', warns: true };
  const past = facts.beyond[0];
  if (past !== undefined) return { text: `${nameOf(past)} is past its limit`, warns: true };
  const { nearest, torque } = facts;
  if (nearest && nearest.margin < NEAR_LIMIT * rangeOf(model, nearest.joint))
    return { text: nearLimitText(model, nearest), warns: true };
  if (torque && torque.used >= 0.8)
    return { text: `Torque used ${percent(torque.used)} · ${torqueWord(torque.used)}`, warns: true };
  if (facts.freedom && freedomWord(facts.freedom.isotropy) === 'tight')
    return { text: `Freedom tight, stretched ${percent(facts.freedom.stretched)}`, warns: true };
  if (pose.trust === 'declared' && pose.origin === 'captured')
    return { text: 'Position was only declared when captured', warns: true };
  if (pose.note) return { text: pose.note, warns: false };
  return torque
    ? { text: `Torque used ${percent(torque.used)} · ${torqueWord(torque.used)}`, warns: false }
    : { text: '', warns: false };
}

/** "Forearm 6.3° from its fold limit": the limit is named by the motion that leads to it. */
function nearLimitText(model: ArmModel, nearest: NonNullable<PoseFacts['nearest']>): string {
  const joint = model.joints[nearest.joint]!;
  const word = nearest.side === 'upper' ? joint.words.positive : joint.words.negative;
  return `${joint.name} ${shownValue(joint.type, nearest.margin)} from its ${word} limit`;
}

function rangeOf(model: ArmModel, joint: number): number {
  const { lower, upper } = model.joints[joint]!.limits;
  return upper - lower;
}

export const percent = (share: number): string => `${Math.round(share * 100)} %`;

/**
 * How long a hold would take from here to there, s: the very path and law of time of the controller.
 *
 * @param ceiling - share of each joint's speed limit, 0 to 1
 */
export function timeToGo(
  model: ArmModel,
  from: readonly number[],
  to: readonly number[],
  ceiling: number,
): number {
  const chain = chainOf(model);
  const path = jointPath(chain, from, to);
  const pointSpeed = ceiling <= CEILINGS.creep ? POINT_SPEED_CREEP_M_S : POINT_SPEED_M_S;
  const limits = pathLimits(chain, path, { fraction: ceiling, pointSpeed });
  return planPosition({ position: 0, velocity: 0, acceleration: 0 }, path.length, limits).duration;
}
