import { Link } from 'react-router-dom';
import type { Arm } from '../../../shared/api/resources';
import { worstTrust } from '../../../shared/arm/trust';
import { may } from '../../../shared/team/roles';
import { errorText } from '../../api/client';
import { useCapturePose, usePoses } from '../../api/poses';
import { Silhouette } from '../../components/Silhouette';
import { toast } from '../../components/toast';
import { ago } from '../../components/when';
import { useArmState, useHello } from '../../live/use-live';

export function useCapture(arm: Arm) {
  const capture = useCapturePose(arm.id);
  const role = useHello()?.you.role ?? 'observer';
  const motors = useArmState((state) => state?.motors ?? 'resting');
  const trust = useArmState((state) => worstTrust(state?.trust ?? []));
  const reason = !may(role, 'pose.edit')
    ? 'teachers capture poses'
    : motors !== 'standing'
      ? 'capture once it stands'
      : trust === 'unknown' || trust === 'doubtful'
        ? 'capture needs a known position'
        : null;
  return {
    reason,
    busy: capture.isPending,
    capture: () =>
      capture.mutate(
        {},
        {
          onSuccess: (pose) => toast(`Captured as “${pose.name}”.`),
          onError: (error) => toast(errorText(error)),
        },
      ),
  };
}

export function CaptureButton({ arm, className = '' }: { arm: Arm; className?: string }) {
  const { reason, busy, capture } = useCapture(arm);
  return (
    <button
      type="button"
      className={`btn ${className}`}
      disabled={reason !== null || busy}
      title={reason ?? undefined}
      onClick={capture}
    >
      Capture pose
    </button>
  );
}

export function RecentPoses({ arm }: { arm: Arm }) {
  const poses = usePoses(arm.id).data ?? [];
  const { reason } = useCapture(arm);
  return (
    <section className="pane recent" aria-label="Recent poses">
      <div className="cap">
        <h2 className="h3">Recent poses</h2>
        <span className="note ex">{reason ?? 'where the arm stands now'}</span>
        <Link className="btn sm bare end" to={`/arms/${arm.id}/poses`}>
          All {poses.length}
        </Link>
        <CaptureButton arm={arm} className="sm" />
      </div>
      {poses.length === 0 ? (
        <p className="small quiet">No poses yet. Jog the arm to a place worth keeping and capture it.</p>
      ) : (
        <div className="cards">
          {poses.slice(0, 4).map((pose) => (
            <Link
              key={pose.id}
              className={`icard rc ${pose.trust === 'declared' ? 'declared' : ''}`}
              style={{ color: 'inherit', textDecoration: 'none' }}
              to={`/arms/${arm.id}/poses?pose=${pose.id}`}
            >
              <span className="name">{pose.name}</span>
              <span className="bd">
                <Silhouette model={arm.model} q={pose.q} />
                <span className="ago">{ago(pose.atMs)}</span>
              </span>
            </Link>
          ))}
        </div>
      )}
    </section>
  );
}
