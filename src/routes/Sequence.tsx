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
  const sequence = useSequence(arm.id, sequenceId, version);
  if (sequence.isPending)
    return (
      <main className="sheet">
        <p className="paper">Opening the sequence…</p>
      </main>
    );
  if (sequence.isError)
    return (
      <main className="sheet">
        <div className="paper">
          <Message kind="fault">{errorText(sequence.error)}</Message>
          <Link to={`/arms/${arm.id}/sequences`}>All sequences</Link>
        </div>
      </main>
    );
  return <SequenceEditor key={sequenceId} arm={arm} sequence={sequence.data} />;
}
