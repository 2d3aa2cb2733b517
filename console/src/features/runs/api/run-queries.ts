import { keepPreviousData, useQuery } from '@tanstack/react-query';
import { endedStatuses, type RunColumn, type RunEvent, type RunStatus } from '@cresthold/shared';
import { answerOf, client, type RunSummary } from '../../../api/index.js';

export const runKeys = {
  all: ['runs'] as const,
  list: (rigId: string | null) => ['runs', 'list', rigId] as const,
  one: (id: string) => ['runs', 'one', id] as const,
  columns: (id: string) => ['runs', 'one', id, 'columns'] as const,
  events: (id: string) => ['runs', 'one', id, 'events'] as const,
  samples: (id: string, asked: SamplesAsked) => ['runs', 'one', id, 'samples', asked] as const,
};

export const isEnded = (status: RunStatus): boolean => endedStatuses.includes(status);

/** Runs of one rig, or of every rig, newest first. */
export function useRuns(rigId: string | null) {
  return useQuery({
    queryKey: runKeys.list(rigId),
    queryFn: async (): Promise<RunSummary[]> => {
      const query = { limit: 100, ...(rigId === null ? {} : { rigId }) };
      return (await answerOf(client.GET('/api/v1/runs', { params: { query } }))).items;
    },
  });
}

export function useRun(id: string) {
  return useQuery({
    queryKey: runKeys.one(id),
    queryFn: (): Promise<RunSummary> =>
      answerOf(client.GET('/api/v1/runs/{id}', { params: { path: { id } } })),
    // The live link says when it changes; this is for the case that a message was missed.
    refetchInterval: ({ state }) => (state.data && isEnded(state.data.status) ? false : 5000),
  });
}

export function useRunColumns(id: string) {
  return useQuery({
    queryKey: runKeys.columns(id),
    queryFn: (): Promise<RunColumn[]> =>
      answerOf(client.GET('/api/v1/runs/{id}/columns', { params: { path: { id } } })),
    // The run file comes into being a moment after the run.
    retry: 5,
    retryDelay: 400,
  });
}

export function useRunEventList(id: string) {
  return useQuery({
    queryKey: runKeys.events(id),
    queryFn: (): Promise<RunEvent[]> =>
      answerOf(client.GET('/api/v1/runs/{id}/events', { params: { path: { id } } })),
    retry: 5,
    retryDelay: 400,
  });
}

export interface SamplesAsked {
  columns: readonly string[];
  /** Time since the run began, s; null from its beginning. */
  fromS: number | null;
  points: number;
}

/** Samples of a column list over a span, at most at the given number of points; read anew while the run goes on. */
export function useRunSamples(id: string, asked: SamplesAsked, isLive: boolean) {
  return useQuery({
    queryKey: runKeys.samples(id, asked),
    enabled: asked.columns.length > 0,
    placeholderData: keepPreviousData,
    refetchInterval: isLive ? 1500 : false,
    retry: 5,
    retryDelay: 400,
    queryFn: ({ signal }) => {
      const query = {
        columns: asked.columns.join(','),
        points: asked.points,
        ...(asked.fromS === null ? {} : { fromS: asked.fromS }),
      };
      return answerOf(client.GET('/api/v1/runs/{id}/samples', { params: { path: { id }, query }, signal }));
    },
  });
}

export type RunSamples = NonNullable<ReturnType<typeof useRunSamples>['data']>;
