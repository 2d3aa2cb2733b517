import { queryOptions, useQuery } from '@tanstack/react-query';
import { answerOf, client, type RigDocument } from '../../../api/index.js';

export const rigKeys = {
  all: ['rigs'] as const,
  one: (rigId: string) => ['rigs', rigId] as const,
};

/** Every rig. Its status here is only a beginning: the live link brings the present one. */
export const rigsQuery = () =>
  queryOptions({
    queryKey: rigKeys.all,
    queryFn: async (): Promise<RigDocument[]> =>
      (await answerOf(client.GET('/api/v1/rigs', { params: { query: { limit: 200 } } }))).items,
  });

export function useRigs() {
  return useQuery(rigsQuery());
}

export const rigQuery = (rigId: string) =>
  queryOptions({
    queryKey: rigKeys.one(rigId),
    queryFn: (): Promise<RigDocument> =>
      answerOf(client.GET('/api/v1/rigs/{rigId}', { params: { path: { rigId } } })),
  });

export function useRig(rigId: string) {
  return useQuery(rigQuery(rigId));
}
