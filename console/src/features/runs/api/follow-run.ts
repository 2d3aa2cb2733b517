import { useQueryClient } from '@tanstack/react-query';
import type { RunEvent } from '@cresthold/shared';
import { useRunMessages } from '../../../live/index.js';
import { runKeys } from './run-queries.js';

/** The list with a new event at its end; null where one is missing between them, and the list must be read anew. */
export function appendEvent(events: readonly RunEvent[], event: RunEvent): readonly RunEvent[] | null {
  const last = events.at(-1)?.sequence ?? 0;
  if (event.sequence <= last) return events;
  return event.sequence === last + 1 ? [...events, event] : null;
}

/** Keeps a run and its events as the live link tells them. */
export function useFollowRun(id: string): void {
  const queryClient = useQueryClient();
  useRunMessages({
    onEvent: (runId, event) => {
      if (runId !== id) return;
      const events = queryClient.getQueryData<RunEvent[]>(runKeys.events(id));
      if (!events) return;
      const next = appendEvent(events, event);
      if (next) queryClient.setQueryData(runKeys.events(id), next);
      else void queryClient.invalidateQueries({ queryKey: runKeys.events(id) });
    },
    onChanged: (change) => {
      if (change.runId === id) void queryClient.invalidateQueries({ queryKey: runKeys.one(id), exact: true });
    },
  });
}
