import { queryOptions, useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { answerOf, client, type Lockout } from '../../../api/index.js';

/** Several people may hold a rig while its status stays the same, ms. */
const lookAgainEveryMs = 15_000;

export const lockoutKey = (rigId: string) => ['rigs', rigId, 'lockouts'] as const;

/** Who holds the rig, oldest first. */
export const lockoutsQuery = (rigId: string) =>
  queryOptions({
    queryKey: lockoutKey(rigId),
    queryFn: (): Promise<Lockout[]> =>
      answerOf(client.GET('/api/v1/rigs/{rigId}/lockouts', { params: { path: { rigId } } })),
    refetchInterval: lookAgainEveryMs,
  });

export function useLockouts(rigId: string, isLockedOut: boolean) {
  return useQuery({ ...lockoutsQuery(rigId), enabled: isLockedOut });
}

function useLockoutChange<Input>(rigId: string, change: (input: Input) => Promise<unknown>) {
  const queries = useQueryClient();
  return useMutation({
    mutationFn: change,
    onSettled: () => queries.invalidateQueries({ queryKey: lockoutKey(rigId) }),
  });
}

export function useLockOut(rigId: string) {
  return useLockoutChange(rigId, (body: { reason: string; mayLift: string[] }) =>
    answerOf(client.POST('/api/v1/rigs/{rigId}/lockouts', { params: { path: { rigId } }, body })),
  );
}

export function useLiftLockout(rigId: string) {
  return useLockoutChange(rigId, ({ lockoutId, reason }: { lockoutId: string; reason: string }) => {
    const params = { path: { rigId, lockoutId } };
    return answerOf(
      client.POST('/api/v1/rigs/{rigId}/lockouts/{lockoutId}/lift', { params, body: { reason } }),
    );
  });
}
