import { useEffect, useState } from 'react';
import { may } from '../../shared/team/roles';
import { useArmSettings, useArms, useDeleteArm } from '../api/arms';
import { errorText } from '../api/client';
import { useSession, useSignOut } from '../api/session';
import { useRenameWorkshop } from '../api/team';
import { Dialog } from '../components/Dialog';
import { Field } from '../components/Field';
import { Message } from '../components/Message';
import { toast } from '../features/shell/toast';

export function Component() {
  const session = useSession().data;
  const role = session?.you?.role ?? 'observer';
  const owner = may(role, 'workshop.settings');
  const signOut = useSignOut();
  return (
    <main className="sheet">
      <div className="paper">
        <h1 className="title">Settings</h1>
        <section className="stack">
          <h2 className="h2">You</h2>
          <p>
            {session?.you?.name}, {session?.you?.email}, {role}
          </p>
          <p>
            <button type="button" className="btn" onClick={() => signOut.mutate()}>
              Sign out on all devices
            </button>
          </p>
        </section>
        {owner && <WorkshopName name={session?.workshop ?? ''} />}
        {owner && <ArmSettings />}
        {!owner && <p className="note">The owner changes the workshop’s settings.</p>}
      </div>
    </main>
  );
}

function WorkshopName({ name }: { name: string }) {
  const rename = useRenameWorkshop();
  const [typed, setTyped] = useState(name);
  useEffect(() => setTyped(name), [name]);
  return (
    <form
      className="stack"
      style={{ maxWidth: 420 }}
      onSubmit={(event) => {
        event.preventDefault();
        rename.mutate(typed.trim(), { onSuccess: () => toast('Renamed.') });
      }}
    >
      <h2 className="h2">Workshop</h2>
      <Field label="Name" value={typed} maxLength={60} onChange={(event) => setTyped(event.target.value)} />
      {rename.isError && <Message kind="fault">{errorText(rename.error)}</Message>}
      <p>
        <button
          type="submit"
          className="btn"
          disabled={!typed.trim() || typed.trim() === name || rename.isPending}
        >
          Rename
        </button>
      </p>
    </form>
  );
}

function ArmSettings() {
  const arms = useArms().data ?? [];
  const settings = useArmSettings();
  const remove = useDeleteArm();
  const [deleting, setDeleting] = useState<{ id: string; name: string } | null>(null);
  return (
    <section className="stack">
      <h2 className="h2">Arms</h2>
      {settings.isError && <Message kind="fault">{errorText(settings.error)}</Message>}
      {arms.map((arm) => (
        <div key={arm.id} className="line">
          <b style={{ minWidth: 120 }}>{arm.name}</b>
          <label className="tick">
            <input
              type="checkbox"
              checked={arm.unattended}
              onChange={(event) => settings.mutate({ armId: arm.id, unattended: event.target.checked })}
            />
            runs go on when whoever started them is away for more than 10 s
          </label>
          <button type="button" className="btn sm danger end" onClick={() => setDeleting(arm)}>
            Delete…
          </button>
        </div>
      ))}
      <Dialog
        open={deleting !== null}
        onClose={() => setDeleting(null)}
        title={`Delete ${deleting?.name ?? ''}?`}
      >
        <p>Its poses, sequences and runs go with it. It has to be resting.</p>
        {remove.isError && <Message kind="fault">{errorText(remove.error)}</Message>}
        <div className="acts">
          <button type="button" className="btn" onClick={() => setDeleting(null)}>
            Keep it
          </button>
          <button
            type="button"
            className="btn danger"
            disabled={remove.isPending}
            onClick={() => deleting && remove.mutate(deleting.id, { onSuccess: () => setDeleting(null) })}
          >
            Delete {deleting?.name}
          </button>
        </div>
      </Dialog>
    </section>
  );
}
