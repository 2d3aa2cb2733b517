import { useMutation, useQueryClient } from '@tanstack/react-query';
import { answerOf, client, sessionKey } from '../../../api/index.js';

export function useSignOut() {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: () => answerOf(client.POST('/api/v1/auth/sign-out')),
    onSuccess: () => {
      queryClient.clear();
      queryClient.setQueryData(sessionKey, null);
    },
  });
}
