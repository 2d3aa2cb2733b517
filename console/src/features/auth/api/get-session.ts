import { queryOptions, useQuery } from '@tanstack/react-query';
import { answerOf, asProblem, client, sessionKey, type Session } from '../../../api/index.js';

/** Who is signed in; null where nobody is. */
export async function getSession(): Promise<Session | null> {
  try {
    return await answerOf(client.GET('/api/v1/auth/session'));
  } catch (error) {
    if (asProblem(error).status === 401) return null;
    throw error;
  }
}

export const sessionQuery = () =>
  queryOptions({ queryKey: sessionKey, queryFn: getSession, staleTime: Infinity });

export function useSessionQuery() {
  return useQuery(sessionQuery());
}
