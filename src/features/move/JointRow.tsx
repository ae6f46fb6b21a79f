import { memo } from 'react';
import type { Joint } from '../../../shared/arm/model';
import { figure, shownUnit, shownValue, toShown } from '../../../shared/arm/units';
import { HoldButton } from '../../components/HoldButton';
import { Pictogram } from '../../components/pictograms';
import { TorqueUsed } from '../../components/TorqueUsed';
import { TravelBar } from '../../components/TravelBar';
import { toast } from '../../components/toast';
import { sendNudge } from '../../live/nudge';
import { useArmState, useTelemetry } from '../../live/use-live';

/** Nearer to a soft limit than this a joint is at it, rad or m. */
const AT_LIMIT = 1e-5;

/** One joint: its travel bar between two hold buttons. */
export const JointRow = memo(function JointRow({
  joint,
  index,
  reason,
  nudge,
  poses,
}: {
  joint: Joint;
  index: number;
  /** Why nothing may move now, in a word or two, or null. */
  reason: string | null;
  /** Nudge size chosen (rad or m), or null to move while held. */
  nudge: number | null;
  poses: readonly number[];
}) {
  const trust = useArmState((state) => state?.trust[index] ?? 'unknown');
  const { words, name, type, limits } = joint;
  const known = trust === 'declared' || trust === 'referenced';
  const row = useTelemetry((t) => {
    const q = t?.q[index] ?? null;
    const rest = t?.stopAt[index] ?? null;
    return {
      q: q === null ? null : figure(toShown(type, q), 1),
      still:
        q === null || rest === null || Math.abs(rest - q) < 1e-5
          ? null
          : shownValue(type, Math.abs(rest - q)),
      used: t?.torqueUsed[index] ?? null,
      atLower: q !== null && known && q <= limits.lower + AT_LIMIT,
      atUpper: q !== null && known && q >= limits.upper - AT_LIMIT,
    };
  });
  const press = (direction: 1 | -1) => () => {
    const amount = (nudge ?? (type === 'revolute' ? Math.PI / 360 : 0.001)) * direction;
    void sendNudge('joint', index, amount).then((outcome) => {
      if (!outcome.ok) toast(outcome.message);
    });
  };
  const button = (direction: 1 | -1) => {
    const word = direction > 0 ? words.positive : words.negative;
    return (
      <HoldButton
        id={`jog-${index}-${direction}`}
        side={direction > 0 ? 'pos' : 'neg'}
        motion={{ kind: 'jog', frame: 'joint', axis: index, direction }}
        picture={<Pictogram picture={words.picture} direction={direction} />}
        word={word}
        doing={direction > 0 ? words.positiveDoing : words.negativeDoing}
        label={`${name}, ${word}: hold to move`}
        reason={reason}
        atLimit={direction > 0 ? row.atUpper : row.atLower}
        nudge={press(direction)}
        nudging={nudge !== null}
        nudgeText={
          nudge === null
            ? undefined
            : `${direction > 0 ? '+' : '−'}${shownValue(type, nudge, nudgeDecimals(type, nudge))}`
        }
      />
    );
  };
  return (
    <div className="joint" data-joint={index}>
      {button(-1)}
      <div className="travel">
        <div className="th">
          <h3>{name}</h3>
          {row.still && (
            <span className="why">
              would still travel <span className="n">{row.still}</span>
            </span>
          )}
          <span className="val">
            {trust === 'unknown' || row.q === null ? (
              '–'
            ) : (
              <>
                {row.q}
                {shownUnit(type) === '°' ? '°' : <span className="u">mm</span>}
              </>
            )}
          </span>
        </div>
        <TravelBar joint={joint} index={index} trust={trust} poses={poses} />
        <TorqueUsed used={row.used} />
      </div>
      {button(1)}
    </div>
  );
});

function nudgeDecimals(type: 'revolute' | 'prismatic', nudge: number): number {
  return Number.isInteger(Math.round(toShown(type, nudge) * 1000) / 1000) ? 0 : 1;
}
