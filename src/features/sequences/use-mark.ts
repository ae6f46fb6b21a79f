import { useState } from 'react';
import type { Arm, Pose } from '../../../shared/api/resources';
import { worstTrust } from '../../../shared/arm/trust';
import type { StepSpeed } from '../../../shared/sequence/steps';
import { errorText } from '../../api/client';
import { useCapturePose } from '../../api/poses';
import { latestTelemetry, useLiveStore } from '../../live/live-store';
import { useArmState, useTelemetry } from '../../live/use-live';
import type { Edit, Editing, NewStep } from './editing';
import { leftAt, type Mark, whatMarkAdds } from './marking';

const openingNow = (): number | null => {
  const gripper = useLiveStore.getState().state?.gripper;
  return gripper?.energised ? gripper.opening : null;
};

/** Marking: what a press would add now, why it cannot, and the press itself. */
export function useMark(
  arm: Arm,
  poses: readonly Pose[],
  editing: Editing,
  dispatch: (action: Edit) => void,
) {
  const [grippedAtStart] = useState(openingNow);
  const [speed, setSpeed] = useState<StepSpeed>('easy');
  const capture = useCapturePose(arm.id);
  const motors = useArmState((state) => state?.motors ?? 'resting');
  const trust = useArmState((state) => worstTrust(state?.trust ?? []));
  const gripping = useArmState((state) => state?.gripper?.moving ?? false);
  const opening = useArmState((state) => (state?.gripper?.energised ? state.gripper.opening : null));
  // Drawn twice a second; the press itself looks at the newest sample.
  const q = useTelemetry((t) => t?.q ?? null, 2);
  const reason =
    motors !== 'standing' || gripping
      ? 'Let the arm and its gripper come to rest.'
      : trust === 'unknown' || trust === 'doubtful'
        ? `The position is ${trust}. Declare or reference it on Move.`
        : null;

  const marksFor = (now: readonly number[] | null, opening: number | null): Mark[] => {
    if (!now) return [];
    const left = leftAt(editing.draft.steps, editing.selected, poses);
    return whatMarkAdds({ model: arm.model, now: { q: now, opening }, poses, left, grippedAtStart });
  };

  const press = async () => {
    const added: NewStep[] = [];
    for (const mark of marksFor(latestTelemetry()?.q ?? null, openingNow())) {
      if (mark.kind === 'grip') added.push(mark);
      else {
        const pose = mark.pose ?? (await capture.mutateAsync({}));
        added.push({ kind: 'goTo', poseId: pose.id, speed, settle: 0 });
      }
    }
    if (added.length > 0) dispatch({ type: 'insertAll', steps: added });
  };

  return {
    reason,
    busy: capture.isPending,
    error: capture.isError ? errorText(capture.error) : null,
    speed,
    setSpeed,
    would: marksFor(q, opening),
    // The error is shown beside the button.
    press: () => void press().catch(() => undefined),
  };
}
