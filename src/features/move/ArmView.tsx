import { lazy, Suspense, useMemo, useState } from 'react';
import type { ArmModel } from '../../../shared/arm/model';
import { figure, radToDeg } from '../../../shared/arm/units';
import { compileChain } from '../../../shared/kinematics';
import { freedomOf, freedomWord } from '../../components/freedom';
import { Segmented } from '../../components/Segmented';
import { latestTelemetry, onTelemetry, useLiveStore } from '../../live/live-store';
import { useArmState, useConnection, useTelemetry } from '../../live/use-live';
import type { View } from '../../scene/views';
import { type Ghost, moveGhost } from './ghost-pose';
import { useGhost } from './use-ghost';

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
        if (!telemetry) return null;
        const { ghost } = useGhost.getState();
        // A ghost is drawn as what is meant, like the target of a move.
        return { ...telemetry, gripper, target: telemetry.target ?? ghost?.q };
      },
      subscribe: onTelemetry,
    }),
    [],
  );
  const chain = useMemo(() => compileChain(model), [model]);
  const placing = useGhost((state) => state.ghost !== null);
  const handles = useMemo(
    () => ({
      position: () => useGhost.getState().ghost?.position ?? null,
      move: (position: Ghost['position']) => {
        const { ghost } = useGhost.getState();
        if (ghost) useGhost.setState({ ghost: moveGhost(chain, ghost, { position }) });
      },
    }),
    [chain],
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
            ghost={placing ? handles : null}
          />
        </Suspense>
        {known && <Freedom model={model} />}
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

/** How far stretched and how free: what a straight line of the tool runs into. */
function Freedom({ model }: { model: ArmModel }) {
  const freedom = useMemo(() => freedomOf(model), [model]);
  const now = useTelemetry((t) => {
    if (!t || t.q.length !== model.joints.length) return null;
    const { stretched, isotropy } = freedom(t.q);
    return { stretched: Math.round(stretched * 100), word: freedomWord(isotropy) };
  }, 5);
  if (!now) return null;
  return (
    <p className="stage-note facts">
      stretched <span className="n">{now.stretched} %</span> of its reach
      <br />
      freedom of the tool <b>{now.word}</b>
    </p>
  );
}
