import { useState } from 'react';
import { Link, useNavigate } from 'react-router-dom';
import { may } from '../../shared/team/roles';
import { useArms, useCreateArm, useStartingPoints } from '../api/arms';
import { errorText } from '../api/client';
import { useSession } from '../api/session';
import { Dialog } from '../components/Dialog';
import { Field, SelectField } from '../components/Field';
import { MotorsIcon } from '../components/icons';
import { Message } from '../components/Message';
import { when } from '../components/when';

export function Component() {
  const arms = useArms();
  const role = useSession().data?.you?.role ?? 'observer';
  const [making, setMaking] = useState(false);
  const builder = may(role, 'arm.build');
  return (
    <main className="sheet">
      <div className="paper">
        <div className="line">
          <h1 className="title">Arms</h1>
          {builder && (
            <button type="button" className="btn end" onClick={() => setMaking(true)}>
              Describe an arm…
            </button>
          )}
        </div>
        {arms.isError && <Message kind="fault">{errorText(arms.error)}</Message>}
        {arms.isPending && <p className="quiet">Looking for arms…</p>}
        {arms.data?.length === 0 && (
          <div className="empty">
            <h2 className="h2">No arm is described yet.</h2>
            <p className="quiet">
              An arm begins as a description: joints, links, drives. Start from one of ours and change it to
              be yours; until you connect a board it is simulated, physics and all.
            </p>
            {builder ? (
              <button type="button" className="btn ink" onClick={() => setMaking(true)}>
                Describe an arm…
              </button>
            ) : (
              <p className="note">A builder describes arms. Ask the owner for the role.</p>
            )}
          </div>
        )}
        <div className="cardgrid">
          {arms.data?.map((arm) => (
            <Link key={arm.id} className="icard armcard" to={`/arms/${arm.id}/move`}>
              <span className="name">{arm.name}</span>
              <span className="tx">
                <span>{arm.note || `${arm.jointCount} joints`}</span>
                <span className="lk">
                  <MotorsIcon state={arm.motors ?? 'resting'} />
                  {arm.motors ?? 'not opened yet'}
                  {arm.inControl ? `, ${arm.inControl} in control` : ''}
                </span>
                <span className="note">
                  {arm.jointCount} joints, revision {arm.revision}, {when(arm.updatedAtMs)}
                </span>
              </span>
            </Link>
          ))}
        </div>
      </div>
      <NewArmDialog open={making} onClose={() => setMaking(false)} />
    </main>
  );
}

function NewArmDialog({ open, onClose }: { open: boolean; onClose: () => void }) {
  const points = useStartingPoints(open).data ?? [];
  const create = useCreateArm();
  const navigate = useNavigate();
  const [name, setName] = useState('');
  const [from, setFrom] = useState('heron');
  return (
    <Dialog open={open} onClose={onClose} title="Describe an arm">
      <form
        className="stack"
        onSubmit={(event) => {
          event.preventDefault();
          create.mutate(
            { name: name.trim(), startFrom: from },
            { onSuccess: (arm) => void navigate(`/arms/${arm.id}/build`) },
          );
        }}
      >
        <Field
          label="Name"
          value={name}
          required
          maxLength={60}
          onChange={(event) => setName(event.target.value)}
        />
        <SelectField
          label="Start from"
          value={from}
          onChange={setFrom}
          help="Everything can be changed afterwards on Build."
        >
          {points.map((point) => (
            <option key={point.key} value={point.key}>
              {point.name}
              {point.note ? `: ${point.note}` : ''}
            </option>
          ))}
        </SelectField>
        {create.isError && <Message kind="fault">{errorText(create.error)}</Message>}
        <div className="acts">
          <button type="button" className="btn" onClick={onClose}>
            Cancel
          </button>
          <button type="submit" className="btn ink" disabled={!name.trim() || create.isPending}>
            Make it
          </button>
        </div>
      </form>
    </Dialog>
  );
}
