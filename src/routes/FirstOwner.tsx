import { zodResolver } from '@hookform/resolvers/zod';
import { useForm } from 'react-hook-form';
import { Navigate, useNavigate } from 'react-router-dom';
import { FirstOwner } from '../../shared/api/resources';
import { errorText } from '../api/client';
import { useFirstOwner, useSession } from '../api/session';
import { Field } from '../components/Field';
import { Message } from '../components/Message';
import { TitleBlock } from '../features/session/TitleBlock';

export function Component() {
  const session = useSession().data;
  const begin = useFirstOwner();
  const navigate = useNavigate();
  const form = useForm({
    resolver: zodResolver(FirstOwner),
    defaultValues: { code: '', workshop: '', name: '', email: '', password: '' },
  });
  if (session && !session.setupNeeded && !begin.isPending) return <Navigate to="/" replace />;
  const { errors } = form.formState;
  return (
    <TitleBlock title="A new workshop">
      <form
        noValidate
        onSubmit={form.handleSubmit((values) =>
          begin.mutate(values, { onSuccess: () => void navigate('/', { replace: true }) }),
        )}
      >
        <h1>First owner</h1>
        <Field
          label="One-time code"
          help="The server printed it when it started."
          autoComplete="off"
          error={errors.code && 'the code from the terminal is needed'}
          {...form.register('code')}
        />
        <Field
          label="Name of the workshop"
          error={errors.workshop && 'a name is needed'}
          {...form.register('workshop')}
        />
        <Field
          label="Your name"
          autoComplete="name"
          error={errors.name && 'your name is needed'}
          {...form.register('name')}
        />
        <Field
          label="E-mail"
          type="email"
          autoComplete="username"
          error={errors.email && 'an e-mail address is needed'}
          {...form.register('email')}
        />
        <Field
          label="Password"
          type="password"
          autoComplete="new-password"
          help="At least 10 characters; pasting is fine."
          error={errors.password?.message}
          {...form.register('password')}
        />
        {begin.isError && <Message kind="fault">{errorText(begin.error)}</Message>}
        <button type="submit" className="btn ink" disabled={begin.isPending}>
          Make me the owner
        </button>
      </form>
    </TitleBlock>
  );
}
