import type { ArmModel, Joint } from '../../../shared/arm/model';
import { shownValue } from '../../../shared/arm/units';
import { HoldButton } from '../../components/HoldButton';
import { Pictogram } from '../../components/pictograms';
import { TravelBar } from '../../components/TravelBar';
import { toast } from '../../components/toast';
import { sendCommand } from '../../live/connection';
import { sendNudge } from '../../live/nudge';
import { useArmState, useTelemetry } from '../../live/use-live';

/** One press of a synthetic click, or of assistive technology: a small step, rad or m. */
const SMALL = { revolute: Math.PI / 360, prismatic: 0.001 };
const AT_LIMIT = 1e-5;

/** Hold buttons for every joint and the gripper, so that a person can jog and mark without leaving the page. */
export function JogRows({ model, reason }: { model: ArmModel; reason: string | null }) {
  return (
    <div className="jogrows">
      {model.joints.map((joint, i) => (
        <JogRow key={joint.name} joint={joint} index={i} reason={reason} />
      ))}
      {model.gripper && <GripRow widest={model.gripper.opening} reason={reason} />}
    </div>
  );
}

function JogRow({ joint, index, reason }: { joint: Joint; index: number; reason: string | null }) {
  const { words, name, type, limits } = joint;
  const trust = useArmState((state) => state?.trust[index] ?? 'unknown');
  const known = trust === 'declared' || trust === 'referenced';
  const row = useTelemetry((t) => {
    const q = t?.q[index];
    if (q === undefined) return { text: '–', atLower: false, atUpper: false };
    return {
      text: trust === 'unknown' ? '–' : shownValue(type, q),
      atLower: known && q <= limits.lower + AT_LIMIT,
      atUpper: known && q >= limits.upper - AT_LIMIT,
    };
  });
  const button = (direction: 1 | -1) => {
    const word = direction > 0 ? words.positive : words.negative;
    return (
      <HoldButton
        id={`record-${index}-${direction}`}
        side={direction > 0 ? 'pos' : 'neg'}
        motion={{ kind: 'jog', frame: 'joint', axis: index, direction }}
        picture={<Pictogram picture={words.picture} direction={direction} />}
        word={word}
        doing={direction > 0 ? words.positiveDoing : words.negativeDoing}
        label={`${name}, ${word}: hold to move`}
        reason={reason}
        atLimit={direction > 0 ? row.atUpper : row.atLower}
        nudge={() => {
          const amount = SMALL[type] * direction;
          void sendNudge('joint', index, amount).then((outcome) => {
            if (!outcome.ok) toast(outcome.message);
          });
        }}
      />
    );
  };
  return (
    <div className="jogrow">
      {button(-1)}
      <div className="jogbar">
        <b>{name}</b>
        <span className="n">{row.text}</span>
        <TravelBar joint={joint} index={index} trust={trust} />
      </div>
      {button(1)}
    </div>
  );
}

function GripRow({ widest, reason }: { widest: number; reason: string | null }) {
  const gripper = useArmState((state) => state?.gripper ?? null);
  const set = (opening: number) =>
    void sendCommand({ type: 'gripper.set', opening: Math.min(1, Math.max(0, opening)) }).then((outcome) => {
      if (!outcome.ok) toast(outcome.message);
    });
  const target = gripper?.target ?? 0;
  const act = (word: string, opening: number) => (
    <button
      type="button"
      className="btn sm"
      disabled={reason !== null}
      title={reason ?? undefined}
      onClick={() => set(opening)}
    >
      {word}
    </button>
  );
  return (
    <div className="griprow" role="group" aria-label="Gripper">
      <b>Gripper</b>
      <span className="n">
        {gripper?.energised ? shownValue('prismatic', gripper.opening * widest) : '–'}
      </span>
      {act('Close', 0)}
      {act('Close a little', target - 0.1)}
      {act('Open a little', target + 0.1)}
      {act('Open', 1)}
    </div>
  );
}
