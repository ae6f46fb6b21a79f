import type { Pose } from '../../../shared/api/resources';
import type { ArmModel } from '../../../shared/arm/model';
import { TrustIcon, WarnIcon } from '../../components/icons';
import { Silhouette } from '../../components/Silhouette';
import { ago } from '../../components/when';

/** Whether every joint value lies inside the soft limits of today's arm. */
export function reachable(model: ArmModel, q: readonly number[]): boolean {
  return (
    q.length === model.joints.length &&
    model.joints.every((joint, i) => q[i]! >= joint.limits.lower - 1e-9 && q[i]! <= joint.limits.upper + 1e-9)
  );
}

export function PoseCard({
  model,
  pose,
  chosen,
  onChoose,
}: {
  model: ArmModel;
  pose: Pose;
  chosen: boolean;
  onChoose: () => void;
}) {
  const inside = reachable(model, pose.q);
  return (
    <button
      type="button"
      className={`icard pc ${pose.trust === 'declared' ? 'declared' : ''} ${inside ? '' : 'out'} ${chosen ? 'sel' : ''}`}
      aria-pressed={chosen}
      onClick={onChoose}
    >
      <span className="name">
        <TrustIcon trust={pose.trust} />
        {pose.name}
        {pose.revision > 1 && <span className="end note">re-taught {pose.revision - 1}×</span>}
      </span>
      <span className="bd">
        <Silhouette model={model} q={pose.q} />
        <span className="tx">
          <span className="tags">
            {pose.tags.map((tag) => (
              <span key={tag} className="tag">
                {tag}
              </span>
            ))}
          </span>
          {inside ? (
            <span className="nb">{pose.note}</span>
          ) : (
            <span className="nb warn">
              <WarnIcon />
              outside today’s limits
            </span>
          )}
          <span className="who">
            {pose.by}, {ago(pose.atMs)}
          </span>
        </span>
      </span>
    </button>
  );
}
