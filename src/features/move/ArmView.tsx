import { lazy, Suspense, useMemo, useState } from 'react';
import type { ArmModel } from '../../../shared/arm/model';
import { figure, radToDeg } from '../../../shared/arm/units';
import { Segmented } from '../../components/Segmented';
import { latestTelemetry, onTelemetry, useLiveStore } from '../../live/live-store';
import { useArmState, useConnection, useTelemetry } from '../../live/use-live';
import type { View } from '../../scene/views';

const ArmScene = lazy(() => import('../../scene/ArmScene'));

/** The arm in 3D, with what it is seen from and where the tool point is. */
export function ArmView({ model }: { model: ArmModel }) {
  const [view, setView] = useState<View>('corner');
  const [showTruth, setShowTruth] = useState(false);
  const known = useArmState((state) => (state?.trust ?? []).every((t) => t !== 'unknown') && state !== null);
  const builtIn = useArmState((state) => state?.link.kind === 'builtIn');
  const lost = useConnection() === 'lost';
  const source = useMemo(
    () => ({
      sample: () => {
        const telemetry = latestTelemetry();
        const gripper = useLiveStore.getState().state?.gripper?.opening ?? null;
        return telemetry ? { ...telemetry, gripper } : null;
      },
      subscribe: onTelemetry,
    }),
    [],
  );
  return (
    <section className={`pane view ${lost ? 'stale' : ''}`} aria-label="The arm">
      <div className="vhead">
        <h2 className="h3">Seen from</h2>
        <Segmented
          label="Seen from"
          value={view}
          onChange={setView}
          options={[
            { value: 'corner', label: 'corner' },
            { value: 'side', label: 'side' },
            { value: 'above', label: 'above' },
          ]}
        />
        <ToolLine known={known} />
      </div>
      <div className="stage">
        <Suspense fallback={<p className="note stage-note">Drawing the arm…</p>}>
          <ArmScene
            model={model}
            view={view}
            source={source}
            known={known}
            showTruth={showTruth && builtIn}
          />
        </Suspense>
        {!known && (
          <p className="stage-note">
            <b>Position unknown</b>
            <br />
            drawn as last seen. It may have dropped.
          </p>
        )}
        {lost && <p className="stage-note end">No connection: this picture is old.</p>}
      </div>
      <div className="legend">
        <span>
          <svg viewBox="0 0 34 8" aria-hidden="true">
            <path
              d="M1 4H33"
              stroke="var(--er-ink)"
              strokeWidth="2"
              fill="none"
              strokeDasharray={known ? undefined : '3 3'}
            />
          </svg>
          {known ? 'now' : 'last seen, unknown now'}
        </span>
        <span>
          <svg viewBox="0 0 34 8" aria-hidden="true">
            <path
              d="M1 4H33"
              stroke="var(--er-ink)"
              strokeWidth="2.8"
              fill="none"
              strokeDasharray=".1 6"
              strokeLinecap="round"
            />
          </svg>
          tool, last 10 s
        </span>
        <span>
          <svg viewBox="0 0 34 8" aria-hidden="true">
            <path d="M1 4H33" stroke="var(--er-move)" strokeWidth="7" fill="none" />
          </svg>
          would still travel
        </span>
        {builtIn && (
          <label className="lk">
            <input
              type="checkbox"
              checked={showTruth}
              onChange={(event) => setShowTruth(event.target.checked)}
            />
            outline where it really is
          </label>
        )}
      </div>
    </section>
  );
}

function ToolLine({ known }: { known: boolean }) {
  const tool = useTelemetry((t) => {
    if (!t) return null;
    const [x, y, z] = t.tool.position;
    return { out: Math.hypot(x, y) * 1000, up: z * 1000, left: radToDeg(Math.atan2(y, x)) };
  });
  if (!known || !tool) return <span className="tip">tool point unknown</span>;
  return (
    <span className="tip">
      tool point <span className="n">{figure(tool.out, 0)} mm</span> out,{' '}
      <span className="n">{figure(tool.up, 0)} mm</span> up,{' '}
      <span className="n">{figure(Math.abs(tool.left), 1)}°</span> {tool.left >= 0 ? 'left' : 'right'}
    </span>
  );
}
