import { zodResolver } from '@hookform/resolvers/zod';
import { useForm } from 'react-hook-form';
import { useLocation, useNavigate } from 'react-router-dom';
import { z } from 'zod';
import { NewPassword } from '../../shared/api/resources';
import { useAcceptInvitation, useSession } from '../api/session';
import { Field } from '../components/Field';
import { passwordError, placeErrors } from '../components/form-errors';
import { Message } from '../components/Message';
import { TitleBlock } from '../features/session/TitleBlock';

const Form = z.object({ password: NewPassword });

/** Shorter than any secret of ours: the link was cut on its way. */
const SHORTEST_TOKEN = 20;

/** The secret stands in the address after the #, which no server on the way sees. */
export function Component() {
  const token = useLocation().hash.slice(1);
  const session = useSession().data;
  const accept = useAcceptInvitation();
  const navigate = useNavigate();
  const form = useForm({ resolver: zodResolver(Form), defaultValues: { password: '' } });
  const cut = token.length < SHORTEST_TOKEN;
  const { errors } = form.formState;
  return (
    <TitleBlock
      sheet="Invitation"
      workshop={session?.workshop ?? ''}
      intro="You were invited. Choose a password and you are in."
    >
      <form
        noValidate
        onSubmit={form.handleSubmit(({ password }) =>
          accept.mutate(
            { token, password },
            {
              onSuccess: () => void navigate('/', { replace: true }),
              onError: (error) => placeErrors(form, error),
            },
          ),
        )}
      >
        <h1>Choose a password and join</h1>
        {cut && <Message kind="fault">The link is not complete. Open it again from the mail, whole.</Message>}
        {session?.you && !cut && (
          <Message>
            {session.you.name} is signed in here. Joining signs the invited person in instead.
          </Message>
        )}
        <Field
          label="Password"
          type="password"
          autoComplete="new-password"
          help="At least 10 characters; pasting is fine."
          error={passwordError(errors.password)}
          {...form.register('password')}
        />
        {errors.root?.server && <Message kind="fault">{errors.root.server.message}</Message>}
        <button type="submit" className="btn ink" disabled={accept.isPending || cut}>
          {accept.isPending ? 'Joining…' : 'Join'}
        </button>
      </form>
    </TitleBlock>
  );
}
