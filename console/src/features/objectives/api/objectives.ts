import { queryOptions, useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import type { ObjectiveContent } from '@cresthold/shared';
import { answerOf, client, ifMatch, type ObjectiveDocument } from '../../../api/index.js';

export const objectiveKeys = { all: ['objectives'] as const };

/** Every objective of every rig. */
export const objectivesQuery = () =>
  queryOptions({
    queryKey: objectiveKeys.all,
    queryFn: async (): Promise<ObjectiveDocument[]> =>
      (await answerOf(client.GET('/api/v1/objectives', { params: { query: { limit: 200 } } }))).items,
  });

export function useObjectives() {
  return useQuery(objectivesQuery());
}

/** The objectives of one rig. */
export function useRigObjectives(rigId: string) {
  return useQuery({
    ...objectivesQuery(),
    select: (objectives) => objectives.filter((objective) => objective.rigId === rigId),
  });
}

interface ObjectiveChange {
  rigId: string;
  content: ObjectiveContent;
  /** The document that is changed; null makes a new one. */
  from: ObjectiveDocument | null;
}

function save({ rigId, content, from }: ObjectiveChange): Promise<ObjectiveDocument> {
  if (from === null) return answerOf(client.POST('/api/v1/objectives', { body: { rigId, content } }));
  return answerOf(
    client.PUT('/api/v1/objectives/{id}', {
      params: { path: { id: from.id }, header: { 'If-Match': ifMatch(from.revision) } },
      body: { content },
    }),
  );
}

export function useSaveObjective() {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: save,
    onSuccess: () => queryClient.invalidateQueries({ queryKey: objectiveKeys.all }),
  });
}
