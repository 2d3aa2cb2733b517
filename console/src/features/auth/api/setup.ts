import { queryOptions, useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { answerOf, client } from '../../../api/index.js';

interface FirstAdministrator {
  code: string;
  account: string;
  title: string;
  password: string;
}

const setupKey = ['setup'] as const;

/** Whether the first administrator is still to be made. */
export const setupQuery = () =>
  queryOptions({
    queryKey: setupKey,
    queryFn: () => answerOf(client.GET('/api/v1/setup')),
    staleTime: Infinity,
  });

export function useSetupQuery() {
  return useQuery(setupQuery());
}

export function useMakeFirstAdministrator() {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (body: FirstAdministrator) => answerOf(client.POST('/api/v1/setup', { body })),
    onSuccess: () => queryClient.setQueryData(setupKey, { isNeeded: false }),
  });
}
