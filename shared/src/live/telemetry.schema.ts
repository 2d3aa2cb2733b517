import { z } from 'zod';

/**
 * A batch of scans for screens, at most 20 a second; dropped, never queued without bound.
 * `sequence` counts batches of a rig; a gap is filled from the samples API.
 */
export const telemetrySchema = z.object({
  rigId: z.string(),
  runId: z.string().nullable(),
  sequence: z.int(),
  /**
   * Names of the values in each row: the channels but the traces, and `<actuator>.applied` for each actuator (null where it is
   * not written); all run columns while a run is going on.
   */
  columns: z.array(z.string()),
  rows: z.array(
    z.object({
      /** Wall time, ms since 1970. */
      atMs: z.number(),
      /** Time since the run began, s; null outside a run. */
      tS: z.number().nullable(),
      /** Null where not good in that scan. */
      values: z.array(z.number().nullable()),
    }),
  ),
});
export type Telemetry = z.infer<typeof telemetrySchema>;
