import { queryOptions, useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { answerOf, client } from '../../../api/index.js';

const sessionsKey = ['account', 'sessions'] as const;
const factorKey = ['account', 'second-factor'] as const;

export function useReauthenticate() {
  return useMutation({
    mutationFn: (body: { password: string; code?: string }) =>
      answerOf(client.POST('/api/v1/auth/reauthenticate', { body })),
  });
}

export const ownSessionsQuery = () =>
  queryOptions({
    queryKey: sessionsKey,
    queryFn: async () => (await answerOf(client.GET('/api/v1/auth/sessions'))).items,
  });

/** Ends one of one's own sessions; all but this where no id is given. */
export function useEndOwnSessions() {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (sessionId: string | null) =>
      sessionId === null
        ? answerOf(client.DELETE('/api/v1/auth/sessions'))
        : answerOf(client.DELETE('/api/v1/auth/sessions/{sessionId}', { params: { path: { sessionId } } })),
    onSettled: () => queryClient.invalidateQueries({ queryKey: sessionsKey }),
  });
}

export function useChangePassword() {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (body: { password: string; code?: string; newPassword: string }) =>
      answerOf(client.POST('/api/v1/auth/password', { body })),
    onSuccess: () => queryClient.invalidateQueries({ queryKey: sessionsKey }),
  });
}

export function useSecondFactor() {
  return useQuery({
    queryKey: factorKey,
    queryFn: () => answerOf(client.GET('/api/v1/auth/second-factor')),
  });
}

export function useBeginSecondFactor() {
  return useMutation({
    mutationFn: (password: string) =>
      answerOf(client.POST('/api/v1/auth/second-factor', { body: { password } })),
  });
}

export function useConfirmSecondFactor() {
  return useMutation({
    mutationFn: (code: string) =>
      answerOf(client.POST('/api/v1/auth/second-factor/confirm', { body: { code } })),
  });
}

export function useRemoveSecondFactor() {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (body: { password: string; code: string }) =>
      answerOf(client.POST('/api/v1/auth/second-factor/remove', { body })),
    onSuccess: () => queryClient.invalidateQueries({ queryKey: factorKey }),
  });
}

/** Reads the state of the second factor again, e.g. when the recovery codes were put away. */
export function useReloadSecondFactor() {
  const queryClient = useQueryClient();
  return () => void queryClient.invalidateQueries({ queryKey: factorKey });
}
