import { QueryClient } from '@tanstack/react-query';
import { whenSignedOut } from './client';
import { sessionKey } from './session';

/**
 * For things at rest. Live arm state has its own store, and no motion order ever travels as a mutation:
 * a paused mutation could move the arm minutes later.
 */
export const queryClient = new QueryClient({
  defaultOptions: {
    queries: { refetchOnWindowFocus: false, retry: 1, staleTime: 5_000, networkMode: 'always' },
    mutations: { retry: false, networkMode: 'always' },
  },
});
whenSignedOut(() => void queryClient.invalidateQueries({ queryKey: sessionKey }));
