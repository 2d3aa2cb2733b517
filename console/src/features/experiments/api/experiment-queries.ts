import { keepPreviousData, queryOptions, useQuery } from '@tanstack/react-query';
import type { ExperimentContent, PreflightFault } from '@cresthold/shared';
import { answerOf, client, type ExperimentSummary, type ExperimentVersion } from '../../../api/index.js';
import { contentBody } from './content-body.js';

export const experimentKeys = {
  all: ['experiments'] as const,
  list: (rigId: string | null) => ['experiments', 'list', rigId] as const,
  one: (id: string) => ['experiments', id] as const,
  versions: (id: string) => ['experiments', id, 'versions'] as const,
  version: (id: string, version: number) => ['experiments', id, 'versions', version] as const,
};

/** Experiments of one rig, or of every rig where none is named. */
export const experimentsQuery = (rigId: string | null) =>
  queryOptions({
    queryKey: experimentKeys.list(rigId),
    queryFn: async (): Promise<ExperimentSummary[]> => {
      const query = { limit: 200, ...(rigId === null ? {} : { rigId }) };
      return (await answerOf(client.GET('/api/v1/experiments', { params: { query } }))).items;
    },
  });

export function useExperiments(rigId: string | null) {
  return useQuery(experimentsQuery(rigId));
}

export function useExperiment(id: string) {
  return useQuery({
    queryKey: experimentKeys.one(id),
    queryFn: (): Promise<ExperimentSummary> =>
      answerOf(client.GET('/api/v1/experiments/{id}', { params: { path: { id } } })),
  });
}

export function useExperimentVersions(id: string) {
  return useQuery({
    queryKey: experimentKeys.versions(id),
    queryFn: async (): Promise<ExperimentVersion[]> => {
      const params = { path: { id }, query: { limit: 200 } };
      return (await answerOf(client.GET('/api/v1/experiments/{id}/versions', { params }))).items;
    },
  });
}

/** One immutable version. */
export function useExperimentVersion(id: string, version: number) {
  return useQuery({
    queryKey: experimentKeys.version(id, version),
    staleTime: Infinity,
    queryFn: (): Promise<ExperimentVersion> =>
      answerOf(
        client.GET('/api/v1/experiments/{id}/versions/{version}', {
          params: { path: { id, version: version } },
        }),
      ),
  });
}

/** What preflight finds in an experiment that need not be saved yet, against the envelope in force. */
export function usePreflight(rigId: string, content: ExperimentContent) {
  return useQuery({
    queryKey: ['preflight', rigId, content] as const,
    placeholderData: keepPreviousData,
    gcTime: 10_000,
    queryFn: async ({ signal }): Promise<PreflightFault[]> => {
      const body = { rigId, content: contentBody(content) };
      const call = client.POST('/api/v1/experiments/preflight', { body, signal });
      return (await answerOf(call)).faults;
    },
  });
}
