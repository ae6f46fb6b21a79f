import { Navigate, Outlet, useLocation } from 'react-router-dom';
import { errorText } from '../api/client';
import { useSession } from '../api/session';
import { Message } from '../components/Message';

/** Strangers go to sign in and come back to where they wanted to be; an empty workshop begins with its owner. */
export function RequireSession() {
  const session = useSession();
  const { pathname, search } = useLocation();
  if (session.isPending) return <p className="paper">Opening Elbowroom…</p>;
  // Only when nothing is known: a server that is away for a moment must not take Stop off the page.
  if (!session.data)
    return (
      <main className="paper">
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
      </main>
    );
  if (session.data.setupNeeded) return <Navigate to="/first-owner" replace />;
  if (!session.data.you)
    return <Navigate to={`/sign-in?to=${encodeURIComponent(pathname + search)}`} replace />;
  return <Outlet />;
}
