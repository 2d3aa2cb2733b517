import { queryOptions, useQuery } from '@tanstack/react-query';
import { answerOf, client, type AdapterDocument } from '../../../api/index.js';

/** Every adapter of the server, the broken plug-ins as well; they change only when it is started again. */
export const adaptersQuery = () =>
  queryOptions({
    queryKey: ['adapters'] as const,
    queryFn: async (): Promise<AdapterDocument[]> => (await answerOf(client.GET('/api/v1/adapters'))).items,
    staleTime: 60_000,
  });

export function useAdapters() {
  return useQuery(adaptersQuery());
}
