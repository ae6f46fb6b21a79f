import { useEffect, useRef } from 'react';
import type { Joint } from '../../shared/arm/model';
import type { Trust } from '../../shared/arm/trust';
import { figure, shownUnit, toShown } from '../../shared/arm/units';
import { latestTelemetry, onTelemetry } from '../live/live-store';

/** Shortest stretch a stopping shadow is drawn with, so that it is seen at all: 4 px by CSS. */
const MOVES = 1e-5;

/** Ticks of a round size, about a dozen and a half along the bar. */
function ticks(lower: number, upper: number): { at: number; major: boolean }[] {
  const span = upper - lower;
  const rough = span / 16;
  const power = 10 ** Math.floor(Math.log10(rough));
  const step = [1, 2, 5, 10].map((m) => m * power).find((s) => s >= rough) ?? 10 * power;
  const found: { at: number; major: boolean }[] = [];
  for (let k = Math.ceil(lower / step); k * step <= upper; k++)
    found.push({ at: (k * step - lower) / span, major: k % 5 === 0 });
  return found;
}

/**
 * The track on which a joint's position, limits, target and saved poses are drawn. The marker and the stopping
 * shadow follow every sample by direct style writes; React hears nothing of it.
 */
export function TravelBar({
  joint,
  index,
  trust,
  poses = [],
}: {
  joint: Joint;
  index: number;
  trust: Trust;
  /** Saved poses' values of this joint. */
  poses?: readonly number[];
}) {
  const { type, hardRange, limits, name } = joint;
  const lower = toShown(type, hardRange.lower);
  const upper = toShown(type, hardRange.upper);
  const share = (value: number) => ((value - hardRange.lower) / (hardRange.upper - hardRange.lower)) * 100;
  const track = useRef<HTMLDivElement>(null);
  const marker = useRef<HTMLElement>(null);
  const shadow = useRef<HTMLElement>(null);
  const target = useRef<HTMLElement>(null);
  const known = trust !== 'unknown';

  useEffect(() => {
    const at = (value: number) => ((value - hardRange.lower) / (hardRange.upper - hardRange.lower)) * 100;
    const unit = type === 'revolute' ? ' degrees' : ' millimetres';
    let spoken = '';
    const draw = () => {
      const telemetry = latestTelemetry();
      const q = telemetry?.q[index];
      if (!telemetry || q === undefined || !track.current) return;
      const rest = telemetry.stopAt[index] ?? q;
      if (marker.current) marker.current.style.left = `${at(q)}%`;
      if (shadow.current) {
        const moves = Math.abs(rest - q) > MOVES;
        shadow.current.hidden = !moves;
        shadow.current.className = `sh ${rest > q ? 'r' : 'l'}`;
        shadow.current.style.left = `${Math.min(at(q), at(rest))}%`;
        shadow.current.style.width = `${Math.abs(at(rest) - at(q))}%`;
      }
      if (target.current) {
        const to = telemetry.target?.[index];
        target.current.hidden = to === undefined;
        if (to !== undefined) target.current.style.left = `${at(to)}%`;
      }
      const text = `${figure(toShown(type, q), 1)}${unit}`;
      if (text !== spoken) {
        spoken = text;
        track.current.setAttribute('aria-valuenow', toShown(type, q).toFixed(1));
        track.current.setAttribute('aria-valuetext', `${text}, ${trust}`);
      }
    };
    draw();
    return onTelemetry(draw);
  }, [hardRange, index, type, trust]);

  const low = share(limits.lower);
  const high = 100 - share(limits.upper);
  return (
    <div
      ref={track}
      className={`track ${known ? '' : 'unknown'}`}
      role="meter"
      aria-label={name}
      aria-valuemin={Math.round(toShown(type, limits.lower))}
      aria-valuemax={Math.round(toShown(type, limits.upper))}
      aria-valuenow={0}
      aria-valuetext={known ? undefined : 'position unknown'}
    >
      <i className="hx lo" style={{ width: `${low}%` }} />
      <i className="hx hi" style={{ width: `${high}%` }} />
      <svg
        viewBox="0 0 1000 30"
        preserveAspectRatio="none"
        style={{ inset: 0, width: '100%', height: '100%' }}
        aria-hidden="true"
      >
        <path
          d={ticks(lower, upper)
            .map(({ at, major }) => `M${(at * 1000).toFixed(1)} 30V${major ? 19 : 24}`)
            .join('')}
          fill="none"
          stroke="var(--er-edge)"
          strokeWidth="1"
          vectorEffect="non-scaling-stroke"
        />
      </svg>
      <i className="ln" style={{ left: `calc(${low}% + 5px)` }}>
        {figure(toShown(type, limits.lower), 0)}
      </i>
      <i className="ln" style={{ right: `calc(${high}% + 5px)` }}>
        {figure(toShown(type, limits.upper), 0)}
      </i>
      {poses.map((value, i) => (
        <i key={i} className="pz" style={{ left: `${share(value)}%` }} />
      ))}
      {known ? (
        <>
          <i ref={shadow} className="sh r" hidden />
          <i ref={target} className="tg" hidden />
          <i ref={marker} className={`nd ${trust}`} style={{ left: '50%' }}>
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
        </>
      ) : (
        <span className="uq">
          <span>unknown</span>
        </span>
      )}
      <span className="vh">{shownUnit(type)}</span>
    </div>
  );
}
