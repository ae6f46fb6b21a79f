import { queryOptions, useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { z } from 'zod';
import {
  Rehearsal,
  Sequence,
  type SequenceChange,
  type SequenceDraft,
  SequenceSummary,
  SequenceVersion,
} from '../../shared/api/resources';
import { api } from './client';

const at = (armId: string, sequenceId: string) => `/arms/${armId}/sequences/${sequenceId}`;

export const sequenceQueries = {
  all: (armId: string) => ['arms', armId, 'sequences'] as const,
  list: (armId: string) =>
    queryOptions({
      queryKey: sequenceQueries.all(armId),
      queryFn: ({ signal }) => api.get(`/arms/${armId}/sequences`, z.array(SequenceSummary), { signal }),
    }),
  detail: (armId: string, sequenceId: string, version?: number) =>
    queryOptions({
      queryKey: [...sequenceQueries.all(armId), sequenceId, version ?? 'newest'] as const,
      queryFn: ({ signal }) =>
        api.get(`${at(armId, sequenceId)}${version ? `?version=${version}` : ''}`, Sequence, { signal }),
    }),
  versions: (armId: string, sequenceId: string) =>
    queryOptions({
      queryKey: [...sequenceQueries.all(armId), sequenceId, 'versions'] as const,
      queryFn: ({ signal }) =>
        api.get(`${at(armId, sequenceId)}/versions`, z.array(SequenceVersion), { signal }),
    }),
  /** Computes and keeps nothing, so it is asked like a question although it travels as a POST. */
  rehearsal: (armId: string, sequenceId: string, version: number, ceiling = 1) =>
    queryOptions({
      queryKey: [...sequenceQueries.all(armId), sequenceId, 'rehearsal', version, ceiling] as const,
      queryFn: () => api.post(`${at(armId, sequenceId)}/rehearse`, { version, ceiling }, Rehearsal),
    }),
};
export const useSequences = (armId: string) => useQuery(sequenceQueries.list(armId));
export const useSequence = (armId: string, sequenceId: string, version?: number) =>
  useQuery(sequenceQueries.detail(armId, sequenceId, version));
export const useSequenceVersions = (armId: string, sequenceId: string) =>
  useQuery(sequenceQueries.versions(armId, sequenceId));
export const useRehearsal = (
  armId: string,
  sequenceId: string,
  version: number,
  enabled: boolean,
  ceiling?: number,
) => useQuery({ ...sequenceQueries.rehearsal(armId, sequenceId, version, ceiling), enabled });

function useSequenceMutation<Body, Result>(armId: string, change: (body: Body) => Promise<Result>) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: change,
    onSuccess: () => client.invalidateQueries({ queryKey: sequenceQueries.all(armId) }),
  });
}
export const useCreateSequence = (armId: string) =>
  useSequenceMutation(armId, (draft: z.input<typeof SequenceDraft>) =>
    api.post(`/arms/${armId}/sequences`, draft, Sequence),
  );
/** The saved version is shown at once; a slower answer with an older one never takes its place. */
export function useSaveSequence(armId: string, sequenceId: string) {
  const client = useQueryClient();
  const { queryKey } = sequenceQueries.detail(armId, sequenceId);
  return useMutation({
    mutationFn: (change: z.input<typeof SequenceChange>) => api.put(at(armId, sequenceId), change, Sequence),
    onSuccess: async (saved) => {
      await client.cancelQueries({ queryKey });
      client.setQueryData(queryKey, (old) => (old && old.version > saved.version ? old : saved));
      await client.invalidateQueries({ queryKey: sequenceQueries.all(armId) });
    },
    onError: () => client.invalidateQueries({ queryKey: sequenceQueries.all(armId) }),
  });
}
export const useDeleteSequence = (armId: string) =>
  useSequenceMutation(armId, (sequenceId: string) => api.delete(at(armId, sequenceId)));
export const useApproveSequence = (armId: string, sequenceId: string) =>
  useSequenceMutation(armId, (version: number) =>
    api.post(`${at(armId, sequenceId)}/approve`, { version }, Sequence),
  );
export const useWithdrawApproval = (armId: string, sequenceId: string) =>
  useSequenceMutation(armId, () => api.post(`${at(armId, sequenceId)}/withdraw`, {}, Sequence));
