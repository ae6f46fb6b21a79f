import { Link, useParams, useSearchParams } from 'react-router-dom';
import { errorText } from '../api/client';
import { useSequence } from '../api/sequences';
import { Message } from '../components/Message';
import { SequenceEditor } from '../features/sequences/SequenceEditor';
import { useCurrentArm } from './use-current-arm';

export function Component() {
  const arm = useCurrentArm();
  const { sequenceId = '' } = useParams();
  const [search] = useSearchParams();
  const version = Number(search.get('version')) || undefined;
  const newest = useSequence(arm.id, sequenceId);
  const old = useSequence(arm.id, sequenceId, version);
  const error = newest.error ?? old.error;
  if (error)
    return (
      <main className="sheet">
        <div className="paper">
          <Message kind="fault">{errorText(error)}</Message>
          <Link to={`/arms/${arm.id}/sequences`}>All sequences</Link>
        </div>
      </main>
    );
  if (!newest.data || !old.data)
    return (
      <main className="sheet">
        <p className="paper">Opening the sequence…</p>
      </main>
    );
  const isOld = old.data.shownVersion !== newest.data.version;
  return <SequenceEditor key={sequenceId} arm={arm} newest={newest.data} old={isOld ? old.data : null} />;
}
