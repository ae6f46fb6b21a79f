import { useState } from 'react';
import type { ArmModel } from '../../../shared/arm/model';
import { figure, fromShown, shownUnit, shownValue, toShown } from '../../../shared/arm/units';
import { Dialog } from '../../components/Dialog';
import { Field } from '../../components/Field';
import { WarnIcon } from '../../components/icons';
import { Message } from '../../components/Message';
import { parseNumber } from '../../components/quantity';
import { sendCommand } from '../../live/connection';
import { latestTelemetry } from '../../live/live-store';
import { useInControl } from '../../live/use-live';

/** Cautions, where each servo stands, then control and motors, in that order. */
export function EnergiseDialog({
  open,
  onClose,
  model,
}: {
  open: boolean;
  onClose: () => void;
  model: ArmModel;
}) {
  return (
    <Dialog open={open} onClose={onClose} title={`Energise ${model.name}`}>
      <EnergiseForm onClose={onClose} model={model} />
    </Dialog>
  );
}

function EnergiseForm({ onClose, model }: { onClose: () => void; model: ArmModel }) {
  const inControl = useInControl();
  const servos = model.joints.flatMap((joint, index) =>
    joint.drive.kind === 'servo' ? [{ joint, index }] : [],
  );
  const [read, setRead] = useState(false);
  const [busy, setBusy] = useState(false);
  const [refused, setRefused] = useState<string | null>(null);
  const [typed, setTyped] = useState<Record<number, string>>(() =>
    Object.fromEntries(
      servos.map(({ joint, index }) => [
        index,
        figure(
          toShown(joint.type, latestTelemetry()?.q[index] ?? (joint.limits.lower + joint.limits.upper) / 2),
          1,
        ),
      ]),
    ),
  );
  const wrong = (index: number): string | null => {
    const joint = model.joints[index]!;
    const value = parseNumber(typed[index] ?? '');
    if (value === null) return 'a number is needed';
    const q = fromShown(joint.type, value);
    const { lower, upper } = joint.hardRange;
    return q < lower || q > upper
      ? `its mechanics end at ${shownValue(joint.type, lower)} and ${shownValue(joint.type, upper)}`
      : null;
  };
  const ready = read && servos.every(({ index }) => wrong(index) === null);
  const energise = async () => {
    setBusy(true);
    setRefused(null);
    const taken = inControl ? ({ ok: true } as const) : await sendCommand({ type: 'control.take' });
    // The turn changes with control; the state that carries it follows within two ticks.
    if (taken.ok && !inControl) await new Promise((resolve) => setTimeout(resolve, 120));
    const outcome = taken.ok
      ? await sendCommand({
          type: 'motors.energise',
          servoAngles: servos.map(({ joint, index }) => ({
            joint: index,
            q: fromShown(joint.type, parseNumber(typed[index]!) ?? 0),
          })),
          cautionsRead: true,
        })
      : taken;
    setBusy(false);
    if (outcome.ok) onClose();
    else setRefused(outcome.message);
  };
  return (
    <form
      className="stack"
      onSubmit={(event) => {
        event.preventDefault();
        if (ready) void energise();
      }}
    >
      <section className="caution" aria-label="Cautions">
        <h3>
          <WarnIcon /> Before current flows
        </h3>
        <ul>
          <li>Fingers, hair and sleeves out of every joint; the bench clear of what the arm could hit.</li>
          <li>A servo may jump when it gets its first signal. The arm may fall when it loses power.</li>
          <li>Keep a hand on the supply switch. Elbowroom is not a safety device.</li>
          <li>Local rules, and people competent to judge this machine, come before this page.</li>
        </ul>
      </section>
      {servos.length > 0 && (
        <>
          <p className="small quiet">
            Where does each servo stand now? Its first signal sends it there, at its own full speed if you are
            wrong.
          </p>
          <div className="grid2">
            {servos.map(({ joint, index }) => (
              <Field
                key={index}
                label={joint.name}
                text={false}
                unit={shownUnit(joint.type)}
                value={typed[index] ?? ''}
                inputMode="decimal"
                error={wrong(index)}
                onChange={(event) => setTyped({ ...typed, [index]: event.target.value })}
              />
            ))}
          </div>
        </>
      )}
      <label className="tick">
        <input type="checkbox" checked={read} onChange={(event) => setRead(event.target.checked)} />I have
        read this; hands and bench are clear.
      </label>
      {refused && <Message kind="fault">{refused}</Message>}
      <div className="acts">
        <button type="button" className="btn" onClick={onClose}>
          Not now
        </button>
        <button type="submit" className="btn ink" disabled={!ready || busy}>
          {inControl ? 'Energise' : 'Take control and energise'}
        </button>
      </div>
    </form>
  );
}
