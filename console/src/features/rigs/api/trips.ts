import { queryOptions, useQuery } from '@tanstack/react-query';
import { answerOf, client, type TripDocument, type TripSummary } from '../../../api/index.js';

const shownTrips = 6;
/** While the rig is on its way to rest, ms. */
const lookAgainEveryMs = 2000;

/** The last trips of a rig, newest first. @param latchedAt of the trip that is latched now, so that a new one is looked up */
export const tripsQuery = (rigId: string, latchedAt: string | null) =>
  queryOptions({
    queryKey: ['rigs', rigId, 'trips', latchedAt] as const,
    queryFn: async (): Promise<TripSummary[]> => {
      const params = { path: { rigId }, query: { limit: shownTrips } };
      return (await answerOf(client.GET('/api/v1/rigs/{rigId}/trips', { params }))).items;
    },
    refetchInterval: ({ state }) => {
      const newest = state.data?.[0];
      return newest?.resetAt === null && newest.timesToRest === null ? lookAgainEveryMs : false;
    },
  });

export function useTrips(rigId: string, latchedAt: string | null) {
  return useQuery(tripsQuery(rigId, latchedAt));
}

/** One trip with its trajectory; looked up once that is there. */
export function useTrip(trip: Pick<TripSummary, 'id' | 'rigId' | 'timesToRest'> | undefined) {
  const { id: tripId = '', rigId = '' } = trip ?? {};
  return useQuery({
    queryKey: ['rigs', rigId, 'trip', tripId] as const,
    queryFn: (): Promise<TripDocument> =>
      answerOf(client.GET('/api/v1/rigs/{rigId}/trips/{tripId}', { params: { path: { rigId, tripId } } })),
    enabled: trip !== undefined && trip.timesToRest !== null,
  });
}
