import type { Pose, Rehearsal } from '../../../shared/api/resources';
import type { ArmModel } from '../../../shared/arm/model';
import type { Step } from '../../../shared/sequence/steps';
import type { Edit } from './editing';

/** Sideways distance of one level, px; also how far a nested row is drawn in. */
export const INDENT = 42;

export interface StepListProps {
  steps: readonly Step[];
  poses: readonly Pose[];
  model: ArmModel;
  rehearsal: Rehearsal | null;
  editable: boolean;
  selected: string | null;
  /** The step a run does now or next, and the word for it. */
  running: { stepId: string; word: string } | null;
  dispatch: (action: Edit) => void;
}
