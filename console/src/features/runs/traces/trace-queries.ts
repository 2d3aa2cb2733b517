import { keepPreviousData, useQuery } from '@tanstack/react-query';
import { answerOf, client } from '../../../api/index.js';
import { wholeTrace, type PlacedTrace, type TimedTrace } from '../../../components/trace-sheet/index.js';
import { runKeys } from '../api/run-queries.js';
import { decodePoints } from './decode-points.js';

/** Traces of a whole run that are drawn below each other. */
const stripRows = 120;

/** The channels whose traces a run recorded. */
export function useTraceChannels(runId: string) {
  return useQuery({
    queryKey: [...runKeys.one(runId), 'trace-channels'],
    queryFn: () =>
      answerOf(client.GET('/api/v1/runs/{id}/trace-channels', { params: { path: { id: runId } } })),
    // The run file comes into being a moment after the run.
    retry: 5,
    retryDelay: 400,
  });
}

/** One scan: its time, and its trace where it was good. */
export interface ScanTrace {
  scan: number;
  tS: number;
  trace: PlacedTrace | null;
}

/** The trace of a channel in one scan of a finished run. */
export function useScanTrace(runId: string, channel: string, scan: number) {
  return useQuery({
    queryKey: [...runKeys.one(runId), 'traces', 'scan', scan],
    placeholderData: keepPreviousData,
    staleTime: Infinity,
    queryFn: ({ signal }) => {
      const params = { path: { id: runId, scan } };
      return answerOf(client.GET('/api/v1/runs/{id}/traces/{scan}', { params, signal }));
    },
    select: ({ scan: number, tS, traces }): ScanTrace => {
      const found = traces.find((trace) => trace.channel === channel);
      return { scan: number, tS, trace: found ? wholeTrace(decodePoints(found.points)) : null };
    },
  });
}

/** How many scans of a run each trace of its overview stands for. */
export const scansPerRow = (scans: number): number => Math.max(1, Math.ceil(scans / stripRows));

/** Traces of a channel spread evenly over a finished run. */
export function useTraceStrip(runId: string, channel: string, every: number) {
  return useQuery({
    queryKey: [...runKeys.one(runId), 'traces', 'strip', channel, every],
    staleTime: Infinity,
    queryFn: async ({ signal }): Promise<TimedTrace[]> => {
      const query = { channel, every, limit: stripRows };
      const params = { path: { id: runId }, query };
      const page = await answerOf(client.GET('/api/v1/runs/{id}/traces', { params, signal }));
      return page.items.map(({ scan, tS, points }) => ({
        scan,
        tS,
        trace: wholeTrace(decodePoints(points)),
      }));
    },
  });
}
