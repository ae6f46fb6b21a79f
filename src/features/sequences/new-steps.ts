import type { StepKind } from '../../../shared/sequence/steps';
import type { NewStep } from './editing';

/** A new step with its usual values. */
export function usualStep(kind: StepKind, poseId: string): NewStep {
  switch (kind) {
    case 'goTo':
    case 'straightTo':
      return { kind, poseId, speed: 'easy', settle: 0 };
    case 'grip':
      return { kind, opening: 0 };
    case 'wait':
      return { kind, seconds: 1 };
    case 'again':
      return { kind, times: 2, steps: [] };
    case 'remark':
      return { kind, text: '' };
  }
}
