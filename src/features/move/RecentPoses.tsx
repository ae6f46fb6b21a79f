import { Link } from 'react-router-dom';
import type { Arm } from '../../../shared/api/resources';
import { usePoses } from '../../api/poses';
import { CaptureButton, useCaptureReason } from '../../components/CaptureButton';
import { Silhouette } from '../../components/Silhouette';
import { ago } from '../../components/when';

export function RecentPoses({ arm }: { arm: Arm }) {
  const poses = usePoses(arm.id).data ?? [];
  const reason = useCaptureReason();
  return (
    <section className="pane recent" aria-label="Recent poses">
      <div className="cap">
        <h2 className="h3">Recent poses</h2>
        <span className="note ex">{reason ?? 'where the arm stands now'}</span>
        <Link className="btn sm bare end" to={`/arms/${arm.id}/poses`}>
          All {poses.length}
        </Link>
        <CaptureButton arm={arm} className="sm" letter />
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
