import { queryOptions, useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import type { Role } from '@cresthold/shared';
import { answerOf, client, type User } from '../../../api/index.js';

const usersKey = ['users'] as const;

export const usersQuery = () =>
  queryOptions({
    queryKey: usersKey,
    queryFn: async (): Promise<User[]> =>
      (await answerOf(client.GET('/api/v1/users', { params: { query: { limit: 200 } } }))).items,
  });

export function useUsers() {
  return useQuery(usersQuery());
}

function useUserChange<Input>(change: (input: Input) => Promise<User>) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: change,
    onSuccess: () => queryClient.invalidateQueries({ queryKey: usersKey }),
  });
}

export interface NewUser {
  account: string;
  title: string;
  roles: Role[];
  password: string;
}

export function useAddUser() {
  return useUserChange((body: NewUser) => answerOf(client.POST('/api/v1/users', { body })));
}

export interface UserChange {
  account: string;
  body: { roles?: Role[]; rigLimits?: User['rigLimits']; isEnabled?: boolean; password?: string };
}

export function useChangeUser() {
  return useUserChange(({ account, body }: UserChange) =>
    answerOf(client.PATCH('/api/v1/users/{account}', { params: { path: { account } }, body })),
  );
}
