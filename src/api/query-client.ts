import { QueryClient } from '@tanstack/react-query';
import { ApiError, whenSignedOut } from './client';
import { sessionKey } from './session';

/** Once more when the server was away or failed; what it refused it would refuse again. */
const retry = (failures: number, error: Error) =>
  failures < 1 && (!(error instanceof ApiError) || error.status === 0 || error.status >= 500);

/**
 * For things at rest. Live arm state has its own store, and no motion order ever travels as a mutation:
 * a paused mutation could move the arm minutes later.
 */
export const queryClient = new QueryClient({
  defaultOptions: {
    queries: { refetchOnWindowFocus: false, retry, staleTime: 5_000, networkMode: 'always' },
    mutations: { retry: false, networkMode: 'always' },
  },
});
whenSignedOut(() => void queryClient.invalidateQueries({ queryKey: sessionKey }));
