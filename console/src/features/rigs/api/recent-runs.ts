import { queryOptions, useQuery } from '@tanstack/react-query';
import { answerOf, client, type RunSummary } from '../../../api/index.js';

const shownRuns = 6;

/** The last runs of a rig, newest first. */
export const recentRunsQuery = (rigId: string) =>
  queryOptions({
    queryKey: ['runs', 'recent', rigId] as const,
    queryFn: async (): Promise<RunSummary[]> =>
      (await answerOf(client.GET('/api/v1/runs', { params: { query: { rigId, limit: shownRuns } } }))).items,
  });

export function useRecentRuns(rigId: string) {
  return useQuery(recentRunsQuery(rigId));
}
