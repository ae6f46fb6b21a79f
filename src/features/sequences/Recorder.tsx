import type { Arm, Pose } from '../../../shared/api/resources';
import type { Step } from '../../../shared/sequence/steps';
import { errorText } from '../../api/client';
import { useCapturePose } from '../../api/poses';
import { latestTelemetry } from '../../live/live-store';
import { useArmState } from '../../live/use-live';
import { toast } from '../shell/toast';

/** A pose this near is the same place, rad or m. */
const SAME = 2e-4;

/**
 * Recording by marking: jog on Move (in another window, or before), then mark. A mark adds where the arm
 * stands now as a Go to, with a newly captured pose unless one is already there, and a Grip when the gripper
 * has changed since the last mark.
 */
export function Recorder({
  arm,
  poses,
  steps,
  newId,
  onMarked,
}: {
  arm: Arm;
  poses: readonly Pose[];
  steps: readonly Step[];
  newId: () => string;
  onMarked: (added: Step[]) => void;
}) {
  const capture = useCapturePose(arm.id);
  const standing = useArmState((state) => state?.motors === 'standing');
  const known = useArmState((state) =>
    (state?.trust ?? []).every((t) => t === 'declared' || t === 'referenced'),
  );
  const opening = useArmState((state) => (state?.gripper?.energised ? state.gripper.opening : null));
  const reason = !standing
    ? 'the arm has to stand, energised'
    : !known
      ? 'its position has to be known'
      : null;

  const lastGrip = lastOpening(steps);
  const gripStep = (): Step[] =>
    opening !== null && arm.model.gripper && (lastGrip === null || Math.abs(lastGrip - opening) > 0.005)
      ? [{ id: newId(), kind: 'grip', opening: Math.round(opening * 1000) / 1000 }]
      : [];

  const mark = () => {
    const q = latestTelemetry()?.q;
    const there =
      q &&
      poses.find((pose) => pose.q.length === q.length && pose.q.every((v, i) => Math.abs(v - q[i]!) < SAME));
    const add = (poseId: string) =>
      onMarked([{ id: newId(), kind: 'goTo', poseId, speed: 'easy', settle: 0 }, ...gripStep()]);
    if (there) return add(there.id);
    capture.mutate({}, { onSuccess: (pose) => add(pose.id), onError: (error) => toast(errorText(error)) });
  };
  const markGrip = () => {
    const added = gripStep();
    if (added.length > 0) onMarked(added);
    else toast('The gripper has not changed since the last mark.');
  };

  return (
    <span className="line">
      <button
        type="button"
        className="btn ink"
        disabled={reason !== null || capture.isPending}
        title={reason ?? undefined}
        onClick={mark}
      >
        Mark
      </button>
      {arm.model.gripper && (
        <button type="button" className="btn" disabled={reason !== null} onClick={markGrip}>
          Mark the grip
        </button>
      )}
      <span className="note">{reason ?? 'adds where the arm is now'}</span>
    </span>
  );
}

/** The gripper opening that the sequence so far ends with. */
function lastOpening(steps: readonly Step[]): number | null {
  for (const step of [...steps].reverse()) {
    if (step.kind === 'grip') return step.opening;
    if (step.kind === 'again') {
      const inside = lastOpening(step.steps);
      if (inside !== null) return inside;
    }
  }
  return null;
}
