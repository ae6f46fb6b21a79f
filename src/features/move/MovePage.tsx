import './move.css';
import { useMemo, useState } from 'react';
import type { Arm } from '../../../shared/api/resources';
import type { ArmModel } from '../../../shared/arm/model';
import { shownValue } from '../../../shared/arm/units';
import { compileChain, reachOf, type ToolFrame, toolAxisOffer } from '../../../shared/kinematics';
import { NUDGE_ANGLES, NUDGE_LENGTHS, TOOL_AXES } from '../../../shared/live/client-messages';
import { may } from '../../../shared/team/roles';
import { usePoses } from '../../api/poses';
import { LockIcon } from '../../components/icons';
import { Segmented } from '../../components/Segmented';
import { useArmState, useConnection, useHello, useInControl } from '../../live/use-live';
import { ArmView } from './ArmView';
import { BottomLine } from './BottomLine';
import { CeilingControl } from './CeilingControl';
import { GamepadHold } from './GamepadHold';
import { GhostRows } from './GhostRows';
import { GripperRow } from './GripperRow';
import { JointRow } from './JointRow';
import { GoToDialog } from './JointValuesDialog';
import { RecentPoses } from './RecentPoses';
import { ReferenceButton } from './ReferencePanel';
import { ToolRow } from './ToolRow';

/** Why the hold buttons cannot be used now, in a word or two; null when they can. */
function useReason(): string | null {
  const connection = useConnection();
  const role = useHello()?.you.role ?? 'observer';
  const inControl = useInControl();
  const motors = useArmState((state) => state?.motors ?? 'resting');
  const someEnergised = useArmState((state) => state?.energised.some(Boolean) ?? false);
  const fault = useArmState((state) => state?.fault !== null && state !== null);
  const running = useArmState((state) => state?.run !== null && state !== null);
  if (connection !== 'live') return 'no link';
  if (!may(role, 'arm.control')) return 'watching';
  if (motors === 'energising') return 'waiting';
  if (!someEnergised) return 'resting';
  if (fault) return 'fault';
  if (!inControl) return 'no control';
  if (running) return 'running';
  return null;
}

/** What the rows move. */
type Moves = 'joint' | ToolFrame | 'ghost';

/** The tool axes this arm has the joints for, and what each keeps. */
function useToolAxes(model: ArmModel, frame: ToolFrame) {
  return useMemo(() => {
    const chain = compileChain(model);
    return TOOL_AXES.flatMap((axis) => {
      const keeps = toolAxisOffer(chain, frame, axis);
      return keeps ? [{ axis, keeps }] : [];
    });
  }, [model, frame]);
}

/** Which nudge is chosen: an index into the nudge sizes, or "moves while held". */
type Press = 'held' | 0 | 1 | 2;

export function MovePage({ arm }: { arm: Arm }) {
  const { model } = arm;
  const reason = useReason();
  const moving = useArmState((state) => state?.motors === 'moving' || state?.motors === 'stopping');
  const [press, setPress] = useState<Press>('held');
  const [goingTo, setGoingTo] = useState(false);
  const [moves, setMoves] = useState<Moves>('joint');
  const toolAxes = useToolAxes(model, moves === 'tool' ? 'tool' : 'base');
  const reach = useMemo(() => reachOf(compileChain(model)), [model]);
  const known = useArmState((state) =>
    (state?.trust ?? ['unknown']).every((trust) => trust === 'declared' || trust === 'referenced'),
  );
  const poses = usePoses(arm.id).data;
  const poseValues = useMemo(
    () =>
      model.joints.map((_, i) =>
        (poses ?? []).flatMap((pose) => (pose.q[i] === undefined ? [] : [pose.q[i]])),
      ),
    [model, poses],
  );
  const sizes = (type: 'revolute' | 'prismatic') => (type === 'revolute' ? NUDGE_ANGLES : NUDGE_LENGTHS);
  const nudgeOf = (type: 'revolute' | 'prismatic') => {
    if (press === 'held') return null;
    const list = sizes(type);
    return list[Math.min(press, list.length - 1)] ?? null;
  };
  const locked = reason !== null || moving;
  const lockText = moving ? 'locked while moving' : reason;
  const sliding = moves !== 'joint' || model.joints.some((joint) => joint.type === 'prismatic');
  return (
    <main className="sheet move">
      <h1 className="vh">Move {model.name}</h1>
      <ArmView model={model} />
      <RecentPoses arm={arm} />
      <section className="pane joints" aria-label="Joints">
        <div className="ctl">
          <div className="c2">
            <div className="lab">
              <span>Each press</span>
              {locked && (
                <span className="lk">
                  <LockIcon />
                  {lockText}
                </span>
              )}
            </div>
            <Segmented<Press>
              label="Each press"
              locked={locked}
              value={press}
              onChange={setPress}
              options={[
                {
                  value: 'held',
                  label: (
                    <>
                      <span className="wide">while</span> held
                    </>
                  ),
                },
                ...NUDGE_ANGLES.map((size, i) => ({
                  value: i as Press,
                  className: 'n',
                  label: `${shownValue('revolute', size, i === 0 ? 1 : 0)}${sliding && NUDGE_LENGTHS[i] ? ` / ${shownValue('prismatic', NUDGE_LENGTHS[i], 0)}` : ''}`,
                })),
              ]}
            />
          </div>
          <CeilingControl reason={reason === 'running' ? null : reason} moving={moving} />
        </div>
        <div className="byline">
          <span className="lab">Move</span>
          <Segmented<Moves>
            label="Move"
            locked={moving}
            value={moves}
            onChange={setMoves}
            options={[
              { value: 'joint', label: 'joint by joint' },
              { value: 'base', label: 'tool along base' },
              { value: 'tool', label: 'tool along itself' },
              { value: 'ghost', label: 'a ghost first' },
            ]}
          />
          <span className="end line">
            <button type="button" className="btn sm" disabled={locked} onClick={() => setGoingTo(true)}>
              Go to…
            </button>
            <ReferenceButton model={model} disabled={locked} />
          </span>
        </div>
        <div className="rows">
          {moves === 'ghost' && <GhostRows model={model} reason={reason} known={known} />}
          {(moves === 'base' || moves === 'tool') &&
            toolAxes.map(({ axis, keeps }) => (
              <ToolRow
                key={`${moves} ${axis}`}
                frame={moves}
                axis={axis}
                keeps={keeps}
                reason={reason ?? (known ? null : 'not known')}
                nudge={nudgeOf(axis.length === 2 ? 'revolute' : 'prismatic')}
                reach={reach}
              />
            ))}
          {moves === 'joint' &&
            model.joints.map((joint, i) => (
              <JointRow
                key={joint.name}
                joint={joint}
                index={i}
                reason={reason}
                nudge={nudgeOf(joint.type)}
                poses={poseValues[i] ?? []}
              />
            ))}
          {model.gripper && <GripperRow gripper={model.gripper} reason={reason} />}
        </div>
        <div className="bottom">
          <GamepadHold model={model} usable={reason === null} />
          <BottomLine model={model} />
        </div>
      </section>
      <GoToDialog open={goingTo} onClose={() => setGoingTo(false)} model={model} />
    </main>
  );
}
