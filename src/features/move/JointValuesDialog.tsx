import { useState } from 'react';
import type { ArmModel } from '../../../shared/arm/model';
import { figure, fromShown, shownUnit, shownValue, toShown } from '../../../shared/arm/units';
import { Dialog } from '../../components/Dialog';
import { Field } from '../../components/Field';
import { GoButton } from '../../components/HoldButton';
import { Message } from '../../components/Message';
import { parseQuantity } from '../../components/quantity';
import { sendCommand } from '../../live/connection';
import { latestTelemetry } from '../../live/live-store';

interface Props {
  open: boolean;
  onClose: () => void;
  model: ArmModel;
}

/** A field per joint, in ° or mm, checked against a range. */
function useJointValues(model: ArmModel, range: 'soft' | 'hard', start: readonly number[] | null) {
  const [typed, setTyped] = useState(() =>
    model.joints.map((joint, i) =>
      figure(toShown(joint.type, start?.[i] ?? (joint.limits.lower + joint.limits.upper) / 2), 1),
    ),
  );
  const q = model.joints.map((joint, i) => {
    const parsed = parseQuantity(typed[i] ?? '', shownUnit(joint.type));
    return parsed === null ? null : fromShown(joint.type, parsed.value);
  });
  const errors = model.joints.map((joint, i) => {
    const value = q[i];
    if (value === null || value === undefined) return 'a number is needed';
    const { lower, upper } = range === 'soft' ? joint.limits : joint.hardRange;
    return value < lower - 1e-6 || value > upper + 1e-6
      ? `between ${shownValue(joint.type, lower)} and ${shownValue(joint.type, upper)}`
      : null;
  });
  const good = errors.every((e) => e === null);
  return { typed, setTyped, errors, q: good ? (q as number[]) : null };
}

function ValueFields({
  model,
  values,
  skip = () => false,
}: {
  model: ArmModel;
  values: ReturnType<typeof useJointValues>;
  skip?: (index: number) => boolean;
}) {
  return (
    <div className="grid2">
      {model.joints.map((joint, i) =>
        skip(i) ? null : (
          <Field
            key={joint.name}
            label={joint.name}
            text={false}
            unit={shownUnit(joint.type)}
            value={values.typed[i] ?? ''}
            inputMode="text"
            error={values.errors[i]}
            help={`${shownValue(joint.type, joint.limits.lower, 0)} to ${shownValue(joint.type, joint.limits.upper, 0)}`}
            onChange={(event) =>
              values.setTyped(values.typed.map((v, k) => (k === i ? event.target.value : v)))
            }
          />
        ),
      )}
    </div>
  );
}

/** A person says where the joints stand: solid knowledge it is not, and the page draws it dashed. */
export function DeclareDialog(props: Props) {
  return (
    <Dialog open={props.open} onClose={props.onClose} title="Declare the position">
      <DeclareForm {...props} />
    </Dialog>
  );
}

function DeclareForm({ onClose, model }: Props) {
  const values = useJointValues(model, 'hard', latestTelemetry()?.q ?? null);
  const [refused, setRefused] = useState<string | null>(null);
  const truth = latestTelemetry()?.truth;
  const isServo = (i: number) => model.joints[i]?.drive.kind === 'servo';
  const declare = async () => {
    if (!values.q) return;
    const outcome = await sendCommand({ type: 'trust.declare', q: values.q });
    if (outcome.ok) onClose();
    else setRefused(outcome.message);
  };
  return (
    <form
      className="stack"
      onSubmit={(event) => {
        event.preventDefault();
        void declare();
      }}
    >
      <p className="small">
        Look at the arm and say where each joint stands. This is your word, not a measurement: the arm may
        then go up to easy, and it believes soft limits from here.
      </p>
      <ValueFields model={model} values={values} skip={isServo} />
      {truth && (
        <button
          type="button"
          className="btn sm"
          onClick={() =>
            values.setTyped(model.joints.map((joint, i) => figure(toShown(joint.type, truth[i] ?? 0), 1)))
          }
        >
          Read it off the built-in arm
        </button>
      )}
      {refused && <Message kind="fault">{refused}</Message>}
      <div className="acts">
        <button type="button" className="btn" onClick={onClose}>
          Not now
        </button>
        <button type="submit" className="btn ink" disabled={!values.q}>
          Declare
        </button>
      </div>
    </form>
  );
}

/** Typed values, then hold to go there. */
export function GoToDialog(props: Props) {
  return (
    <Dialog open={props.open} onClose={props.onClose} title="Go to typed values">
      <GoToForm {...props} />
    </Dialog>
  );
}

function GoToForm({ onClose, model }: Props) {
  const values = useJointValues(model, 'soft', latestTelemetry()?.q ?? null);
  return (
    <div className="stack">
      <p className="small quiet">
        All joints leave and arrive together. Letting go stops the arm on its way.
      </p>
      <ValueFields model={model} values={values} />
      <div className="acts">
        <button type="button" className="btn" onClick={onClose}>
          Close
        </button>
        <GoButton
          id="go-to-typed"
          motion={{ kind: 'joints', q: values.q ?? [] }}
          hint="at the ceiling of the strip"
          disabled={!values.q}
        >
          Hold to go there
        </GoButton>
      </div>
    </div>
  );
}
