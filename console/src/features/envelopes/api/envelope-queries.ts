import { queryOptions, useQuery } from '@tanstack/react-query';
import { answerOf, client, type EnvelopeDocument } from '../../../api/index.js';

export const envelopeKeys = { ofRig: (rigId: string) => ['envelopes', rigId] as const };

/** Every version of a rig's envelope, newest first. */
export const envelopesQuery = (rigId: string) =>
  queryOptions({
    queryKey: envelopeKeys.ofRig(rigId),
    // A rig that is not made yet has none.
    enabled: rigId !== '',
    queryFn: async (): Promise<EnvelopeDocument[]> => {
      const params = { path: { rigId }, query: { limit: 200 } };
      return (await answerOf(client.GET('/api/v1/rigs/{rigId}/envelopes', { params }))).items;
    },
  });

export function useEnvelopes(rigId: string) {
  return useQuery(envelopesQuery(rigId));
}

/** The approved envelope of a rig; undefined where none is in force or it is not loaded yet. */
export function useEnvelopeInForce(rigId: string): EnvelopeDocument | undefined {
  return useEnvelopes(rigId).data?.find((envelope) => envelope.status === 'in-force');
}
