import { useState } from 'react';
import type { Arm } from '../../../shared/api/resources';
import type { Joint } from '../../../shared/arm/model';
import { figure, fromShown, shownUnit, shownValue, toShown } from '../../../shared/arm/units';
import { errorText } from '../../api/client';
import { useTypedPose } from '../../api/poses';
import { Dialog } from '../../components/Dialog';
import { Field } from '../../components/Field';
import { Message } from '../../components/Message';
import { parseQuantity } from '../../components/quantity';
import { Silhouette } from '../../components/Silhouette';

/** A pose from a person's numbers: counts as declared, lies inside the soft limits. */
export function TypedPoseDialog({
  arm,
  open,
  onClose,
  onSaved,
}: {
  arm: Arm;
  open: boolean;
  onClose: () => void;
  onSaved: (id: string) => void;
}) {
  return (
    <Dialog open={open} onClose={onClose} title="A pose from typed values">
      <TypedForm arm={arm} onClose={onClose} onSaved={onSaved} />
    </Dialog>
  );
}

interface Typed {
  /** rad or m; null while it is no number. */
  value: number | null;
  error: string | null;
  help: string;
}

/** "0.335 rad" in a field of degrees: understood, and shown as what it became. */
function understand(joint: Joint, text: string): Typed {
  const unit = shownUnit(joint.type);
  const range = `${shownValue(joint.type, joint.limits.lower, 0)} to ${shownValue(joint.type, joint.limits.upper, 0)}`;
  const parsed = parseQuantity(text, unit);
  if (!parsed) return { value: null, error: 'a number is needed', help: range };
  const value = fromShown(joint.type, parsed.value);
  const outside = value < joint.limits.lower - 1e-9 || value > joint.limits.upper + 1e-9;
  return {
    value,
    error: outside ? `has to lie in ${range}` : null,
    help: parsed.convertedFrom ? `${parsed.convertedFrom} is ${shownValue(joint.type, value)}` : range,
  };
}

function TypedForm({
  arm,
  onClose,
  onSaved,
}: {
  arm: Arm;
  onClose: () => void;
  onSaved: (id: string) => void;
}) {
  const { joints, gripper } = arm.model;
  const save = useTypedPose(arm.id);
  const [name, setName] = useState('');
  const [texts, setTexts] = useState(() =>
    joints.map((joint) => figure(toShown(joint.type, (joint.limits.lower + joint.limits.upper) / 2), 1)),
  );
  const widest = (gripper?.opening ?? 0) * 1000;
  const [opening, setOpening] = useState(figure(widest, 1));
  const typed = joints.map((joint, i) => understand(joint, texts[i] ?? ''));
  const mm = parseQuantity(opening, 'mm');
  const wrongOpening =
    gripper && (!mm || mm.value < 0 || mm.value > widest + 1e-9) ? `from 0 to ${figure(widest, 0)} mm` : null;
  const values = typed.map((joint) => joint.value);
  const numbers = values.every((value) => value !== null) ? (values as number[]) : null;
  const ready =
    name.trim() !== '' && numbers && typed.every((joint) => joint.error === null) && !wrongOpening;
  return (
    <form
      className="stack"
      onSubmit={(event) => {
        event.preventDefault();
        if (!ready || !numbers) return;
        save.mutate(
          { name: name.trim(), q: numbers, gripper: gripper && mm ? Math.min(1, mm.value / widest) : null },
          {
            onSuccess: (pose) => {
              onSaved(pose.id);
              onClose();
            },
          },
        );
      }}
    >
      <div className="typed">
        <Field label="Name" value={name} maxLength={60} onChange={(event) => setName(event.target.value)} />
        <Silhouette model={arm.model} q={numbers} gripper={mm && gripper ? mm.value / widest : null} />
      </div>
      <div className="grid2">
        {joints.map((joint, i) => (
          <Field
            key={joint.name}
            label={joint.name}
            text={false}
            unit={shownUnit(joint.type)}
            value={texts[i] ?? ''}
            help={typed[i]?.help}
            error={typed[i]?.error}
            onChange={(event) => setTexts(texts.map((text, k) => (k === i ? event.target.value : text)))}
          />
        ))}
        {gripper && (
          <Field
            label="Gripper"
            text={false}
            unit="mm"
            value={opening}
            help={`0 to ${figure(widest, 0)} mm`}
            error={wrongOpening}
            onChange={(event) => setOpening(event.target.value)}
          />
        )}
      </div>
      {save.isError && <Message kind="fault">{errorText(save.error)}</Message>}
      <div className="acts">
        <button type="button" className="btn" onClick={onClose}>
          Cancel
        </button>
        <button type="submit" className="btn ink" disabled={!ready || save.isPending}>
          Save pose
        </button>
      </div>
    </form>
  );
}
