import { queryOptions, useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import { type AcceptInvitation, type FirstOwner, SessionInfo, type SignIn } from '../../shared/api/resources';
import { api } from './client';

export const sessionKey = ['session'] as const;
export const sessionQuery = queryOptions({
  queryKey: sessionKey,
  queryFn: ({ signal }) => api.get('/session', SessionInfo, { signal }),
  staleTime: 30_000,
});
export const useSession = () => useQuery(sessionQuery);

function useBegin<Body>(path: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: Body) => api.post(path, body, SessionInfo),
    onSuccess: (session) => {
      // What the person before was shown is not for the next one.
      client.removeQueries({ predicate: ({ queryKey }) => queryKey[0] !== sessionKey[0] });
      client.setQueryData(sessionKey, session);
    },
  });
}
export const useSignIn = () => useBegin<z.input<typeof SignIn>>('/session');
export const useFirstOwner = () => useBegin<z.input<typeof FirstOwner>>('/setup');
export const useAcceptInvitation = () => useBegin<z.input<typeof AcceptInvitation>>('/invitations/accept');

/** Ends this person's sessions on every device. A failure leaves everything as it was, for the screen to say. */
export function useSignOut() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: () => api.delete('/session'),
    onSuccess: () => {
      client.clear();
      location.assign('/sign-in');
    },
  });
}
