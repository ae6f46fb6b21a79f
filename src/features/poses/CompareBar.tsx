import type { ArmModel } from '../../../shared/arm/model';
import type { Trust } from '../../../shared/arm/trust';
import { figure, shownUnit, toShown } from '../../../shared/arm/units';

interface Bar {
  name: string;
  /** In shown units: ° or mm. */
  unit: '°' | 'mm';
  hard: { lower: number; upper: number };
  soft: { lower: number; upper: number };
  now: number | null;
  to: number;
  trust: Trust;
}

/** Closer than this it is the same, in shown units. */
const SAME = 0.05;

const withUnit = (value: number, unit: '°' | 'mm') => `${figure(value, 1)}${unit === '°' ? '°' : ' mm'}`;
const signed = (value: number, unit: '°' | 'mm') => `${value > 0 ? '+' : ''}${withUnit(value, unit)}`;

/** One joint: where it is, where the pose has it, and how far apart. */
function CompareBar({ name, unit, hard, soft, now, to, trust }: Bar) {
  const at = (value: number) =>
    Math.min(100, Math.max(0, ((value - hard.lower) / (hard.upper - hard.lower)) * 100));
  const difference = now === null ? null : to - now;
  const same = difference !== null && Math.abs(difference) < SAME;
  const spoken = unit === '°' ? 'degrees' : 'millimetres';
  return (
    <div className="cj">
      <b>{name}</b>
      <div
        className={`track ${now === null ? 'unknown' : ''}`}
        role="meter"
        aria-label={name}
        aria-valuemin={Math.round(soft.lower)}
        aria-valuemax={Math.round(soft.upper)}
        aria-valuenow={Number((now ?? to).toFixed(1))}
        aria-valuetext={
          now === null
            ? `position unknown, pose ${figure(to, 1)} ${spoken}`
            : `${figure(now, 1)} ${spoken}, pose ${figure(to, 1)}, position ${trust}`
        }
      >
        <i className="hx lo" style={{ width: `${at(soft.lower)}%` }} />
        <i className="hx hi" style={{ width: `${100 - at(soft.upper)}%` }} />
        {now !== null && !same && (
          <i
            className={`dm ${to < now ? 'rev' : ''}`}
            style={{ left: `${Math.min(at(now), at(to))}%`, width: `${Math.abs(at(to) - at(now))}%` }}
          />
        )}
        <i className="tg" style={{ left: `${at(to)}%` }} />
        {now !== null && (
          <i className={`nd ${trust}`} style={{ left: `${at(now)}%` }}>
            <svg viewBox="0 0 15 15" preserveAspectRatio="xMidYMin" aria-hidden="true">
              <path
                d="M1.2 1h12.6v6.5L7.5 14 1.2 7.5Z"
                fill={trust === 'referenced' ? 'currentColor' : 'var(--er-sheet)'}
                stroke="currentColor"
                strokeWidth="1.8"
                strokeLinejoin="round"
                strokeDasharray={trust === 'declared' ? '3 2' : trust === 'doubtful' ? '1.5 2.5' : undefined}
              />
            </svg>
          </i>
        )}
      </div>
      <div className="d">
        {difference === null ? '–' : same ? '0.0' : signed(difference, unit)}
        <i className={same ? 'same' : ''}>{same ? 'there already' : `to ${withUnit(to, unit)}`}</i>
      </div>
    </div>
  );
}

/** Every joint, and the gripper, which a go-to does not move. */
export function CompareBars({
  model,
  q,
  gripper,
  now,
  nowOpening,
  trust,
}: {
  model: ArmModel;
  q: readonly number[];
  gripper: number | null;
  /** Null while the position is not known. */
  now: readonly number[] | null;
  nowOpening: number | null;
  trust: readonly Trust[];
}) {
  const widest = (model.gripper?.opening ?? 0) * 1000;
  return (
    <div className="bars">
      {model.joints.map((joint, i) => {
        const shown = (value: number) => toShown(joint.type, value);
        return (
          <CompareBar
            key={joint.name}
            name={joint.name}
            unit={shownUnit(joint.type)}
            hard={{ lower: shown(joint.hardRange.lower), upper: shown(joint.hardRange.upper) }}
            soft={{ lower: shown(joint.limits.lower), upper: shown(joint.limits.upper) }}
            now={now?.[i] === undefined ? null : shown(now[i])}
            to={shown(q[i] ?? 0)}
            trust={trust[i] ?? 'unknown'}
          />
        );
      })}
      {gripper !== null && model.gripper && (
        <CompareBar
          name="Gripper"
          unit="mm"
          hard={{ lower: 0, upper: widest }}
          soft={{ lower: 0, upper: widest }}
          now={nowOpening === null ? null : nowOpening * widest}
          to={gripper * widest}
          trust="declared"
        />
      )}
    </div>
  );
}
