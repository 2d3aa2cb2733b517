import { useMutation, useQueryClient } from '@tanstack/react-query';
import type { ExperimentContent } from '@cresthold/shared';
import {
  answerOf,
  client,
  type ExperimentSummary,
  type ExperimentVersion,
  type RunSummary,
} from '../../../api/index.js';
import { contentBody } from './content-body.js';
import { experimentKeys } from './experiment-queries.js';

interface NewExperiment {
  rigId: string;
  content: ExperimentContent;
}

export function useCreateExperiment() {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: ({ rigId, content }: NewExperiment): Promise<ExperimentSummary> =>
      answerOf(client.POST('/api/v1/experiments', { body: { rigId, content: contentBody(content) } })),
    onSuccess: () => queryClient.invalidateQueries({ queryKey: experimentKeys.all }),
  });
}

interface NewVersion {
  basedOn: number;
  note: string;
  content: ExperimentContent;
}

/** Saves a new immutable version; refused with `request.precondition` where somebody saved one since. */
export function useSaveVersion(id: string) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: ({ content, ...version }: NewVersion): Promise<ExperimentVersion> => {
      const body = { ...version, content: contentBody(content) };
      return answerOf(client.POST('/api/v1/experiments/{id}/versions', { params: { path: { id } }, body }));
    },
    onSettled: () => queryClient.invalidateQueries({ queryKey: experimentKeys.all }),
  });
}

interface Start {
  experimentId: string;
  version: number;
  /** The same key starts one run only, also where the first answer was lost. */
  key: string;
}

export function useStartRun() {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: ({ key, ...body }: Start): Promise<RunSummary> =>
      answerOf(client.POST('/api/v1/runs', { params: { header: { 'Idempotency-Key': key } }, body })),
    onSuccess: () => queryClient.invalidateQueries({ queryKey: ['runs'] }),
  });
}
