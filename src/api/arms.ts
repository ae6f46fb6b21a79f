import { queryOptions, useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { z } from 'zod';
import { Arm, type ArmModelChange, ArmRevision, ArmSummary, type NewArm } from '../../shared/api/resources';
import { ArmModel } from '../../shared/arm/model';
import { api } from './client';

const StartingPoint = z.object({ key: z.string(), name: z.string(), note: z.string() });

export const armQueries = {
  all: () => ['arms'] as const,
  list: () =>
    queryOptions({
      queryKey: armQueries.all(),
      queryFn: ({ signal }) => api.get('/arms', z.array(ArmSummary), { signal }),
    }),
  detail: (armId: string) =>
    queryOptions({
      queryKey: [...armQueries.all(), armId] as const,
      queryFn: ({ signal }) => api.get(`/arms/${armId}`, Arm, { signal }),
      staleTime: 60_000,
    }),
  revisions: (armId: string) =>
    queryOptions({
      queryKey: [...armQueries.all(), armId, 'revisions'] as const,
      queryFn: ({ signal }) => api.get(`/arms/${armId}/revisions`, z.array(ArmRevision), { signal }),
    }),
};

export const useArms = () => useQuery({ ...armQueries.list(), refetchInterval: 4_000 });
export const useArm = (armId: string) => useQuery(armQueries.detail(armId));
export const useArmRevisions = (armId: string) => useQuery(armQueries.revisions(armId));
export const useStartingPoints = (enabled: boolean) =>
  useQuery({
    queryKey: ['starting-points'],
    queryFn: ({ signal }) => api.get('/arms/starting-points', z.array(StartingPoint), { signal }),
    enabled,
  });

export const fetchArmRevision = (armId: string, revision: number) =>
  api.get(`/arms/${armId}/revisions/${revision}`, z.object({ revision: z.int(), model: ArmModel }));

function useArmChange<Body, Result>(change: (body: Body) => Promise<Result>) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: change,
    onSuccess: () => client.invalidateQueries({ queryKey: armQueries.all() }),
  });
}
export const useCreateArm = () =>
  useArmChange((body: z.input<typeof NewArm>) => api.post('/arms', body, Arm));
export const useSaveArmModel = (armId: string) =>
  useArmChange((body: z.input<typeof ArmModelChange>) => api.put(`/arms/${armId}/model`, body, Arm));
export const useDeleteArm = () => useArmChange((armId: string) => api.delete(`/arms/${armId}`));
export const useArmSettings = () =>
  useArmChange(({ armId, unattended }: { armId: string; unattended: boolean }) =>
    api.patch(`/arms/${armId}/settings`, { unattended }, Arm),
  );
