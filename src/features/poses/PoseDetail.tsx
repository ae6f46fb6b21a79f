import { useMemo, useState } from 'react';
import type { Arm, Pose } from '../../../shared/api/resources';
import { torqueWord } from '../../../shared/arm/drives';
import { worstTrust } from '../../../shared/arm/trust';
import { shownValue } from '../../../shared/arm/units';
import { may } from '../../../shared/team/roles';
import { errorText } from '../../api/client';
import { useDeletePose, useUndeletePose } from '../../api/poses';
import { freedomWord } from '../../components/freedom';
import { Silhouette } from '../../components/Silhouette';
import { toast } from '../../components/toast';
import { useArmState, useHello, useTelemetry } from '../../live/use-live';
import { CompareBars } from './CompareBar';
import { GoToPose } from './GoToPose';
import { LabelDialog } from './LabelDialog';
import { NEAR_LIMIT, percent, poseFacts, timeToGo } from './pose-facts';
import { ReteachDialog } from './ReteachDialog';
import { RevisionsDialog } from './RevisionsDialog';

/** Slow enough to read, and to leave the main thread to holds. */
const COMPARE_HZ = 5;
const TIME_HZ = 1;
const ORIGIN_WORDS = { captured: 'Captured', typed: 'Typed', imported: 'Imported' };
const round4 = (q: readonly number[]) => q.map((value) => Math.round(value * 1e4) / 1e4);

/** One pose beside the arm as it is now: how far apart, what it takes, hold to go, and what can be done to it. */
export function PoseDetail({ arm, pose, onGone }: { arm: Arm; pose: Pose; onGone: () => void }) {
  const { model } = arm;
  const [asking, setAsking] = useState<'reteach' | 'label' | 'revisions' | null>(null);
  const trust = useArmState((state) => state?.trust ?? []);
  const worst = worstTrust(trust);
  const known = worst === 'declared' || worst === 'referenced';
  const sample = useTelemetry((t) => (t ? round4(t.q) : null), COMPARE_HZ);
  const now = known ? sample : null;
  const opening = useArmState((state) => (state?.gripper?.energised ? state.gripper.opening : null));
  const facts = useMemo(() => poseFacts(model, pose), [model, pose]);
  const reachable = facts.fits && facts.beyond.length === 0;
  const teaches = may(useHello()?.you.role ?? 'observer', 'pose.edit');
  return (
    <section className="pane cmp" aria-label={`Pose ${pose.name}`}>
      <div className="cap">
        <h2 className="h2">
          {pose.name}
          {now ? ', compared with now' : ''}
        </h2>
        <button type="button" className="btn sm bare end phone-only" onClick={onGone}>
          All poses
        </button>
      </div>
      <div className="pic">
        {facts.fits ? (
          <Silhouette
            model={model}
            q={now}
            gripper={opening}
            ghost={pose.q}
            ghostGripper={pose.gripper}
            size="large"
          />
        ) : (
          <span />
        )}
        <Facts arm={arm} pose={pose} known={known} />
      </div>
      {facts.fits ? (
        <CompareBars
          model={model}
          q={pose.q}
          gripper={pose.gripper}
          now={now}
          nowOpening={opening}
          trust={trust}
        />
      ) : (
        <p className="small">
          This pose has {pose.q.length} joints; {model.name} has {model.joints.length}. Re-teach it.
        </p>
      )}
      <div className="act">
        {pose.note && <p className="small">{pose.note}</p>}
        <GoToPose arm={arm} pose={pose} reachable={reachable} trust={worst} />
        <div className="row">
          <button type="button" className="btn bare sm" onClick={() => setAsking('revisions')}>
            Revisions ({pose.revision})
          </button>
          {teaches ? (
            <>
              <button type="button" className="btn bare sm" onClick={() => setAsking('reteach')}>
                Re-teach…
              </button>
              <button type="button" className="btn bare sm" onClick={() => setAsking('label')}>
                Rename or tag…
              </button>
              <DeleteButton armId={arm.id} pose={pose} onGone={onGone} />
            </>
          ) : (
            <span className="note">Teachers re-teach, rename and delete poses.</span>
          )}
        </div>
      </div>
      <ReteachDialog arm={arm} pose={pose} open={asking === 'reteach'} onClose={() => setAsking(null)} />
      <LabelDialog armId={arm.id} pose={pose} open={asking === 'label'} onClose={() => setAsking(null)} />
      <RevisionsDialog arm={arm} pose={pose} open={asking === 'revisions'} onClose={() => setAsking(null)} />
    </section>
  );
}

/** Time, torque, the nearest limit, and how this pose came to be. */
function Facts({ arm, pose, known }: { arm: Arm; pose: Pose; known: boolean }) {
  const { model } = arm;
  const facts = useMemo(() => poseFacts(model, pose), [model, pose]);
  const from = useTelemetry((t) => (t ? round4(t.q) : null), TIME_HZ);
  const ceiling = useArmState((state) => state?.ceiling.fraction ?? null);
  const seconds = useMemo(
    () => (known && from && ceiling !== null && facts.fits ? timeToGo(model, from, pose.q, ceiling) : null),
    [known, from, ceiling, facts.fits, model, pose.q],
  );
  const { nearest, torque, beyond, freedom } = facts;
  const past = beyond[0];
  const nearJoint = nearest && model.joints[nearest.joint];
  const tight =
    nearest && nearJoint
      ? nearest.margin < NEAR_LIMIT * (nearJoint.limits.upper - nearJoint.limits.lower)
      : false;
  return (
    <ul>
      <li>
        Time at {ceiling === null ? 'the ceiling' : percent(ceiling)}
        <b className="n">{seconds === null ? '–' : `${seconds.toFixed(1)} s`}</b>
      </li>
      {torque && (
        <li className={torque.used >= 0.8 ? 'w' : ''}>
          Torque used
          <b>
            <span className="n">{percent(torque.used)}</span> · {torqueWord(torque.used)}
          </b>
        </li>
      )}
      {past !== undefined ? (
        <li className="w">
          Past its limit<b>{(model.joints[past]?.name ?? '').toLowerCase()}</b>
        </li>
      ) : (
        nearest &&
        nearJoint && (
          <li className={tight ? 'w' : ''}>
            Nearest limit
            <b>
              {nearJoint.name.toLowerCase()}{' '}
              <span className="n">{shownValue(nearJoint.type, nearest.margin)}</span>
            </b>
          </li>
        )
      )}
      {freedom && (
        <li className={freedomWord(freedom.isotropy) === 'tight' ? 'w' : ''}>
          Freedom
          <b>
            {freedomWord(freedom.isotropy)}, stretched <span className="n">{percent(freedom.stretched)}</span>
          </b>
        </li>
      )}
      <li>
        {ORIGIN_WORDS[pose.origin]}, {pose.trust}
        <b>{pose.by}</b>
      </li>
    </ul>
  );
}

function DeleteButton({ armId, pose, onGone }: { armId: string; pose: Pose; onGone: () => void }) {
  const remove = useDeletePose(armId);
  const undelete = useUndeletePose(armId);
  const undo = () => undelete.mutate(pose.id, { onError: (error) => toast(errorText(error)) });
  return (
    <button
      type="button"
      className="btn bare sm"
      disabled={remove.isPending}
      onClick={() =>
        remove.mutate(pose.id, {
          onSuccess: () => {
            toast(`“${pose.name}” was deleted.`, { label: 'Undo', onClick: undo });
            onGone();
          },
          onError: (error) => toast(errorText(error)),
        })
      }
    >
      Delete
    </button>
  );
}
