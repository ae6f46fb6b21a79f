import { zodResolver } from '@hookform/resolvers/zod';
import { useState } from 'react';
import { useForm } from 'react-hook-form';
import { NewInvitation } from '../../shared/api/resources';
import { may, ROLES, type Role } from '../../shared/team/roles';
import { errorText } from '../api/client';
import { useSession } from '../api/session';
import { useChangePerson, useInvitations, useInvite, usePeople, useWithdrawInvitation } from '../api/team';
import { Dialog } from '../components/Dialog';
import { Field, SelectField } from '../components/Field';
import { Message } from '../components/Message';
import { ago, when } from '../components/when';
import { toast } from '../features/shell/toast';

/** What each role adds to the one before it. */
const DOES: Record<Role, string> = {
  observer: 'watches, and can always stop the arm',
  operator: 'takes control, brings the arm up, jogs, runs approved sequences',
  teacher: 'teaches poses and sequences, rehearses, approves',
  builder: 'describes the arm, its limits and drives; acknowledges hard faults',
  owner: 'team, settings, deleting arms',
};

export function Component() {
  const you = useSession().data?.you;
  const people = usePeople();
  const manages = may(you?.role ?? 'observer', 'team.manage');
  const invitations = useInvitations(manages).data ?? [];
  const change = useChangePerson();
  const withdraw = useWithdrawInvitation();
  const [inviting, setInviting] = useState(false);
  return (
    <main className="sheet listpage">
      <div className="bar">
        <h1 className="title">Team</h1>
        <span className="quiet small">
          {manages ? 'Each role includes the ones above it.' : 'The owner changes roles.'}
        </span>
        {manages && (
          <button
            type="button"
            className="btn"
            style={{ marginLeft: 'auto' }}
            onClick={() => setInviting(true)}
          >
            Invite somebody…
          </button>
        )}
      </div>
      <div className="scroll">
        {people.isError && <Message kind="fault">{errorText(people.error)}</Message>}
        {change.isError && <Message kind="fault">{errorText(change.error)}</Message>}
        <table>
          <thead>
            <tr>
              <th>Name</th>
              <th className="wide-only">E-mail</th>
              <th>Role</th>
              <th className="wide-only">Does</th>
              <th className="wide-only">Last here</th>
              {manages && <th>Account</th>}
            </tr>
          </thead>
          <tbody>
            {people.data?.map((person) => (
              <tr key={person.id} className={person.disabled ? 'ended' : ''}>
                <td>
                  <b>{person.name}</b>
                  {person.id === you?.id ? ' (you)' : ''}
                </td>
                <td className="wide-only">{person.email}</td>
                <td>
                  {manages ? (
                    <select
                      className="btn sm"
                      aria-label={`Role of ${person.name}`}
                      value={person.role}
                      disabled={change.isPending}
                      onChange={(event) => change.mutate({ id: person.id, role: event.target.value as Role })}
                    >
                      {ROLES.map((role) => (
                        <option key={role}>{role}</option>
                      ))}
                    </select>
                  ) : (
                    person.role
                  )}
                </td>
                <td className="wide-only quiet">{DOES[person.role]}</td>
                <td className="wide-only">{person.lastSeenMs ? when(person.lastSeenMs) : 'never'}</td>
                {manages && (
                  <td className="act">
                    <button
                      type="button"
                      className="btn sm"
                      disabled={change.isPending || person.id === you?.id}
                      onClick={() => change.mutate({ id: person.id, disabled: !person.disabled })}
                    >
                      {person.disabled ? 'Let in again' : 'Disable'}
                    </button>
                  </td>
                )}
              </tr>
            ))}
          </tbody>
        </table>
        {invitations.length > 0 && (
          <>
            <h2 className="h2" style={{ marginTop: 24 }}>
              Invitations waiting
            </h2>
            <table>
              <tbody>
                {invitations.map((invitation) => (
                  <tr key={invitation.id}>
                    <td>
                      <b>{invitation.name}</b> {invitation.email}
                    </td>
                    <td>{invitation.role}</td>
                    <td className="wide-only quiet">
                      by {invitation.invitedBy}, {ago(invitation.createdAtMs)}; runs out{' '}
                      {when(invitation.expiresAtMs)}
                    </td>
                    <td className="act">
                      <button type="button" className="btn sm" onClick={() => withdraw.mutate(invitation.id)}>
                        Withdraw
                      </button>
                    </td>
                  </tr>
                ))}
              </tbody>
            </table>
          </>
        )}
      </div>
      <InviteDialog open={inviting} onClose={() => setInviting(false)} />
    </main>
  );
}

function InviteDialog({ open, onClose }: { open: boolean; onClose: () => void }) {
  const invite = useInvite();
  const form = useForm({
    resolver: zodResolver(NewInvitation),
    defaultValues: { email: '', name: '', role: 'operator' as Role },
  });
  const role = form.watch('role');
  const { errors } = form.formState;
  return (
    <Dialog open={open} onClose={onClose} title="Invite somebody">
      <form
        className="stack"
        noValidate
        onSubmit={form.handleSubmit((values) =>
          invite.mutate(values, {
            onSuccess: () => {
              toast('Invited. Without a mail server the mail waits in the Outbox.');
              form.reset();
              onClose();
            },
          }),
        )}
      >
        <Field label="Name" error={errors.name && 'a name is needed'} {...form.register('name')} />
        <Field
          label="E-mail"
          type="email"
          error={errors.email && 'an e-mail address is needed'}
          {...form.register('email')}
        />
        <SelectField
          label="Role"
          value={role}
          help={DOES[role]}
          onChange={(value) => form.setValue('role', value as Role)}
        >
          {ROLES.map((r) => (
            <option key={r}>{r}</option>
          ))}
        </SelectField>
        {invite.isError && <Message kind="fault">{errorText(invite.error)}</Message>}
        <div className="acts">
          <button type="button" className="btn" onClick={onClose}>
            Cancel
          </button>
          <button type="submit" className="btn ink" disabled={invite.isPending}>
            Send invitation
          </button>
        </div>
      </form>
    </Dialog>
  );
}
