import { errorText } from '../api/client';
import { Message } from './Message';

/**
 * What stands where a list will be, or above it: still being fetched, failed (with another try), nothing there.
 * A list that is there stays while it is fetched again; a failure then says that it is old.
 */
export function QueryState({
  query,
  waiting,
  empty,
}: {
  query: {
    isPending: boolean;
    isError: boolean;
    error: unknown;
    data?: unknown;
    refetch: () => unknown;
  };
  waiting: string;
  /** What to say when the list has come and has nothing in it; null while it has. */
  empty: string | null;
}) {
  if (query.isError)
    return (
      <Message
        kind="fault"
        action={
          <button type="button" className="btn sm" onClick={() => void query.refetch()}>
            Try again
          </button>
        }
      >
        {errorText(query.error)}
        {query.data !== undefined && ' What is shown is from before.'}
      </Message>
    );
  if (query.isPending)
    return (
      <p className="empty quiet" role="status">
        {waiting}
      </p>
    );
  return empty === null ? null : <p className="empty quiet">{empty}</p>;
}
