import { zodResolver } from '@hookform/resolvers/zod';
import { useForm } from 'react-hook-form';
import { Navigate, useNavigate } from 'react-router-dom';
import { FirstOwner } from '../../shared/api/resources';
import { useFirstOwner, useSession } from '../api/session';
import { Field } from '../components/Field';
import { passwordError, placeErrors } from '../components/form-errors';
import { Message } from '../components/Message';
import { TitleBlock } from '../features/session/TitleBlock';

/** An empty workshop begins with its owner, who proves by the code to have started the server. */
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
    <TitleBlock
      sheet="First owner"
      workshop=""
      intro="This workshop has nobody yet. The first person in owns it and invites the others."
    >
      <form
        noValidate
        onSubmit={form.handleSubmit((values) =>
          begin.mutate(values, {
            onSuccess: () => void navigate('/', { replace: true }),
            onError: (error) => placeErrors(form, error),
          }),
        )}
      >
        <h1>Begin as the first owner</h1>
        <Field
          label="One-time code"
          help="Printed in the terminal when the server started."
          autoComplete="off"
          spellCheck={false}
          error={errors.code && (errors.code.type === 'server' ? errors.code.message : 'Type the code.')}
          {...form.register('code')}
        />
        <Field
          label="Name of the workshop"
          autoComplete="organization"
          error={errors.workshop && 'Give the workshop a name of up to 60 characters.'}
          {...form.register('workshop')}
        />
        <Field
          label="Your name"
          autoComplete="name"
          error={errors.name && 'Give the name others will see, up to 60 characters.'}
          {...form.register('name')}
        />
        <Field
          label="E-mail"
          type="email"
          autoComplete="username"
          error={errors.email && 'Type your e-mail address, like ada@tidemill.example.'}
          {...form.register('email')}
        />
        <Field
          label="Password"
          type="password"
          autoComplete="new-password"
          help="At least 10 characters; pasting is fine."
          error={passwordError(errors.password)}
          {...form.register('password')}
        />
        {errors.root?.server && <Message kind="fault">{errors.root.server.message}</Message>}
        <button type="submit" className="btn ink" disabled={begin.isPending}>
          {begin.isPending ? 'Making the workshop…' : 'Make me the owner'}
        </button>
      </form>
    </TitleBlock>
  );
}
