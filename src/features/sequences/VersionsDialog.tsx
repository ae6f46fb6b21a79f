import type { Arm, Sequence } from '../../../shared/api/resources';
import { useSequenceVersions } from '../../api/sequences';
import { Dialog } from '../../components/Dialog';
import { when } from '../../components/when';

export function VersionsDialog({
  arm,
  sequence,
  open,
  onClose,
  onShow,
}: {
  arm: Arm;
  sequence: Sequence;
  open: boolean;
  onClose: () => void;
  onShow: (version: number) => void;
}) {
  return (
    <Dialog open={open} onClose={onClose} title={`Versions of ${sequence.name}`}>
      <Versions arm={arm} sequence={sequence} onShow={onShow} />
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
}: {
  arm: Arm;
  sequence: Sequence;
  onShow: (version: number) => void;
}) {
  const versions = useSequenceVersions(arm.id, sequence.id).data ?? [];
  return (
    <table>
      <thead>
        <tr>
          <th className="r">Version</th>
          <th>Saved</th>
          <th>Steps</th>
          <th>Approval</th>
          <th>
            <span className="vh">Show</span>
          </th>
        </tr>
      </thead>
      <tbody>
        {versions.map((v) => (
          <tr key={v.version} className={v.version === sequence.shownVersion ? 'sel' : ''}>
            <td className="r n">{v.version}</td>
            <td>
              {v.by}, {when(v.atMs)}
            </td>
            <td className="n">{v.stepCount}</td>
            <td>
              {v.approval
                ? v.approval.holds
                  ? `approved by ${v.approval.by}`
                  : 'approval no longer holds'
                : ''}
            </td>
            <td className="act">
              <button type="button" className="btn sm" onClick={() => onShow(v.version)}>
                Show
              </button>
            </td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}
