import { zodResolver } from '@hookform/resolvers/zod';
import { useForm } from 'react-hook-form';
import { Navigate, useNavigate, useSearchParams } from 'react-router-dom';
import { SignIn } from '../../shared/api/resources';
import { errorText } from '../api/client';
import { useSession, useSignIn } from '../api/session';
import { Field } from '../components/Field';
import { Message } from '../components/Message';
import { TitleBlock } from '../features/session/TitleBlock';
import { safePath } from './safe-path';

export function Component() {
  const session = useSession().data;
  const signIn = useSignIn();
  const navigate = useNavigate();
  const [search] = useSearchParams();
  const form = useForm({ resolver: zodResolver(SignIn), defaultValues: { email: '', password: '' } });
  const to = safePath(search.get('to'));
  if (session?.setupNeeded) return <Navigate to="/first-owner" replace />;
  if (session?.you && !signIn.isPending) return <Navigate to={to} replace />;
  const { errors } = form.formState;
  return (
    <TitleBlock title={session?.workshop || 'Sign in'}>
      <form
        noValidate
        onSubmit={form.handleSubmit((values) =>
          signIn.mutate(values, { onSuccess: () => void navigate(to, { replace: true }) }),
        )}
      >
        <h1>Sign in</h1>
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
          autoComplete="current-password"
          error={errors.password && 'the password is needed'}
          {...form.register('password')}
        />
        {signIn.isError && <Message kind="fault">{errorText(signIn.error)}</Message>}
        <button type="submit" className="btn ink" disabled={signIn.isPending}>
          Sign in
        </button>
        <p className="note">
          {session?.demo
            ? 'This is the demo workshop: its sign-ins are printed where the server was started.'
            : 'No account? The owner of the workshop sends invitations.'}
        </p>
      </form>
    </TitleBlock>
  );
}
