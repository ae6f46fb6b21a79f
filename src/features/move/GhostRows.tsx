import { useEffect, useMemo, useState } from 'react';
import type { ArmModel } from '../../../shared/arm/model';
import { figure, radToDeg, shownValue } from '../../../shared/arm/units';
import { type Chain, compileChain } from '../../../shared/kinematics';
import { Field } from '../../components/Field';
import { freedomOf, freedomWord } from '../../components/freedom';
import { GoButton } from '../../components/HoldButton';
import { Message } from '../../components/Message';
import { parseQuantity } from '../../components/quantity';
import { latestTelemetry } from '../../live/live-store';
import { type Ghost, ghostAt, moveGhost, turnGhost } from './ghost-pose';
import { useGhost } from './use-ghost';

const STEP_M = 0.005;
const STEP_RAD = Math.PI / 36;

/** The ghost of the tool: dragged in the drawing, or placed here by buttons and numbers; then hold to go there. */
export function GhostRows({
  model,
  reason,
  known,
}: {
  model: ArmModel;
  reason: string | null;
  known: boolean;
}) {
  const chain = useMemo(() => compileChain(model), [model]);
  const ghost = useGhost((state) => state.ghost);
  useEffect(() => {
    const q = latestTelemetry()?.q;
    if (known && q) useGhost.setState({ ghost: ghostAt(chain, q) });
    return () => useGhost.setState({ ghost: null });
  }, [chain, known]);
  if (!known)
    return <p className="ghostempty">The ghost needs a known position. Declare or reference it first.</p>;
  if (!ghost) return null;
  const set = (next: Ghost) => useGhost.setState({ ghost: next });
  const move = (k: number, value: number) =>
    set(
      moveGhost(chain, ghost, {
        position: ghost.position.map((p, i) => (i === k ? value : p)) as Ghost['position'],
      }),
    );
  return (
    <div className="ghost">
      <p className="note">
        Drag the ghost in the drawing, or place it by numbers. Nothing moves until you hold the button below.
      </p>
      <div className="ghostgrid">
        {(['x', 'y', 'z'] as const).map((name, k) => (
          <Stepper
            key={name}
            label={`Tool point ${name}`}
            unit="mm"
            value={ghost.position[k]! * 1000}
            step={STEP_M * 1000}
            onChange={(mm) => move(k, mm / 1000)}
          />
        ))}
        {ghost.tilt !== null ? (
          <Stepper
            label="Tilt"
            unit="°"
            value={radToDeg(ghost.tilt)}
            step={radToDeg(STEP_RAD)}
            onChange={(degrees) => set(moveGhost(chain, ghost, { tilt: (degrees * Math.PI) / 180 }))}
          />
        ) : (
          <Turns chain={chain} ghost={ghost} set={set} />
        )}
      </div>
      <Reach model={model} ghost={ghost} />
      <div className="line">
        <GoButton
          id="ghost"
          motion={{ kind: 'joints', q: ghost.q }}
          hint={
            reason ??
            (ghost.reached ? 'Let go and the arm stops. Hold again to go on.' : 'it cannot be reached')
          }
          disabled={reason !== null || !ghost.reached}
          look="big"
        >
          Hold to go to the ghost
        </GoButton>
        <button
          type="button"
          className="btn"
          onClick={() => {
            const q = latestTelemetry()?.q;
            if (q) set(ghostAt(chain, q));
          }}
        >
          Back to the arm
        </button>
      </div>
    </div>
  );
}

/** Arms that turn their tool freely, or about the upright: five degrees a press, about the axes of the base. */
function Turns({ chain, ghost, set }: { chain: Chain; ghost: Ghost; set: (ghost: Ghost) => void }) {
  const axes = chain.n >= 6 ? (['x', 'y', 'z'] as const) : (['z'] as const);
  return axes.map((axis) => (
    <div className="field" key={axis}>
      <span className="lab">Turn about base {axis}</span>
      <div className="line">
        {([-1, 1] as const).map((direction) => (
          <button
            key={direction}
            type="button"
            className="btn"
            aria-label={`Turn the ghost about base ${axis} by ${direction > 0 ? 'plus' : 'minus'} 5 degrees`}
            onClick={() => set(turnGhost(chain, ghost, axis, direction * STEP_RAD))}
          >
            {direction > 0 ? '+' : '−'}5°
          </button>
        ))}
      </div>
    </div>
  ));
}

/** A number with a smaller and a larger button; what is typed counts as soon as it is a number. */
function Stepper({
  label,
  unit,
  value,
  step,
  onChange,
}: {
  label: string;
  unit: string;
  value: number;
  step: number;
  onChange: (value: number) => void;
}) {
  const [typed, setTyped] = useState<string | null>(null);
  const shown = typed ?? figure(value, 1);
  const parsed = parseQuantity(shown, unit);
  return (
    <div className="ghoststep">
      <button
        type="button"
        className="btn"
        aria-label={`${label}, ${step} ${unit} less`}
        onClick={() => onChange(value - step)}
      >
        −
      </button>
      <Field
        label={label}
        unit={unit}
        text={false}
        inputMode="decimal"
        value={shown}
        error={parsed ? null : 'a number'}
        onChange={(event) => {
          setTyped(event.target.value);
          const next = parseQuantity(event.target.value, unit);
          if (next) onChange(next.value);
        }}
        onBlur={() => setTyped(null)}
      />
      <button
        type="button"
        className="btn"
        aria-label={`${label}, ${step} ${unit} more`}
        onClick={() => onChange(value + step)}
      >
        +
      </button>
    </div>
  );
}

function Reach({ model, ghost }: { model: ArmModel; ghost: Ghost }) {
  const freedom = useMemo(() => freedomOf(model), [model]);
  if (!ghost.reached)
    return (
      <Message kind="plan">
        <b>Out of reach</b> by {shownValue('prismatic', ghost.off.position, 0)}
        {ghost.off.rotation > 0.002 && ` and ${shownValue('revolute', ghost.off.rotation, 0)}`}. The ghost
        shows the nearest place this arm gets to.
      </Message>
    );
  let nearest = { joint: 0, share: 1, margin: 0 };
  for (const [i, { limits }] of model.joints.entries()) {
    const margin = Math.min(ghost.q[i]! - limits.lower, limits.upper - ghost.q[i]!);
    const share = margin / (limits.upper - limits.lower);
    if (share < nearest.share) nearest = { joint: i, share, margin };
  }
  const { stretched, isotropy } = freedom(ghost.q);
  const joint = model.joints[nearest.joint]!;
  return (
    <Message kind="plan">
      <b>Can be reached.</b> {joint.name} {shownValue(joint.type, Math.max(0, nearest.margin))} from its
      limit, stretched {Math.round(stretched * 100)} %, freedom {freedomWord(isotropy)}.
    </Message>
  );
}
