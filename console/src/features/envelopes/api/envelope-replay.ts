import { useMutation, useQuery } from '@tanstack/react-query';
import type { EnvelopeContent } from '@cresthold/shared';
import { answerOf, client, type EnvelopeReplay, type RunSummary } from '../../../api/index.js';

/** Runs of a rig that can be chosen for a replay: the last ones that have ended. */
const offeredRuns = 20;

export interface ReplayOrder {
  content: EnvelopeContent;
  /** Null for the last ones. */
  runIds: string[] | null;
  lastRuns: number;
}

/** Replays a draft on recorded runs; changes nothing. */
export function useReplay(rigId: string) {
  return useMutation({
    mutationFn: ({ content, runIds, lastRuns }: ReplayOrder): Promise<EnvelopeReplay> => {
      const params = { path: { rigId } };
      const body = runIds === null ? { content, lastRuns } : { content, lastRuns, runIds };
      return answerOf(client.POST('/api/v1/rigs/{rigId}/envelopes/replay', { params, body }));
    },
  });
}

export function useReplayableRuns(rigId: string, isAsked: boolean) {
  return useQuery({
    queryKey: ['runs', 'replayable', rigId],
    enabled: isAsked,
    queryFn: async (): Promise<RunSummary[]> => {
      const query = { rigId, limit: offeredRuns };
      const { items } = await answerOf(client.GET('/api/v1/runs', { params: { query } }));
      return items.filter(({ endedAt }) => endedAt !== null);
    },
  });
}
