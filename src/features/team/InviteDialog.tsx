import { zodResolver } from '@hookform/resolvers/zod';
import { useForm } from 'react-hook-form';
import { NewInvitation } from '../../../shared/api/resources';
import { ROLES, type Role } from '../../../shared/team/roles';
import { useInvite } from '../../api/team';
import { Dialog } from '../../components/Dialog';
import { Field, SelectField } from '../../components/Field';
import { placeErrors } from '../../components/form-errors';
import { Message } from '../../components/Message';
import { ROLE_DOES } from './role-rules';

export function InviteDialog({
  onClose,
  onInvited,
}: {
  onClose: () => void;
  onInvited: (name: string) => void;
}) {
  const invite = useInvite();
  const form = useForm({
    resolver: zodResolver(NewInvitation),
    defaultValues: { email: '', name: '', role: 'operator' as Role },
  });
  const role = form.watch('role');
  const { errors } = form.formState;
  return (
    <Dialog open onClose={onClose} title="Invite somebody">
      <form
        className="stack"
        noValidate
        onSubmit={form.handleSubmit((values) =>
          invite.mutate(values, {
            onSuccess: ({ name }) => onInvited(name),
            onError: (error) => placeErrors(form, error),
          }),
        )}
      >
        <Field
          label="Name"
          autoComplete="off"
          error={errors.name && 'Give the name others will see, up to 60 characters.'}
          {...form.register('name')}
        />
        <Field
          label="E-mail"
          type="email"
          autoComplete="off"
          error={errors.email && 'Type an e-mail address, like juno@tidemill.example.'}
          {...form.register('email')}
        />
        <SelectField
          label="Role"
          value={role}
          help={ROLE_DOES[role]}
          onChange={(value) => form.setValue('role', value as Role)}
        >
          {ROLES.map((option) => (
            <option key={option}>{option}</option>
          ))}
        </SelectField>
        {errors.root?.server && <Message kind="fault">{errors.root.server.message}</Message>}
        <div className="acts">
          <button type="button" className="btn" onClick={onClose}>
            Cancel
          </button>
          <button type="submit" className="btn ink" disabled={invite.isPending}>
            {invite.isPending ? 'Sending…' : 'Send invitation'}
          </button>
        </div>
      </form>
    </Dialog>
  );
}
