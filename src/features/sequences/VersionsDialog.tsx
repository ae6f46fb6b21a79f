import { useQueryClient } from '@tanstack/react-query';
import type { Arm, Sequence } from '../../../shared/api/resources';
import { errorText } from '../../api/client';
import { sequenceQueries, useSequenceVersions } from '../../api/sequences';
import { Dialog } from '../../components/Dialog';
import { Message } from '../../components/Message';
import { toast } from '../../components/toast';
import { when } from '../../components/when';
import type { Draft } from './editing';

/** Every version ever saved: look at one, or bring it back as unsaved changes. */
export function VersionsDialog({
  arm,
  sequence,
  open,
  onClose,
  onShow,
  onRestore,
}: {
  arm: Arm;
  sequence: Sequence;
  open: boolean;
  onClose: () => void;
  onShow: (version: number) => void;
  /** Null for those who may not. */
  onRestore: ((draft: Draft) => void) | null;
}) {
  return (
    <Dialog open={open} onClose={onClose} title={`Versions of ${sequence.name}`}>
      <Versions arm={arm} sequence={sequence} onShow={onShow} onRestore={onRestore} />
      <div className="acts">
        <button type="button" className="btn" onClick={onClose}>
          Close
        </button>
      </div>
    </Dialog>
  );
}

function Versions({
  arm,
  sequence,
  onShow,
  onRestore,
}: {
  arm: Arm;
  sequence: Sequence;
  onShow: (version: number) => void;
  onRestore: ((draft: Draft) => void) | null;
}) {
  const versions = useSequenceVersions(arm.id, sequence.id);
  const client = useQueryClient();
  const restore = (version: number) =>
    void client.fetchQuery(sequenceQueries.detail(arm.id, sequence.id, version)).then(
      ({ name, note, steps }) => onRestore?.({ name, note, steps }),
      (error: unknown) => toast(errorText(error)),
    );
  if (versions.isError) return <Message kind="fault">{errorText(versions.error)}</Message>;
  return (
    <table>
      <thead>
        <tr>
          <th className="r">Version</th>
          <th>Saved</th>
          <th className="r">Steps</th>
          <th>For operators</th>
          <th>
            <span className="vh">Show or restore</span>
          </th>
        </tr>
      </thead>
      <tbody>
        {(versions.data ?? []).map((v) => (
          <tr key={v.version} className={v.version === sequence.shownVersion ? 'sel' : ''}>
            <td className="r n">{v.version}</td>
            <td>
              {v.by}, {when(v.atMs)}
            </td>
            <td className="r n">{v.stepCount}</td>
            <td>
              {v.approval
                ? v.approval.holds
                  ? `approved by ${v.approval.by}`
                  : 'approval no longer holds'
                : 'not approved'}
            </td>
            <td>
              <span className="line acts">
                <button
                  type="button"
                  className="btn sm"
                  aria-label={`Show version ${v.version}`}
                  onClick={() => onShow(v.version)}
                >
                  Show
                </button>
                {onRestore && v.version !== sequence.version && (
                  <button
                    type="button"
                    className="btn sm"
                    aria-label={`Restore version ${v.version}`}
                    onClick={() => restore(v.version)}
                  >
                    Restore
                  </button>
                )}
              </span>
            </td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}
