import '../features/team/team.css';
import { useState } from 'react';
import { Link } from 'react-router-dom';
import type { Person } from '../../shared/api/resources';
import { may } from '../../shared/team/roles';
import { useSession } from '../api/session';
import { usePeople } from '../api/team';
import { Message } from '../components/Message';
import { QueryState } from '../components/QueryState';
import { useTitle } from '../components/use-title';
import { when } from '../components/when';
import { DisableDialog } from '../features/team/DisableDialog';
import { InviteDialog } from '../features/team/InviteDialog';
import { PendingInvitations } from '../features/team/PendingInvitations';
import { RoleDialog } from '../features/team/RoleDialog';
import { ROLE_DOES, whyNotDisable } from '../features/team/role-rules';

type Asking = { what: 'role' | 'disable'; person: Person } | { what: 'invite' } | null;

export function Component() {
  const session = useSession().data;
  useTitle('Team', session?.workshop);
  const people = usePeople();
  const [asking, setAsking] = useState<Asking>(null);
  const [invited, setInvited] = useState<string | null>(null);
  const you = session?.you;
  if (!you) return null;
  const manages = may(you.role, 'team.manage');
  const close = () => setAsking(null);
  return (
    <main className="sheet listpage">
      <div className="bar">
        <h1 className="title">Team</h1>
        <span className="quiet small">
          {manages ? 'Who may do what here. Anyone may always stop an arm.' : 'The owner changes roles.'}
        </span>
        {manages && (
          <button type="button" className="btn end" onClick={() => setAsking({ what: 'invite' })}>
            Invite somebody…
          </button>
        )}
      </div>
      <div className="scroll stack">
        {invited && (
          <Message>
            {invited} is invited. If no mail server is set, the link waits in the{' '}
            <Link to="/outbox">Outbox</Link>.
          </Message>
        )}
        <QueryState query={people} waiting="Looking up the team…" empty={null} />
        {people.data && <PeopleTable people={people.data} you={you} manages={manages} onAsk={setAsking} />}
        {manages && <PendingInvitations />}
      </div>
      {asking?.what === 'role' && (
        <RoleDialog person={asking.person} people={people.data ?? []} you={you} onClose={close} />
      )}
      {asking?.what === 'disable' && <DisableDialog person={asking.person} onClose={close} />}
      {asking?.what === 'invite' && (
        <InviteDialog
          onClose={close}
          onInvited={(name) => {
            setInvited(name);
            close();
          }}
        />
      )}
    </main>
  );
}

function PeopleTable({
  people,
  you,
  manages,
  onAsk,
}: {
  people: readonly Person[];
  you: Person;
  manages: boolean;
  onAsk: (asking: Asking) => void;
}) {
  return (
    <table className="people">
      <thead>
        <tr>
          <th>Name</th>
          <th>Role</th>
          <th className="wide-only">Last here</th>
          {manages && <th>Account</th>}
        </tr>
      </thead>
      <tbody>
        {people.map((person) => {
          const { id, name, email, role, disabled, lastSeenMs } = person;
          const whyNot = whyNotDisable(person, people, you.id);
          return (
            <tr key={id}>
              <td className="who">
                <b>
                  {name}
                  {id === you.id && <span className="quiet"> (you)</span>}
                </b>
                <span className="note">{email}</span>
              </td>
              <td>
                <span className="role">
                  {manages ? (
                    <button
                      type="button"
                      className="btn sm"
                      aria-label={`Role of ${name}: ${role}, change`}
                      onClick={() => onAsk({ what: 'role', person })}
                    >
                      {role}…
                    </button>
                  ) : (
                    <b>{role}</b>
                  )}
                  <span className="small quiet wide-only">{ROLE_DOES[role]}</span>
                </span>
              </td>
              <td className="wide-only">{lastSeenMs ? when(lastSeenMs) : 'never'}</td>
              {manages && (
                <td className="account">
                  {disabled && <span className="tag">disabled</span>}
                  {whyNot && !disabled ? (
                    <span className="note">{id === you.id ? 'yours' : whyNot}</span>
                  ) : (
                    <button
                      type="button"
                      className="btn sm"
                      aria-label={disabled ? `Let ${name} in again` : `Disable ${name}`}
                      onClick={() => onAsk({ what: 'disable', person })}
                    >
                      {disabled ? 'Let in…' : 'Disable…'}
                    </button>
                  )}
                </td>
              )}
            </tr>
          );
        })}
      </tbody>
    </table>
  );
}
