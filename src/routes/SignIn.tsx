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
  const session = useSession();
  const signIn = useSignIn();
  const navigate = useNavigate();
  const [search] = useSearchParams();
  const form = useForm({ resolver: zodResolver(SignIn), defaultValues: { email: '', password: '' } });
  const to = safePath(search.get('to'));
  if (session.data?.setupNeeded) return <Navigate to="/first-owner" replace />;
  if (session.data?.you && !signIn.isPending) return <Navigate to={to} replace />;
  const { errors } = form.formState;
  return (
    <TitleBlock
      sheet="Sign in"
      workshop={session.data?.workshop ?? ''}
      intro="Sign in so that everyone can see who is moving what."
    >
      <form
        noValidate
        onSubmit={form.handleSubmit((values) =>
          signIn.mutate(values, {
            onSuccess: () => void navigate(to, { replace: true }),
            onError: () => form.setFocus('password', { shouldSelect: true }),
          }),
        )}
      >
        <h1 className="vh">Sign in</h1>
        <Field
          label="E-mail"
          type="email"
          autoComplete="username"
          error={errors.email && 'Type your e-mail address, like ines@tidemill.example.'}
          {...form.register('email')}
        />
        <Field
          label="Password"
          type="password"
          autoComplete="current-password"
          error={errors.password && 'Type your password.'}
          {...form.register('password')}
        />
        {signIn.isError && <Message kind="fault">{errorText(signIn.error)}</Message>}
        {session.isError && !signIn.isError && (
          <Message
            kind="fault"
            action={
              <button type="button" className="btn sm" onClick={() => void session.refetch()}>
                Try again
              </button>
            }
          >
            {errorText(session.error)}
          </Message>
        )}
        <button type="submit" className="btn ink" disabled={signIn.isPending}>
          {signIn.isPending ? 'Signing in…' : 'Sign in'}
        </button>
        <p className="small quiet">
          {session.data?.demo
            ? 'A demo workshop: its sign-ins are printed in the terminal where the server was started.'
            : 'New to the team? The owner of the workshop invites people.'}
        </p>
      </form>
    </TitleBlock>
  );
}
