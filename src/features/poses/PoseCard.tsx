import { memo, useMemo } from 'react';
import type { Pose } from '../../../shared/api/resources';
import type { ArmModel } from '../../../shared/arm/model';
import { TrustIcon, WarnIcon } from '../../components/icons';
import { Silhouette } from '../../components/Silhouette';
import { when } from '../../components/when';
import { cardNote, poseFacts } from './pose-facts';

/** An index card: silhouette, how sure it is, tags, one note, who and when. */
export const PoseCard = memo(function PoseCard({
  model,
  pose,
  chosen,
  onChoose,
}: {
  model: ArmModel;
  pose: Pose;
  chosen: boolean;
  onChoose: (id: string) => void;
}) {
  const facts = useMemo(() => poseFacts(model, pose), [model, pose]);
  const note = cardNote(model, pose, facts);
  const reachable = facts.fits && facts.beyond.length === 0;
  return (
    <button
      type="button"
      className={`icard pc ${pose.trust === 'declared' ? 'declared' : ''} ${reachable ? '' : 'out'} ${chosen ? 'sel' : ''}`}
      aria-pressed={chosen}
      onClick={() => onChoose(pose.id)}
    >
      <span className="name">
        <span className="words">{pose.name}</span>
        <span className="end">
          <TrustIcon trust={pose.trust} />
          <span className="vh">{pose.trust}</span>
        </span>
      </span>
      <span className="bd">
        {facts.fits ? <Silhouette model={model} q={pose.q} gripper={pose.gripper} size="card" /> : <span />}
        <span className="tx">
          <span className="tags">
            {pose.tags.map((tag) => (
              <span key={tag} className="tag">
                {tag}
              </span>
            ))}
          </span>
          {note.warns ? (
            <span className="nb warn">
              <WarnIcon />
              <span>{note.text}</span>
            </span>
          ) : (
            <span className="nb">{note.text}</span>
          )}
          <span className="who">
            {pose.by}, {when(pose.atMs)}
          </span>
        </span>
      </span>
    </button>
  );
});
