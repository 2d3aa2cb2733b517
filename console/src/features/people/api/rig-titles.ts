import { useQuery } from '@tanstack/react-query';
import { answerOf, client } from '../../../api/index.js';

/** Ids and titles of all rigs, to choose from. */
export function useRigTitles() {
  return useQuery({
    queryKey: ['users', 'rig-titles'],
    queryFn: async () => {
      const { items } = await answerOf(client.GET('/api/v1/rigs', { params: { query: { limit: 200 } } }));
      return items.map(({ id, content }) => ({ id, title: content.title }));
    },
  });
}
