import type { Person } from '../../../shared/api/resources';
import { errorText } from '../../api/client';
import { useChangePerson } from '../../api/team';
import { Dialog } from '../../components/Dialog';
import { Message } from '../../components/Message';

/** Asks before somebody is kept out, or let in again. */
export function DisableDialog({ person, onClose }: { person: Person; onClose: () => void }) {
  const change = useChangePerson();
  const { name, disabled } = person;
  return (
    <Dialog open onClose={onClose} title={disabled ? `Let ${name} in again?` : `Disable ${name}?`}>
      <p>
        {disabled
          ? `${name} can sign in again with the same password and role.`
          : `${name} is signed out at once and cannot sign in. What ${name} did stays in the log. An arm ${name} has control of stops.`}
      </p>
      {change.isError && <Message kind="fault">{errorText(change.error)}</Message>}
      <div className="acts">
        <button type="button" className="btn" onClick={onClose}>
          Cancel
        </button>
        <button
          type="button"
          className={`btn ${disabled ? 'ink' : 'danger'}`}
          disabled={change.isPending}
          onClick={() => change.mutate({ id: person.id, disabled: !disabled }, { onSuccess: onClose })}
        >
          {disabled ? `Let ${name} in` : `Disable ${name}`}
        </button>
      </div>
    </Dialog>
  );
}
