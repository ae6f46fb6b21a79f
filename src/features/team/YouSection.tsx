import type { Person } from '../../../shared/api/resources';
import { errorText } from '../../api/client';
import { useSignOut } from '../../api/session';
import { Message } from '../../components/Message';
import { ROLE_DOES } from './role-rules';

/** Who you are here, and leaving on every device at once. */
export function YouSection({ you }: { you: Person }) {
  const signOut = useSignOut();
  return (
    <section className="stack" aria-labelledby="settings-you">
      <h2 className="h2" id="settings-you">
        You
      </h2>
      <p>
        <b>{you.name}</b>, {you.email}, {you.role}: {ROLE_DOES[you.role]}.
      </p>
      <p className="line">
        <button type="button" className="btn" disabled={signOut.isPending} onClick={() => signOut.mutate()}>
          Sign out everywhere
        </button>
        <span className="small quiet">
          Ends your sessions on every device. An arm you have control of stops.
        </span>
      </p>
      {signOut.isError && <Message kind="fault">{errorText(signOut.error)}</Message>}
    </section>
  );
}
