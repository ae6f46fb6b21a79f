import { useEffect, useState } from 'react';
import type { Arm, Pose } from '../../../shared/api/resources';
import { figure, shownUnit, shownValue, toShown } from '../../../shared/arm/units';
import { may } from '../../../shared/team/roles';
import { errorText } from '../../api/client';
import {
  useChangePose,
  useDeletePose,
  usePoseRevisions,
  useRestorePose,
  useReteachPose,
  useUndeletePose,
} from '../../api/poses';
import { Field } from '../../components/Field';
import { GoButton } from '../../components/HoldButton';
import { Message } from '../../components/Message';
import { Silhouette } from '../../components/Silhouette';
import { when } from '../../components/when';
import { useArmState, useHello, useInControl, useTelemetry } from '../../live/use-live';
import { toast } from '../shell/toast';
import { reachable } from './PoseCard';

/** One pose beside the arm as it is now: compare, go there, re-teach, label, revisions. */
export function PoseDetail({ arm, pose, onGone }: { arm: Arm; pose: Pose; onGone: () => void }) {
  const { model } = arm;
  const role = useHello()?.you.role ?? 'observer';
  const teaches = may(role, 'pose.edit');
  const now = useTelemetry((t) => t?.q ?? null, 5);
  const known = useArmState((state) =>
    (state?.trust ?? []).every((t) => t === 'declared' || t === 'referenced'),
  );
  const standing = useArmState((state) => state?.motors === 'standing');
  const energised = useArmState((state) => state?.energised.some(Boolean) ?? false);
  const inControl = useInControl();
  const reteach = useReteachPose(arm.id);
  const remove = useDeletePose(arm.id);
  const undelete = useUndeletePose(arm.id);
  const inside = reachable(model, pose.q);
  const whyNot = !may(role, 'arm.control')
    ? 'operators move the arm'
    : !energised
      ? 'energise on Move first'
      : !inControl
        ? 'take control first'
        : !known
          ? 'the position is not known'
          : !inside
            ? 'outside the soft limits'
            : null;
  const difference = (i: number) => (now && known ? pose.q[i]! - now[i]! : null);
  return (
    <aside className="pane cmp" aria-label={`Pose ${pose.name}`}>
      <div className="cap">
        <h2 className="h2">{pose.name}</h2>
        <span className="note">
          {pose.origin} by {pose.by}, {when(pose.atMs)}, {pose.trust}
        </span>
      </div>
      <div className="pic">
        <Silhouette model={model} q={pose.q} ghost={known && now ? now : undefined} />
        <p className="note">{known && now ? 'Dashed: the arm now.' : 'Where the arm is now is not known.'}</p>
      </div>
      <div className="stack">
        <table>
          <thead>
            <tr>
              <th>Joint</th>
              <th className="r">Pose</th>
              <th className="r">From now</th>
            </tr>
          </thead>
          <tbody>
            {model.joints.map((joint, i) => {
              const d = difference(i);
              return (
                <tr key={joint.name}>
                  <td>{joint.name}</td>
                  <td className="r n">{pose.q[i] === undefined ? '–' : shownValue(joint.type, pose.q[i])}</td>
                  <td className="r n plan">
                    {d === null
                      ? '–'
                      : Math.abs(toShown(joint.type, d)) < 0.05
                        ? 'same'
                        : `${d > 0 ? '+' : ''}${figure(toShown(joint.type, d), 1)}${shownUnit(joint.type) === '°' ? '°' : ' mm'}`}
                  </td>
                </tr>
              );
            })}
            {pose.gripper !== null && model.gripper && (
              <tr>
                <td>Gripper</td>
                <td className="r n">{(pose.gripper * model.gripper.opening * 1000).toFixed(1)} mm</td>
                <td className="r">not moved by “go”</td>
              </tr>
            )}
          </tbody>
        </table>
        <div className="act">
          <GoButton
            id={`pose-${pose.id}`}
            motion={{ kind: 'pose', poseId: pose.id }}
            hint={whyNot ?? 'all joints together; letting go stops it'}
            disabled={whyNot !== null}
          >
            Hold to go there
          </GoButton>
        </div>
        {teaches && (
          <div className="line">
            <button
              type="button"
              className="btn"
              disabled={!standing || !known || reteach.isPending}
              onClick={() =>
                reteach.mutate(pose.id, {
                  onSuccess: () =>
                    toast(`“${pose.name}” is now where the arm stands. The old place stays as a revision.`),
                  onError: (error) => toast(errorText(error)),
                })
              }
            >
              Re-teach here
            </button>
            <button
              type="button"
              className="btn bare"
              onClick={() =>
                remove.mutate(pose.id, {
                  onSuccess: () => {
                    toast(`“${pose.name}” deleted.`, {
                      label: 'Undo',
                      onClick: () => undelete.mutate(pose.id),
                    });
                    onGone();
                  },
                })
              }
            >
              Delete
            </button>
          </div>
        )}
        {teaches && <LabelForm armId={arm.id} pose={pose} />}
        <Revisions arm={arm} pose={pose} teaches={teaches} />
      </div>
    </aside>
  );
}

function LabelForm({ armId, pose }: { armId: string; pose: Pose }) {
  const change = useChangePose(armId);
  const [name, setName] = useState(pose.name);
  const [tags, setTags] = useState(pose.tags.join(', '));
  const [note, setNote] = useState(pose.note);
  useEffect(() => {
    setName(pose.name);
    setTags(pose.tags.join(', '));
    setNote(pose.note);
  }, [pose]);
  const list = tags
    .split(',')
    .map((tag) => tag.trim())
    .filter(Boolean);
  const same = name === pose.name && note === pose.note && list.join() === pose.tags.join();
  return (
    <form
      className="stack"
      onSubmit={(event) => {
        event.preventDefault();
        change.mutate({ id: pose.id, name, tags: list, note });
      }}
    >
      <Field label="Name" value={name} maxLength={60} onChange={(event) => setName(event.target.value)} />
      <Field
        label="Tags"
        help="separated by commas"
        value={tags}
        onChange={(event) => setTags(event.target.value)}
      />
      <Field label="Note" value={note} maxLength={500} onChange={(event) => setNote(event.target.value)} />
      {change.isError && <Message kind="fault">{errorText(change.error)}</Message>}
      <p>
        <button type="submit" className="btn sm" disabled={same || !name.trim() || change.isPending}>
          Save labels
        </button>
      </p>
    </form>
  );
}

function Revisions({ arm, pose, teaches }: { arm: Arm; pose: Pose; teaches: boolean }) {
  const revisions = usePoseRevisions(arm.id, pose.id).data ?? [];
  const restore = useRestorePose(arm.id);
  if (revisions.length < 2) return null;
  return (
    <section>
      <h3 className="h3">Revisions</h3>
      <ul>
        {revisions.map((r) => (
          <li key={r.revision} className="line small">
            <span className="n">{r.revision}</span>
            <span>
              {r.origin} by {r.by}, {when(r.atMs)}, {r.trust}
            </span>
            {r.revision === pose.revision ? (
              <span className="tag end">now</span>
            ) : (
              teaches && (
                <button
                  type="button"
                  className="btn sm bare end"
                  disabled={restore.isPending}
                  onClick={() => restore.mutate({ id: pose.id, revision: r.revision })}
                >
                  Restore
                </button>
              )
            )}
          </li>
        ))}
      </ul>
    </section>
  );
}
