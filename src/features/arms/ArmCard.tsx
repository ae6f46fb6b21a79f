import { Link } from 'react-router-dom';
import type { ArmSummary } from '../../../shared/api/resources';
import { MotorsIcon } from '../../components/icons';
import { when } from '../../components/when';

/** An arm on its index card: its motors in a word, who has control. The whole card opens it. */
export function ArmCard({ arm, old }: { arm: ArmSummary; old: boolean }) {
  const { motors } = arm;
  const filled = motors === 'moving' || motors === 'stopping' || motors === 'faulted' ? motors : '';
  return (
    <Link className="icard armcard" to={`/arms/${arm.id}/move`}>
      <h2 className="name">
        {arm.name}
        <span className="end open">open</span>
      </h2>
      <p className="tx">
        {arm.note || 'No note.'}
        <span className="note">
          {arm.jointCount} joints, revision {arm.revision}, {when(arm.updatedAtMs)}
        </span>
      </p>
      <p className={`live ${filled} ${old ? 'stale' : ''}`}>
        {motors && <MotorsIcon state={motors} />}
        <b>{motors ?? 'not open'}</b>
        <span>
          {motors === null
            ? 'opens resting'
            : arm.inControl
              ? `${arm.inControl} in control`
              : 'nobody in control'}
          {old && ', as last heard'}
        </span>
      </p>
    </Link>
  );
}
