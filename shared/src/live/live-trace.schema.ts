import { z } from 'zod';

/** Most points of a trace for screens. */
export const livePointsMax = 1024;

/**
 * The newest trace of one channel for screens, at most five a second; dropped, never queued. It is thinned without
 * losing an extreme; the run file has all points of every scan.
 */
export const liveTraceSchema = z.object({
  rigId: z.string(),
  runId: z.string().nullable(),
  channel: z.string(),
  /** Wall time, ms since 1970. */
  atMs: z.number(),
  /** Time since the run began, s; null outside a run. */
  tS: z.number().nullable(),
  /** Points of the whole trace. */
  count: z.int(),
  points: z.array(z.number()).max(livePointsMax),
  /** Numbers of `points` in the whole trace; null where all of them are there. */
  places: z.array(z.int()).max(livePointsMax).nullable(),
});
export type LiveTrace = z.infer<typeof liveTraceSchema>;
