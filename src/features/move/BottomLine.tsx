import { useEffect, useState } from 'react';
import type { ArmModel } from '../../../shared/arm/model';
import { worstTrust } from '../../../shared/arm/trust';
import { shownValue } from '../../../shared/arm/units';
import { may } from '../../../shared/team/roles';
import { Message } from '../../components/Message';
import { toast } from '../../components/toast';
import { sendCommand } from '../../live/connection';
import { type HoldEnd, lastHoldEnd, onHoldChange, onHoldRefused } from '../../live/hold';
import { useArmState, useHello, useInControl, useTelemetry } from '../../live/use-live';
import { DeclareDialog } from './JointValuesDialog';
import { RestCard } from './RestCard';

/** Ends of a hold that a person did not mean, in words. */
const HOLD_END_WORDS: Partial<Record<HoldEnd, string>> = {
  'pointer cancelled': 'the system took the touch away.',
  'capture lost': 'the pointer was lost.',
  'slid off': 'the pointer left the button.',
  'second pointer': 'something else was touched.',
  'window left': 'this window lost the focus.',
  'page hidden': 'the page was hidden.',
  'another key': 'another key was pressed.',
  'page stalled': 'this page was stuck for a moment.',
  'link quiet': 'no news came from the arm for 250 ms.',
  'connection lost': 'the connection was lost.',
  'control lost': 'control changed hands.',
  'page turned': 'the page was turned or resized.',
};

/** One line (or the rest card) below the joints: what happens now, and what to do about it. */
export function BottomLine({ model }: { model: ArmModel }) {
  const motors = useArmState((state) => state?.motors ?? null);
  const fault = useArmState((state) => state?.fault ?? null);
  const trust = useArmState((state) => worstTrust(state?.trust ?? []));
  const note = useArmState((state) => state?.trustNote ?? '');
  const run = useArmState((state) => state?.run ?? null);
  const blocked = useTelemetry((t) =>
    t?.blocked ? `${model.joints[t.blocked.joint]?.name ?? 'A joint'}: ${t.blocked.reason}` : null,
  );
  const inControl = useInControl();
  const role = useHello()?.you.role ?? 'observer';
  const [refused, setRefused] = useState<string | null>(null);
  const [declaring, setDeclaring] = useState(false);
  useEffect(() => onHoldRefused(setRefused), []);
  useEffect(
    () =>
      onHoldChange(() => {
        const why = lastHoldEnd();
        if (why !== null && HOLD_END_WORDS[why])
          setRefused(`The hold ended: ${HOLD_END_WORDS[why]} Press again to go on.`);
      }),
    [],
  );
  // A refusal is answered by the next thing that moves.
  useEffect(() => {
    if (motors === 'moving') setRefused(null);
  }, [motors]);

  if (motors === null) return <Message>Opening the link to {model.name}…</Message>;
  if (fault) {
    const mayAcknowledge = inControl && (!fault.hard || may(role, 'fault.acknowledgeHard'));
    return (
      <Message
        kind="fault"
        action={
          <button
            type="button"
            className="btn sm"
            disabled={!mayAcknowledge}
            onClick={() =>
              void sendCommand({ type: 'fault.acknowledge' }).then(
                (outcome) => !outcome.ok && toast(outcome.message),
              )
            }
          >
            {mayAcknowledge
              ? 'Acknowledge'
              : fault.hard
                ? 'A builder acknowledges'
                : 'Take control to acknowledge'}
          </button>
        }
      >
        {fault.message}
      </Message>
    );
  }
  if (motors === 'moving' || motors === 'stopping')
    return <MovingLine model={model} stopping={motors === 'stopping'} />;
  if (motors === 'resting' || motors === 'energising') return <RestCard model={model} />;
  return (
    <>
      {refused ? (
        <Message kind="fault">{refused}</Message>
      ) : blocked && !run ? (
        <Message>
          <b>No farther that way.</b> {blocked}
          {blocked.endsWith('.') ? '' : '.'}
        </Message>
      ) : trust === 'unknown' || trust === 'doubtful' ? (
        <Message
          action={
            <button type="button" className="btn sm" disabled={!inControl} onClick={() => setDeclaring(true)}>
              Declare position…
            </button>
          }
        >
          <b>The position is {trust}.</b> {note} Creep, holds and nudges only, 10° or 20 mm a press.{' '}
          {inControl
            ? 'Declare where it stands, or reference a joint by its switch.'
            : 'Take control to declare it.'}
        </Message>
      ) : (
        <Message
          action={
            inControl ? (
              <button type="button" className="btn sm" onClick={() => setDeclaring(true)}>
                Declare anew…
              </button>
            ) : undefined
          }
        >
          <b>{model.name} stands.</b>{' '}
          {run
            ? `${run.sequenceName} ${run.phase === 'paused' ? 'is paused' : 'is under way'}.`
            : inControl
              ? 'Hold a button to move; let go to stop.'
              : 'Take control to move it.'}
        </Message>
      )}
      <DeclareDialog open={declaring} onClose={() => setDeclaring(false)} model={model} />
    </>
  );
}

function MovingLine({ model, stopping }: { model: ArmModel; stopping: boolean }) {
  const hold = useArmState((state) => state?.hold ?? null);
  const run = useArmState((state) => state?.run ?? null);
  const still = useTelemetry((t) => {
    if (!t) return null;
    let most = { joint: -1, share: 0, travel: 0 };
    for (const [i, joint] of model.joints.entries()) {
      const travel = Math.abs((t.stopAt[i] ?? 0) - (t.q[i] ?? 0));
      const share = travel / (joint.limits.upper - joint.limits.lower);
      if (share > most.share) most = { joint: i, share, travel };
    }
    const joint = model.joints[most.joint];
    return joint ? shownValue(joint.type, most.travel) : null;
  });
  const motion = hold?.motion;
  const joint = motion?.kind === 'jog' && typeof motion.axis === 'number' ? model.joints[motion.axis] : null;
  const doing =
    joint && motion?.kind === 'jog'
      ? `${capital(motion.direction > 0 ? joint.words.positiveDoing : joint.words.negativeDoing)} the ${joint.name.toLowerCase()}.`
      : motion?.kind === 'reference'
        ? `Looking for the switch of the ${(model.joints[motion.joint]?.name ?? 'joint').toLowerCase()}.`
        : stopping
          ? `${model.name} comes to rest.`
          : run
            ? `${run.sequenceName}, step ${run.stepPath}.`
            : `${model.name} moves.`;
  return (
    <Message
      kind="moving"
      action={
        <span className="note">
          stop arm <kbd>Esc</kbd>
        </span>
      }
    >
      <b>{doing}</b>{' '}
      {still ? (
        <>
          {hold ? 'Let go and it' : 'Stopped, it'} rests within <span className="n">{still}</span>.
        </>
      ) : null}
    </Message>
  );
}

const capital = (text: string) => text.charAt(0).toUpperCase() + text.slice(1);
