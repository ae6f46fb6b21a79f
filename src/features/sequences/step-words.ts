import type { Pose } from '../../../shared/api/resources';
import type { ArmModel } from '../../../shared/arm/model';
import type { Step, StepKind, StepSpeed } from '../../../shared/sequence/steps';

export const KIND_WORDS: Record<StepKind, string> = {
  goTo: 'Go to',
  straightTo: 'Straight to',
  grip: 'Grip',
  wait: 'Wait',
  again: 'Again',
  remark: 'Remark',
};

export function speedWord(speed: StepSpeed): string {
  return typeof speed === 'number' ? `${Math.round(speed * 100)} %` : speed;
}

/** A step as a sentence: the words, what it is about, and the quiet details. */
export function sentence(
  step: Step,
  poses: readonly Pose[],
  model: ArmModel,
): { lead: string; about: string; detail: string } {
  switch (step.kind) {
    case 'goTo':
    case 'straightTo': {
      const pose = poses.find((p) => p.id === step.poseId);
      const settle = step.settle > 0 ? `, settle ${step.settle} s` : '';
      const on = step.blend ? `, goes on within ${Math.round(step.blend * 1e4) / 10} mm` : '';
      return {
        lead: KIND_WORDS[step.kind],
        about: pose?.name ?? 'a pose that is gone',
        detail: `${speedWord(step.speed)}, ${step.kind === 'goTo' ? 'joints together' : 'the tool on a line'}${settle}${on}`,
      };
    }
    case 'grip': {
      const widest = (model.gripper?.opening ?? 0) * 1000;
      return {
        lead: step.opening === 0 ? 'Grip closed' : 'Grip to',
        about: `${Math.round(step.opening * widest * 10) / 10} mm`,
        detail: '',
      };
    }
    case 'wait':
      return { lead: 'Wait', about: `${step.seconds} s`, detail: '' };
    case 'again':
      return {
        lead: 'Again',
        about: `${step.times} times`,
        detail: step.steps.length === 0 ? 'nothing in it yet' : '',
      };
    case 'remark':
      return { lead: '', about: '', detail: step.text || 'an empty remark' };
  }
}
