import { useState } from 'react';
import type { ArmSummary } from '../../../shared/api/resources';
import { useArmSettings, useArms, useDeleteArm } from '../../api/arms';
import { errorText } from '../../api/client';
import { Dialog } from '../../components/Dialog';
import { Field } from '../../components/Field';
import { Message } from '../../components/Message';
import { QueryState } from '../../components/QueryState';

/** What the owner decides for each arm: whether runs go on unattended, and whether the arm stays. */
export function ArmSettings() {
  const arms = useArms();
  const settings = useArmSettings();
  const [deleting, setDeleting] = useState<ArmSummary | null>(null);
  return (
    <section className="stack" aria-labelledby="settings-arms">
      <h2 className="h2" id="settings-arms">
        Arms
      </h2>
      <p className="small quiet">
        A run pauses when whoever started it has been away for 10 s, unless its arm may run unattended.
      </p>
      {settings.isError && <Message kind="fault">{errorText(settings.error)}</Message>}
      <QueryState query={arms} waiting="Looking for arms…" empty={arms.data?.length ? null : 'No arm yet.'} />
      {arms.data && arms.data.length > 0 && (
        <ul className="armrows">
          {arms.data.map((arm) => (
            <li key={arm.id}>
              <b>{arm.name}</b>
              <label className="tick">
                <input
                  type="checkbox"
                  aria-label={`${arm.name} may run unattended`}
                  checked={arm.unattended}
                  disabled={settings.isPending}
                  onChange={(event) => settings.mutate({ armId: arm.id, unattended: event.target.checked })}
                />
                may run unattended
              </label>
              <button
                type="button"
                className="btn sm danger"
                aria-label={`Delete ${arm.name}`}
                onClick={() => setDeleting(arm)}
              >
                Delete…
              </button>
            </li>
          ))}
        </ul>
      )}
      {deleting && <DeleteArmDialog arm={deleting} onClose={() => setDeleting(null)} />}
    </section>
  );
}

/** Deleting cannot be undone, so the name is typed first. */
function DeleteArmDialog({ arm, onClose }: { arm: ArmSummary; onClose: () => void }) {
  const remove = useDeleteArm();
  const [typed, setTyped] = useState('');
  return (
    <Dialog open onClose={onClose} title={`Delete ${arm.name}?`}>
      <form
        className="stack"
        onSubmit={(event) => {
          event.preventDefault();
          if (typed.trim() === arm.name) remove.mutate(arm.id, { onSuccess: onClose });
        }}
      >
        <p>Its poses, sequences and runs go with it, for good. It has to be resting.</p>
        <Field
          label={`Type ${arm.name} to delete it`}
          autoComplete="off"
          value={typed}
          onChange={(event) => setTyped(event.target.value)}
        />
        {remove.isError && <Message kind="fault">{errorText(remove.error)}</Message>}
        <div className="acts">
          <button type="button" className="btn" onClick={onClose}>
            Keep it
          </button>
          <button
            type="submit"
            className="btn danger"
            disabled={typed.trim() !== arm.name || remove.isPending}
          >
            Delete {arm.name}
          </button>
        </div>
      </form>
    </Dialog>
  );
}
