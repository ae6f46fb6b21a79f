import { zodResolver } from '@hookform/resolvers/zod';
import { useForm } from 'react-hook-form';
import { useNavigate } from 'react-router-dom';
import { z } from 'zod';
import { NewPassword } from '../../shared/api/resources';
import { errorText } from '../api/client';
import { useAcceptInvitation } from '../api/session';
import { Field } from '../components/Field';
import { Message } from '../components/Message';
import { TitleBlock } from '../features/session/TitleBlock';

const Form = z.object({ password: NewPassword });

/** The secret stands in the address after the #, which no server on the way sees. */
export function Component() {
  const token = window.location.hash.slice(1);
  const accept = useAcceptInvitation();
  const navigate = useNavigate();
  const form = useForm({ resolver: zodResolver(Form), defaultValues: { password: '' } });
  return (
    <TitleBlock title="Invitation">
      <form
        noValidate
        onSubmit={form.handleSubmit(({ password }) =>
          accept.mutate({ token, password }, { onSuccess: () => void navigate('/', { replace: true }) }),
        )}
      >
        <h1>Choose a password and join</h1>
        {token.length < 20 && (
          <Message kind="fault">The link is not complete. Open it again from the mail.</Message>
        )}
        <Field
          label="Password"
          type="password"
          autoComplete="new-password"
          help="At least 10 characters; pasting is fine."
          error={form.formState.errors.password?.message}
          {...form.register('password')}
        />
        {accept.isError && <Message kind="fault">{errorText(accept.error)}</Message>}
        <button type="submit" className="btn ink" disabled={accept.isPending || token.length < 20}>
          Join
        </button>
      </form>
    </TitleBlock>
  );
}
