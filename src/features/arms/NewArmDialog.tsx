import { useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { useCreateArm, useStartingPoints } from '../../api/arms';
import { errorText } from '../../api/client';
import { Dialog } from '../../components/Dialog';
import { Field } from '../../components/Field';
import { Message } from '../../components/Message';
import { QueryState } from '../../components/QueryState';

/** A new arm starts from one that is described already. */
export function NewArmDialog({ onClose }: { onClose: () => void }) {
  const points = useStartingPoints(true);
  const create = useCreateArm();
  const navigate = useNavigate();
  const [name, setName] = useState('');
  const [chosen, setChosen] = useState<string | null>(null);
  const from = chosen ?? points.data?.[0]?.key ?? '';
  return (
    <Dialog open onClose={onClose} title="Build an arm">
      <form
        className="stack"
        onSubmit={(event) => {
          event.preventDefault();
          if (!name.trim() || !from) return;
          create.mutate(
            { name: name.trim(), startFrom: from },
            { onSuccess: (arm) => void navigate(`/arms/${arm.id}/build`) },
          );
        }}
      >
        <Field
          label="Name"
          value={name}
          maxLength={60}
          autoComplete="off"
          onChange={(event) => setName(event.target.value)}
        />
        <fieldset className="starts">
          <legend className="small quiet">Start from. Everything can be changed afterwards on Build.</legend>
          <QueryState query={points} waiting="Looking for arms to start from…" empty={null} />
          {points.data?.map((point) => (
            <label key={point.key} className="tick">
              <input
                type="radio"
                name="from"
                value={point.key}
                checked={from === point.key}
                onChange={() => setChosen(point.key)}
              />
              <span>
                <b>{point.name}</b>
                {point.note && <span className="small quiet">{point.note}</span>}
              </span>
            </label>
          ))}
        </fieldset>
        {create.isError && <Message kind="fault">{errorText(create.error)}</Message>}
        <div className="acts">
          <button type="button" className="btn" onClick={onClose}>
            Cancel
          </button>
          <button type="submit" className="btn ink" disabled={!name.trim() || !from || create.isPending}>
            {create.isPending ? 'Making it…' : 'Make it'}
          </button>
        </div>
      </form>
    </Dialog>
  );
}
