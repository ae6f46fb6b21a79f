import type { Pose } from '../../../shared/api/resources';
import type { ArmModel } from '../../../shared/arm/model';
import { degToRad } from '../../../shared/arm/units';
import type { Step } from '../../../shared/sequence/steps';
import { rowsOf } from './step-tree';

/** Joints this near count as standing at the same place: below what a printed arm repeats. rad, m. */
export const SAME_ANGLE = degToRad(0.05);
export const SAME_LENGTH = 0.00005;
/** A gripper that changed by less than this share of its travel has not been moved. */
export const SAME_OPENING = 0.01;

export interface ArmNow {
  /** rad, m for sliding joints. */
  q: readonly number[];
  /** 0 to 1, null without a gripper. */
  opening: number | null;
}

/** What a mark adds, in this order. `pose: null` asks for a new one to be captured. */
export type Mark = { kind: 'goTo'; pose: Pose | null } | { kind: 'grip'; opening: number };

export function samePlace(model: ArmModel, a: readonly number[], b: readonly number[]): boolean {
  return (
    a.length === b.length &&
    model.joints.every(
      (joint, i) => Math.abs(a[i]! - b[i]!) <= (joint.type === 'revolute' ? SAME_ANGLE : SAME_LENGTH),
    )
  );
}

/** Where the steps leave the arm just after the step `afterId` (null: after all of them). */
export function leftAt(
  steps: readonly Step[],
  afterId: string | null,
  poses: readonly Pose[],
): { q: readonly number[] | null; opening: number | null } {
  const byId = new Map(poses.map((pose) => [pose.id, pose]));
  let q: readonly number[] | null = null;
  let opening: number | null = null;
  const rows = rowsOf(steps);
  // After a repeat means after all that it holds.
  const after = rows.find((row) => row.step.id === afterId);
  const last = after ? rowsOf([after.step]).at(-1)?.step.id : null;
  for (const { step } of rows) {
    if (step.kind === 'goTo' || step.kind === 'straightTo') q = byId.get(step.poseId)?.q ?? null;
    else if (step.kind === 'grip') opening = step.opening;
    if (step.id === last) break;
  }
  return { q, opening };
}

/**
 * "Add where the arm is now": a Go to, when it stands elsewhere than the steps left it, at an existing pose where
 * there is one; and a Grip, when the fingers stand otherwise. First there, then grip: what a hand did in that order.
 *
 * @param grippedAtStart - the opening when recording began, for sequences without a Grip yet
 */
export function whatMarkAdds(input: {
  model: ArmModel;
  now: ArmNow;
  poses: readonly Pose[];
  left: { q: readonly number[] | null; opening: number | null };
  grippedAtStart: number | null;
}): Mark[] {
  const { model, now, poses, left, grippedAtStart } = input;
  const marks: Mark[] = [];
  if (left.q === null || !samePlace(model, left.q, now.q))
    marks.push({ kind: 'goTo', pose: poses.find((pose) => samePlace(model, pose.q, now.q)) ?? null });
  const before = left.opening ?? grippedAtStart;
  if (now.opening !== null && before !== null && Math.abs(now.opening - before) > SAME_OPENING)
    marks.push({ kind: 'grip', opening: Math.round(now.opening * 100) / 100 });
  return marks;
}
