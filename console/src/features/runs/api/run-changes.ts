import { useMutation, useQueryClient } from '@tanstack/react-query';
import { answerOf, client, type RunSummary } from '../../../api/index.js';
import { runKeys } from './run-queries.js';

/** Steers a run; the answer is the run as it then is. */
function useRunChange<Input>(id: string, change: (input: Input) => Promise<RunSummary>) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: change,
    onSuccess: (run) => queryClient.setQueryData(runKeys.one(id), run),
  });
}

const at = (id: string) => ({ params: { path: { id } } });

export function usePauseRun(id: string) {
  return useRunChange(id, (reason: string) =>
    answerOf(client.POST('/api/v1/runs/{id}/pause', { ...at(id), body: { reason } })),
  );
}

export function useResumeRun(id: string) {
  return useRunChange(id, () => answerOf(client.POST('/api/v1/runs/{id}/resume', at(id))));
}

export function useStopRun(id: string) {
  return useRunChange(id, (reason: string) =>
    answerOf(client.POST('/api/v1/runs/{id}/stop', { ...at(id), body: { reason } })),
  );
}
