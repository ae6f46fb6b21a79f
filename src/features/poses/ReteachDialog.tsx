import type { Arm, Pose } from '../../../shared/api/resources';
import { worstTrust } from '../../../shared/arm/trust';
import { errorText } from '../../api/client';
import { useReteachPose } from '../../api/poses';
import { Dialog } from '../../components/Dialog';
import { Message } from '../../components/Message';
import { toast } from '../../components/toast';
import { useArmState } from '../../live/use-live';

/** Asks before a pose is given a new place; the old one stays as a revision. */
export function ReteachDialog({
  arm,
  pose,
  open,
  onClose,
}: {
  arm: Arm;
  pose: Pose;
  open: boolean;
  onClose: () => void;
}) {
  return (
    <Dialog open={open} onClose={onClose} title={`Re-teach ${pose.name}`}>
      <ReteachForm arm={arm} pose={pose} onClose={onClose} />
    </Dialog>
  );
}

function ReteachForm({ arm, pose, onClose }: { arm: Arm; pose: Pose; onClose: () => void }) {
  const reteach = useReteachPose(arm.id);
  const standing = useArmState((state) => state?.motors === 'standing');
  const trust = useArmState((state) => worstTrust(state?.trust ?? []));
  const reason = !standing
    ? `${arm.name} has to stand, energised, to be taught from.`
    : trust === 'unknown' || trust === 'doubtful'
      ? `The position of ${arm.name} is ${trust}. Declare or reference it on Move first.`
      : null;
  return (
    <div className="stack">
      <p>
        “{pose.name}” becomes where {arm.name} stands now. Its old place stays as revision{' '}
        <span className="n">{pose.revision}</span> and can be restored. Sequences that go there need to be
        approved again.
      </p>
      {reason && <Message>{reason}</Message>}
      {reteach.isError && <Message kind="fault">{errorText(reteach.error)}</Message>}
      <div className="acts">
        <button type="button" className="btn" onClick={onClose}>
          Not now
        </button>
        <button
          type="button"
          className="btn ink"
          disabled={reason !== null || reteach.isPending}
          onClick={() =>
            reteach.mutate(pose.id, {
              onSuccess: (taught) => {
                toast(`“${taught.name}” was re-taught: revision ${taught.revision}.`);
                onClose();
              },
            })
          }
        >
          Re-teach here
        </button>
      </div>
    </div>
  );
}
