import { queryOptions, useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { z } from 'zod';
import {
  type CapturePose,
  Pose,
  type PoseChange,
  type PoseFile,
  PoseRevision,
  type TypedPose,
} from '../../shared/api/resources';
import { api } from './client';

export const poseQueries = {
  all: (armId: string) => ['arms', armId, 'poses'] as const,
  list: (armId: string) =>
    queryOptions({
      queryKey: poseQueries.all(armId),
      queryFn: ({ signal }) => api.get(`/arms/${armId}/poses`, z.array(Pose), { signal }),
    }),
  revisions: (armId: string, poseId: string) =>
    queryOptions({
      queryKey: [...poseQueries.all(armId), poseId, 'revisions'] as const,
      queryFn: ({ signal }) =>
        api.get(`/arms/${armId}/poses/${poseId}/revisions`, z.array(PoseRevision), { signal }),
    }),
};
export const usePoses = (armId: string) => useQuery(poseQueries.list(armId));
export const usePoseRevisions = (armId: string, poseId: string) =>
  useQuery(poseQueries.revisions(armId, poseId));

function usePoseChange<Body, Result>(armId: string, change: (body: Body) => Promise<Result>) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: change,
    onSuccess: () => client.invalidateQueries({ queryKey: poseQueries.all(armId) }),
  });
}
const at = (armId: string, poseId: string) => `/arms/${armId}/poses/${poseId}`;

/** Captures where the controller says the arm stands; no numbers travel from here. */
export const useCapturePose = (armId: string) =>
  usePoseChange(armId, (body: z.input<typeof CapturePose>) => api.post(`/arms/${armId}/poses`, body, Pose));
export const useTypedPose = (armId: string) =>
  usePoseChange(armId, (body: z.input<typeof TypedPose>) =>
    api.post(`/arms/${armId}/poses/typed`, body, Pose),
  );
export const useChangePose = (armId: string) =>
  usePoseChange(armId, ({ id, ...change }: { id: string } & z.input<typeof PoseChange>) =>
    api.patch(at(armId, id), change, Pose),
  );
export const useReteachPose = (armId: string) =>
  usePoseChange(armId, (id: string) => api.post(`${at(armId, id)}/reteach`, {}, Pose));
export const useRestorePose = (armId: string) =>
  usePoseChange(armId, ({ id, revision }: { id: string; revision: number }) =>
    api.post(`${at(armId, id)}/restore`, { revision }, Pose),
  );
export const useDeletePose = (armId: string) =>
  usePoseChange(armId, (id: string) => api.delete(at(armId, id)));
export const useUndeletePose = (armId: string) =>
  usePoseChange(armId, (id: string) => api.post(`${at(armId, id)}/undelete`, {}, Pose));
export const useImportPoses = (armId: string) =>
  usePoseChange(armId, (file: PoseFile) => api.post(`/arms/${armId}/poses/import`, file, z.array(Pose)));
