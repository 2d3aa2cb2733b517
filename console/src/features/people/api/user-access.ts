import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { answerOf, client } from '../../../api/index.js';

const sessionsKey = (account: string) => ['users', account, 'sessions'] as const;
const at = (account: string) => ({ params: { path: { account } } });

export function useUserSessions(account: string) {
  return useQuery({
    queryKey: sessionsKey(account),
    queryFn: async () => (await answerOf(client.GET('/api/v1/users/{account}/sessions', at(account)))).items,
  });
}

/** Ends one session of the account; all where no id is given. */
export function useEndUserSessions(account: string) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (sessionId: string | null) =>
      sessionId === null
        ? answerOf(client.DELETE('/api/v1/users/{account}/sessions', at(account)))
        : answerOf(
            client.DELETE('/api/v1/users/{account}/sessions/{sessionId}', {
              params: { path: { account, sessionId } },
            }),
          ),
    onSettled: () => queryClient.invalidateQueries({ queryKey: sessionsKey(account) }),
  });
}

export function useResetSecondFactor(account: string) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (body: { reason: string; password?: string }) =>
      answerOf(client.POST('/api/v1/users/{account}/second-factor/reset', { ...at(account), body })),
    onSettled: () => queryClient.invalidateQueries({ queryKey: sessionsKey(account) }),
  });
}
