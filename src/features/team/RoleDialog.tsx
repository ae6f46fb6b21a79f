import { useState } from 'react';
import type { Person } from '../../../shared/api/resources';
import { may, ROLES } from '../../../shared/team/roles';
import { errorText } from '../../api/client';
import { useChangePerson } from '../../api/team';
import { Dialog } from '../../components/Dialog';
import { Message } from '../../components/Message';
import { ROLE_DOES, whyNotRole } from './role-rules';

/** Every role with what it does and, where it cannot be given, the reason. */
export function RoleDialog({
  person,
  people,
  you,
  onClose,
}: {
  person: Person;
  people: readonly Person[];
  you: Person;
  onClose: () => void;
}) {
  const change = useChangePerson();
  const [role, setRole] = useState(person.role);
  const losesTeam = person.id === you.id && !may(role, 'team.manage');
  return (
    <Dialog open onClose={onClose} title={`Role of ${person.name}`}>
      <form
        className="stack"
        onSubmit={(event) => {
          event.preventDefault();
          change.mutate({ id: person.id, role }, { onSuccess: onClose });
        }}
      >
        <fieldset className="roles">
          <legend className="small quiet">Each role includes the ones above it.</legend>
          {ROLES.map((option) => {
            const why = whyNotRole(person, option, people);
            return (
              <label key={option} className={`tick ${why ? 'quiet' : ''}`}>
                <input
                  type="radio"
                  name="role"
                  value={option}
                  checked={role === option}
                  disabled={why !== null}
                  onChange={() => setRole(option)}
                />
                <span>
                  <b>{option}</b>
                  <span className="small quiet">{ROLE_DOES[option]}</span>
                  {why && <span className="small">{why}</span>}
                </span>
              </label>
            );
          })}
        </fieldset>
        {role !== person.role &&
          (losesTeam ? (
            <Message>You will no longer manage the team, and cannot take this back yourself.</Message>
          ) : (
            <p className="small quiet">
              {person.name} is signed out on every device and signs in again with the new role.
            </p>
          ))}
        {change.isError && <Message kind="fault">{errorText(change.error)}</Message>}
        <div className="acts">
          <button type="button" className="btn" onClick={onClose}>
            Cancel
          </button>
          <button type="submit" className="btn ink" disabled={role === person.role || change.isPending}>
            {role === person.role ? 'Choose another role' : `Make ${person.name} ${role}`}
          </button>
        </div>
      </form>
    </Dialog>
  );
}
