import { massProperties } from '../../../shared/arm/mass-properties';
import { ArmModel, type Joint } from '../../../shared/arm/model';

/** Pure edits of an arm model being described, with everything that can be undone. */
export interface ModelHistory {
  past: ArmModel[];
  now: ArmModel;
  future: ArmModel[];
}

const MOST_UNDO = 100;

export const beginModel = (model: ArmModel): ModelHistory => ({ past: [], now: model, future: [] });
export function editModel(history: ModelHistory, next: ArmModel): ModelHistory {
  if (JSON.stringify(next) === JSON.stringify(history.now)) return history;
  return { past: [...history.past, history.now].slice(-MOST_UNDO), now: next, future: [] };
}
export function undoModel(history: ModelHistory): ModelHistory {
  const now = history.past.at(-1);
  return now ? { past: history.past.slice(0, -1), now, future: [history.now, ...history.future] } : history;
}
export function redoModel(history: ModelHistory): ModelHistory {
  const [now, ...future] = history.future;
  return now ? { past: [...history.past, history.now], now, future } : history;
}

export function withJoint(model: ArmModel, index: number, change: Partial<Joint>): ArmModel {
  return {
    ...model,
    joints: model.joints.map((joint, i) => (i === index ? { ...joint, ...change } : joint)),
  };
}

/** What the schema says is wrong, by path ("joints.1.limits.lower"). */
export function modelErrors(model: ArmModel): Map<string, string> {
  const parsed = ArmModel.safeParse(model);
  if (parsed.success) return new Map();
  return new Map(parsed.error.issues.map((issue) => [issue.path.map(String).join('.'), issue.message]));
}

/** The link's mass and inertia worked out anew from its section, length and material. */
export function withMassFromShape(joint: Joint): Joint {
  return { ...joint, link: { ...joint.link, ...massProperties(joint.link.shape, joint.link.end) } };
}
