import { useMutation, useQueryClient } from '@tanstack/react-query';
import { answerOf, client, sessionKey, type Session } from '../../../api/index.js';

interface Credentials {
  account: string;
  password: string;
  code?: string;
}

const signIn = (body: Credentials): Promise<Session> =>
  answerOf(client.POST('/api/v1/auth/sign-in', { body }));

export function useSignIn() {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: signIn,
    onSuccess: (session) => queryClient.setQueryData(sessionKey, session),
  });
}
