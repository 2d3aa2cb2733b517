import { envelopeContentSchema, replayReportSchema, runStatusSchema } from '@cresthold/shared';
import { z } from 'zod';

/** Most runs of one replay. */
export const replayRunsMax = 20;

export const envelopeReplayOrderSchema = z
  .object({
    content: envelopeContentSchema.meta({ id: 'EnvelopeContentInput' }),
    /** The runs to replay it on; left out for the last ones. */
    runIds: z.array(z.string()).min(1).max(replayRunsMax).optional(),
    /** How many of the rig's last ended runs, where none are named. */
    lastRuns: z.int().min(1).max(replayRunsMax).default(5),
  })
  .meta({ id: 'EnvelopeReplayOrder' });
export type EnvelopeReplayOrder = z.infer<typeof envelopeReplayOrderSchema>;

export const replayedRunSchema = z.object({
  runId: z.string(),
  title: z.string(),
  startedAt: z.string(),
  status: runStatusSchema,
  envelopeVersion: z.int(),
  /** Null where the run has no record that could be read; `note` says why. */
  report: replayReportSchema.nullable(),
  /** Said where not all of the record was judged; null where all was. */
  note: z.string().nullable(),
});

export const envelopeReplaySchema = z
  .object({
    runs: z.array(replayedRunSchema),
    /** Scans that were judged, and how many one replay judges at most. */
    scans: z.int(),
    scansMax: z.int(),
  })
  .meta({ id: 'EnvelopeReplay' });
export type EnvelopeReplayAnswer = z.infer<typeof envelopeReplaySchema>;
export type ReplayedRun = z.infer<typeof replayedRunSchema>;
