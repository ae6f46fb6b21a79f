import { useInfiniteQuery, useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { z } from 'zod';
import {
  AuditEntry,
  Invitation,
  Mail,
  type NewInvitation,
  Person,
  type PersonChange,
} from '../../shared/api/resources';
import { api } from './client';
import { sessionKey } from './session';

const keys = {
  people: ['people'],
  invitations: ['invitations'],
  outbox: ['outbox'],
  audit: ['audit'],
} as const;

export const usePeople = () =>
  useQuery({
    queryKey: keys.people,
    queryFn: ({ signal }) => api.get('/people', z.array(Person), { signal }),
  });
export const useInvitations = (enabled: boolean) =>
  useQuery({
    queryKey: keys.invitations,
    queryFn: ({ signal }) => api.get('/invitations', z.array(Invitation), { signal }),
    enabled,
  });
export const useOutbox = () =>
  useQuery({ queryKey: keys.outbox, queryFn: ({ signal }) => api.get('/outbox', z.array(Mail), { signal }) });

/** A hundred entries at a time, newest first. */
export const useAudit = () =>
  useInfiniteQuery({
    queryKey: keys.audit,
    initialPageParam: 0,
    queryFn: ({ pageParam, signal }) =>
      api.get(`/audit${pageParam ? `?before=${pageParam}` : ''}`, z.array(AuditEntry), { signal }),
    getNextPageParam: (page) => (page.length === 100 ? page.at(-1)?.seq : undefined),
  });

function useTeamChange<Body, Result>(change: (body: Body) => Promise<Result>) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: change,
    onSuccess: async () => {
      for (const queryKey of Object.values(keys)) await client.invalidateQueries({ queryKey: [...queryKey] });
      await client.invalidateQueries({ queryKey: sessionKey });
    },
  });
}
export const useChangePerson = () =>
  useTeamChange(({ id, ...change }: { id: string } & z.input<typeof PersonChange>) =>
    api.patch(`/people/${id}`, change, Person),
  );
export const useInvite = () =>
  useTeamChange((body: z.input<typeof NewInvitation>) => api.post('/invitations', body, Invitation));
export const useWithdrawInvitation = () => useTeamChange((id: string) => api.delete(`/invitations/${id}`));
export const useRenameWorkshop = () =>
  useTeamChange((name: string) => api.patch('/workshop', { name }, z.object({ name: z.string() })));
