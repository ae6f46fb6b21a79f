import type { Arm, Pose, PoseRevision } from '../../../shared/api/resources';
import type { ArmModel } from '../../../shared/arm/model';
import { figure, shownUnit, toShown } from '../../../shared/arm/units';
import { may } from '../../../shared/team/roles';
import { errorText } from '../../api/client';
import { usePoseRevisions, useRestorePose } from '../../api/poses';
import { Dialog } from '../../components/Dialog';
import { TrustIcon } from '../../components/icons';
import { Message } from '../../components/Message';
import { toast } from '../../components/toast';
import { when } from '../../components/when';
import { useHello } from '../../live/use-live';

/** Every place this pose has had; restoring one makes it the newest. */
export function RevisionsDialog({
  arm,
  pose,
  open,
  onClose,
}: {
  arm: Arm;
  pose: Pose;
  open: boolean;
  onClose: () => void;
}) {
  return (
    <Dialog open={open} onClose={onClose} title={`Revisions of ${pose.name}`}>
      <Revisions arm={arm} pose={pose} />
      <div className="acts">
        <button type="button" className="btn" onClick={onClose}>
          Close
        </button>
      </div>
    </Dialog>
  );
}

function Revisions({ arm, pose }: { arm: Arm; pose: Pose }) {
  const revisions = usePoseRevisions(arm.id, pose.id);
  const restore = useRestorePose(arm.id);
  const teaches = may(useHello()?.you.role ?? 'observer', 'pose.edit');
  if (revisions.isError) return <Message kind="fault">{errorText(revisions.error)}</Message>;
  return (
    <>
      {restore.isError && <Message kind="fault">{errorText(restore.error)}</Message>}
      <table>
        <thead>
          <tr>
            <th className="r">Revision</th>
            <th>Taught</th>
            <th>Farthest from today’s</th>
            <th>
              <span className="vh">Restore</span>
            </th>
          </tr>
        </thead>
        <tbody>
          {(revisions.data ?? []).map((revision) => (
            <tr key={revision.revision}>
              <td className="r n">{revision.revision}</td>
              <td>
                <span className="line">
                  <span className="trustmark">
                    <TrustIcon trust={revision.trust} />
                  </span>
                  {revision.by}, {when(revision.atMs)}, {revision.trust}
                </span>
              </td>
              <td>{farthest(arm.model, revision, pose)}</td>
              <td className="r">
                {revision.revision === pose.revision ? (
                  <span className="tag">today’s</span>
                ) : (
                  teaches && (
                    <button
                      type="button"
                      className="btn sm"
                      aria-label={`Restore revision ${revision.revision}`}
                      disabled={restore.isPending}
                      onClick={() =>
                        restore.mutate(
                          { id: pose.id, revision: revision.revision },
                          {
                            onSuccess: (pose) =>
                              toast(`Revision ${revision.revision} is back, as revision ${pose.revision}.`),
                          },
                        )
                      }
                    >
                      Restore
                    </button>
                  )
                )}
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </>
  );
}

/** The joint that differs most, in words: "Forearm −2.4°". */
export function farthest(model: ArmModel, revision: Pick<PoseRevision, 'q'>, pose: Pick<Pose, 'q'>): string {
  let words = 'the same place';
  let most = 0;
  for (const [i, joint] of model.joints.entries()) {
    const difference = (revision.q[i] ?? 0) - (pose.q[i] ?? 0);
    const share = Math.abs(difference) / (joint.limits.upper - joint.limits.lower);
    const shown = toShown(joint.type, difference);
    if (share <= most || Math.abs(shown) < 0.05) continue;
    most = share;
    words = `${joint.name} ${shown > 0 ? '+' : ''}${figure(shown, 1)}${shownUnit(joint.type) === '°' ? '°' : ' mm'}`;
  }
  return words;
}
