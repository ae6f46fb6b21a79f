import { queryOptions, useQuery } from '@tanstack/react-query';
import { z } from 'zod';
import { Run, RunSummary } from '../../shared/api/resources';
import { api } from './client';

export const runQueries = {
  all: (armId: string) => ['arms', armId, 'runs'] as const,
  list: (armId: string) =>
    queryOptions({
      queryKey: runQueries.all(armId),
      queryFn: ({ signal }) => api.get(`/arms/${armId}/runs`, z.array(RunSummary), { signal }),
    }),
  detail: (armId: string, runId: string) =>
    queryOptions({
      queryKey: [...runQueries.all(armId), runId] as const,
      queryFn: ({ signal }) => api.get(`/arms/${armId}/runs/${runId}`, Run, { signal }),
    }),
};
export const useRuns = (armId: string) => useQuery(runQueries.list(armId));
export const useRun = (armId: string, runId: string) => useQuery(runQueries.detail(armId, runId));
