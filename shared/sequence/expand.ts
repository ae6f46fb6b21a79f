import type { RehearsalProblem } from '../api/resources';
import type { ArmModel } from '../arm/model';
import { CEILINGS } from '../arm/trust';
import type { ProgramStep } from './program';
import { MAX_EXPANDED_STEPS, MAX_NESTING, type Step, type StepSpeed } from './steps';

/** What expansion needs to know of a pose. q: rad, m for sliding joints. */
export interface PoseForExpansion {
  id: string;
  name: string;
  q: readonly number[];
  deleted: boolean;
}

export interface ExpansionInput {
  steps: readonly Step[];
  poses: readonly PoseForExpansion[];
  model: ArmModel;
}

export interface Expansion {
  steps: ProgramStep[];
  problems: RehearsalProblem[];
}

/** A step's speed as a share of each joint's own speed limit. */
export function speedFraction(speed: StepSpeed): number {
  return typeof speed === 'number' ? speed : CEILINGS[speed];
}

/**
 * Turns a sequence into the flat list of steps that one cycle does: poses looked up, "again" unrolled,
 * remarks left out. Never throws for what a person can write: every trouble becomes a problem attached
 * to its step, and problems of severity `blocks` mean that the result must not be run.
 */
export function expandSequence({ steps, poses, model }: ExpansionInput): Expansion {
  const expansion: Expansion = { steps: [], problems: [] };
  const byId = new Map(poses.map((pose) => [pose.id, pose]));
  let full = false;

  function blocks(step: Step, path: string, code: string, message: string): void {
    const known = expansion.problems.some((p) => p.stepId === step.id && p.code === code);
    if (!known) expansion.problems.push({ stepId: step.id, path, severity: 'blocks', code, message });
  }

  function add(step: Step, path: string, programStep: ProgramStep): void {
    if (expansion.steps.length < MAX_EXPANDED_STEPS) expansion.steps.push(programStep);
    else if (!full) {
      full = true;
      blocks(
        step,
        path,
        'tooLong',
        `One cycle has more than ${MAX_EXPANDED_STEPS} steps here. Repeat fewer times, or use more cycles.`,
      );
    }
  }

  function visit(list: readonly Step[], prefix: string, depth: number): void {
    for (const [index, step] of list.entries()) {
      if (full) return;
      const path = `${prefix}${index + 1}`;
      if (step.kind === 'goTo' || step.kind === 'straightTo') {
        const pose = byId.get(step.poseId);
        if (!pose || pose.deleted) {
          blocks(
            step,
            path,
            'poseMissing',
            pose
              ? `The pose “${pose.name}” was deleted. Choose another one or bring it back on Poses.`
              : 'This step has no pose. Choose one.',
          );
        } else if (pose.q.length !== model.joints.length) {
          blocks(
            step,
            path,
            'poseOfOtherArm',
            `“${pose.name}” has ${pose.q.length} joints, ${model.name} has ${model.joints.length}. Re-teach it.`,
          );
        } else {
          add(step, path, {
            kind: 'goTo',
            stepId: step.id,
            path,
            q: [...pose.q],
            straight: step.kind === 'straightTo',
            speed: speedFraction(step.speed),
            settle: step.settle,
            blend: step.blend ?? 0,
            label: pose.name,
          });
        }
      } else if (step.kind === 'grip') {
        if (model.gripper === null)
          blocks(step, path, 'noGripper', `${model.name} has no gripper. Take this step out.`);
        else add(step, path, { kind: 'grip', stepId: step.id, path, opening: step.opening });
      } else if (step.kind === 'wait') {
        add(step, path, { kind: 'wait', stepId: step.id, path, seconds: step.seconds });
      } else if (step.kind === 'again') {
        if (depth >= MAX_NESTING) {
          blocks(
            step,
            path,
            'tooDeep',
            `Repeats are nested more than ${MAX_NESTING} deep here. Flatten them.`,
          );
          continue;
        }
        // What repeats is visited once and copied, so that empty nested repeats cost nothing.
        const from = expansion.steps.length;
        visit(step.steps, `${path}.`, depth + 1);
        const once = expansion.steps.slice(from);
        for (let time = 1; time < step.times && !full && once.length > 0; time++)
          for (const repeated of once) add(step, path, repeated);
      }
    }
  }

  visit(steps, '', 0);
  if (expansion.steps.length === 0 && expansion.problems.length === 0)
    expansion.problems.push({
      stepId: '',
      path: '',
      severity: 'blocks',
      code: 'empty',
      message: 'This sequence does nothing yet. Add a step.',
    });
  return expansion;
}
