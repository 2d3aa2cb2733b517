import { MutationCache, QueryCache, QueryClient } from '@tanstack/react-query';
import { asProblem } from './problem.js';

/** Key of the session query; kept here so that a lost session can be dropped from anywhere. */
export const sessionKey = ['session'] as const;

/** The cache of documents. Any answer "sign in first" empties the session, which leads to the sign-in page. */
export function createQueryClient(): QueryClient {
  const onError = (error: Error) => {
    if (asProblem(error).code === 'auth.required') queryClient.setQueryData(sessionKey, null);
  };
  const queryClient = new QueryClient({
    queryCache: new QueryCache({ onError }),
    mutationCache: new MutationCache({ onError }),
    defaultOptions: {
      queries: {
        staleTime: 10_000,
        retry: (failures, error) => asProblem(error).code === 'network' && failures < 2,
      },
      mutations: { retry: false },
    },
  });
  return queryClient;
}
