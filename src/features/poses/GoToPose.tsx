import { useEffect, useState } from 'react';
import { Link } from 'react-router-dom';
import type { Arm, Pose } from '../../../shared/api/resources';
import type { Trust } from '../../../shared/arm/trust';
import { may } from '../../../shared/team/roles';
import { GoButton } from '../../components/HoldButton';
import { TrustIcon } from '../../components/icons';
import { Message } from '../../components/Message';
import { onHoldRefused } from '../../live/hold';
import { useArmState, useConnection, useHello, useInControl } from '../../live/use-live';

/** Why the arm cannot go there now, in a few words; null when it can. */
function useReason(reachable: boolean, known: boolean): string | null {
  const connection = useConnection();
  const role = useHello()?.you.role ?? 'observer';
  const inControl = useInControl();
  const resting = useArmState((state) => state === null || !state.energised.every(Boolean));
  const fault = useArmState((state) => state !== null && state.fault !== null);
  const running = useArmState((state) => state !== null && state.run !== null);
  if (connection !== 'live') return 'No connection to the arm.';
  if (!may(role, 'arm.control')) return 'Operators move the arm; you are watching.';
  if (!reachable) return 'It lies outside today’s limits.';
  if (resting) return 'The motors are resting. Energise on Move.';
  if (fault) return 'A fault waits to be acknowledged on Move.';
  if (!inControl) return 'Take control first.';
  if (running) return 'A run is on. End it first.';
  if (!known) return 'The position is not known. Declare or reference it on Move.';
  return null;
}

/** Hold to go: by pointer, by Space or Enter on the button, or by holding the letter G. */
export function GoToPose({
  arm,
  pose,
  reachable,
  trust,
}: {
  arm: Arm;
  pose: Pose;
  reachable: boolean;
  trust: Trust;
}) {
  const known = trust === 'declared' || trust === 'referenced';
  const reason = useReason(reachable, known);
  const [refused, setRefused] = useState<string | null>(null);
  const moving = useArmState((state) => state?.motors === 'moving');
  useEffect(() => onHoldRefused(setRefused), []);
  useEffect(() => {
    if (moving) setRefused(null);
  }, [moving]);
  return (
    <>
      {refused ? (
        <Message kind="fault">{refused}</Message>
      ) : (
        trust !== 'referenced' && (
          <div className="msg">
            <TrustIcon trust={trust} />
            <span>
              <b>Position is {trust}, not referenced.</b>{' '}
              {known
                ? `${arm.name} can go there, up to easy.`
                : `${arm.name} goes to no pose until it is known.`}
            </span>
            <Link className="btn sm" to={`/arms/${arm.id}/move`}>
              {known ? 'Reference…' : 'Move…'}
            </Link>
          </div>
        )
      )}
      <GoButton
        id={`pose-${pose.id}`}
        motion={{ kind: 'pose', poseId: pose.id }}
        hint={reason ?? `Let go and ${arm.name} stops. Hold again to go on.`}
        disabled={reason !== null}
        look="big"
        letter="g"
      >
        Hold to go to {pose.name}
      </GoButton>
    </>
  );
}
