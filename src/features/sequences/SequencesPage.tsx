import './sequences.css';
import { Link, useNavigate } from 'react-router-dom';
import type { Arm } from '../../../shared/api/resources';
import { may } from '../../../shared/team/roles';
import { errorText } from '../../api/client';
import { useCreateSequence, useDeleteSequence, useSequences } from '../../api/sequences';
import { Message } from '../../components/Message';
import { when } from '../../components/when';
import { useHello } from '../../live/use-live';
import { toast } from '../shell/toast';

export function SequencesPage({ arm }: { arm: Arm }) {
  const sequences = useSequences(arm.id);
  const create = useCreateSequence(arm.id);
  const remove = useDeleteSequence(arm.id);
  const navigate = useNavigate();
  const role = useHello()?.you.role ?? 'observer';
  const teaches = may(role, 'sequence.edit');
  const start = () =>
    create.mutate(
      { name: `Sequence ${(sequences.data?.length ?? 0) + 1}`, steps: [] },
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
        {teaches && (
          <button
            type="button"
            className="btn ink"
            style={{ marginLeft: 'auto' }}
            disabled={create.isPending}
            onClick={start}
          >
            New sequence
          </button>
        )}
      </div>
      <div className="scroll">
        {sequences.isError && <Message kind="fault">{errorText(sequences.error)}</Message>}
        {sequences.data?.length === 0 ? (
          <div className="empty">
            <h2 className="h2">No sequences yet.</h2>
            <p className="quiet">
              Make one, press Record, jog the arm and mark each place. Then rehearse it, hold it through its
              first cycle, and let it run.
            </p>
          </div>
        ) : (
          <table>
            <thead>
              <tr>
                <th>Name</th>
                <th className="r">Steps</th>
                <th className="r">Version</th>
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
              {sequences.data?.map((sequence) => (
                <tr key={sequence.id}>
                  <td>
                    <Link className="link" to={sequence.id}>
                      <b>{sequence.name}</b>
                    </Link>
                    {sequence.note && <span className="note"> {sequence.note}</span>}
                  </td>
                  <td className="r n">{sequence.stepCount}</td>
                  <td className="r n">{sequence.version}</td>
                  <td className="wide-only">
                    {sequence.by}, {when(sequence.updatedAtMs)}
                  </td>
                  <td>
                    {sequence.approval
                      ? sequence.approval.holds
                        ? `version ${sequence.approvedVersion} approved by ${sequence.approval.by}`
                        : 'approval no longer holds'
                      : 'not approved'}
                  </td>
                  {teaches && (
                    <td className="act">
                      <button
                        type="button"
                        className="btn sm bare"
                        aria-label={`Delete ${sequence.name}`}
                        onClick={() => {
                          if (window.confirm(`Delete “${sequence.name}” with all its versions?`))
                            remove.mutate(sequence.id);
                        }}
                      >
                        Delete
                      </button>
                    </td>
                  )}
                </tr>
              ))}
            </tbody>
          </table>
        )}
      </div>
    </main>
  );
}
