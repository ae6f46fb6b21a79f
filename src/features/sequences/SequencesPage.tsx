import './sequences.css';
import { useState } from 'react';
import { Link, useNavigate } from 'react-router-dom';
import type { Arm, SequenceSummary } from '../../../shared/api/resources';
import { may } from '../../../shared/team/roles';
import { errorText } from '../../api/client';
import { useCreateSequence, useDeleteSequence, useSequences } from '../../api/sequences';
import { Dialog } from '../../components/Dialog';
import { Message } from '../../components/Message';
import { toast } from '../../components/toast';
import { when } from '../../components/when';
import { useArmState, useHello } from '../../live/use-live';

/** All sequences of an arm; teachers write them, operators run what is approved. */
export function SequencesPage({ arm }: { arm: Arm }) {
  const sequences = useSequences(arm.id);
  const create = useCreateSequence(arm.id);
  const navigate = useNavigate();
  const teaches = may(useHello()?.you.role ?? 'observer', 'sequence.edit');
  const running = useArmState((state) => state?.run?.sequenceId ?? null);
  const [deleting, setDeleting] = useState<SequenceSummary | null>(null);
  const start = () =>
    create.mutate(
      { name: freeName(sequences.data ?? []), steps: [] },
      {
        onSuccess: (made) => void navigate(`/arms/${arm.id}/sequences/${made.id}`),
        onError: (error) => toast(errorText(error)),
      },
    );
  return (
    <main className="sheet listpage">
      <div className="bar">
        <h1 className="title">Sequences</h1>
        <span className="quiet small">
          {teaches ? '' : 'Teachers write sequences; operators run approved ones.'}
        </span>
        <button
          type="button"
          className="btn ink end"
          disabled={!teaches || create.isPending}
          title={teaches ? undefined : 'Teachers write sequences.'}
          onClick={start}
        >
          New sequence
        </button>
      </div>
      <div className="scroll">
        {sequences.isError && <Message kind="fault">{errorText(sequences.error)}</Message>}
        {sequences.data?.length === 0 ? (
          <div className="empty">
            <h2 className="h2">No sequences yet</h2>
            <p className="quiet">
              Make one, press Record, jog the arm and mark each place. Then rehearse it, hold it through its
              first cycle, and let it run.
            </p>
          </div>
        ) : (
          sequences.data && (
            <table>
              <thead>
                <tr>
                  <th>Name</th>
                  <th className="r">Steps</th>
                  <th className="r wide-only">Version</th>
                  <th className="wide-only">Saved</th>
                  <th>For operators</th>
                  {teaches && (
                    <th>
                      <span className="vh">Delete</span>
                    </th>
                  )}
                </tr>
              </thead>
              <tbody>
                {sequences.data.map((sequence) => (
                  <tr key={sequence.id} className={running === sequence.id ? 'sel' : ''}>
                    <td>
                      <Link className="link" to={sequence.id}>
                        <b>{sequence.name}</b>
                      </Link>
                      {sequence.note && <span className="note"> {sequence.note}</span>}
                      {running === sequence.id && <span className="note"> is running now</span>}
                    </td>
                    <td className="r n">{sequence.stepCount}</td>
                    <td className="r n wide-only">{sequence.version}</td>
                    <td className="wide-only">
                      {sequence.by}, {when(sequence.updatedAtMs)}
                    </td>
                    <td>{approvalWords(sequence)}</td>
                    {teaches && (
                      <td className="r">
                        <button
                          type="button"
                          className="btn sm bare"
                          aria-label={`Delete ${sequence.name}…`}
                          onClick={() => setDeleting(sequence)}
                        >
                          Delete…
                        </button>
                      </td>
                    )}
                  </tr>
                ))}
              </tbody>
            </table>
          )
        )}
      </div>
      <DeleteDialog armId={arm.id} sequence={deleting} onClose={() => setDeleting(null)} />
    </main>
  );
}

/** "Sequence 3": the first number that no name has yet. */
export function freeName(taken: readonly { name: string }[]): string {
  const names = new Set(taken.map((sequence) => sequence.name));
  for (let n = 1; ; n++) if (!names.has(`Sequence ${n}`)) return `Sequence ${n}`;
}

function approvalWords({ approval, approvedVersion, version }: SequenceSummary): string {
  if (!approval) return 'not approved';
  if (!approval.holds) return 'approval no longer holds';
  return approvedVersion === version
    ? `approved by ${approval.by}`
    : `version ${approvedVersion} approved by ${approval.by}`;
}

function DeleteDialog({
  armId,
  sequence,
  onClose,
}: {
  armId: string;
  sequence: SequenceSummary | null;
  onClose: () => void;
}) {
  const remove = useDeleteSequence(armId);
  return (
    <Dialog open={sequence !== null} onClose={onClose} title={`Delete ${sequence?.name ?? ''}`}>
      <p>
        All <span className="n">{sequence?.version}</span> versions go. Runs of it stay in the history.
      </p>
      {remove.isError && <Message kind="fault">{errorText(remove.error)}</Message>}
      <div className="acts">
        <button type="button" className="btn" onClick={onClose}>
          Keep it
        </button>
        <button
          type="button"
          className="btn danger"
          disabled={remove.isPending}
          onClick={() => sequence && remove.mutate(sequence.id, { onSuccess: onClose })}
        >
          Delete
        </button>
      </div>
    </Dialog>
  );
}
