import {
  preflightFaultSchema,
  runColumnSchema,
  runEventSchema,
  runStatusSchema,
  slugSchema,
  verdictSchema,
} from '@cresthold/shared';
import { z } from 'zod';
import { pageQuerySchema, pageSchema } from '../../paging/page.js';

export const runSchema = z
  .object({
    id: z.string(),
    rigId: z.string(),
    experimentId: z.string(),
    experimentVersion: z.int(),
    experimentTitle: z.string(),
    envelopeVersion: z.int(),
    status: runStatusSchema,
    /** Null until the run has ended. */
    verdict: verdictSchema.nullable(),
    /** Why it ended. */
    reason: z.string().nullable(),
    startedAt: z.string(),
    endedAt: z.string().nullable(),
    startedBy: z.string(),
    /** Rows of the run file; 0 until the run has ended. */
    scans: z.int(),
    /** What the steps found, by name, e.g. `survey.best.airTrim`. */
    results: z.record(z.string(), z.number()),
    /** What preflight warned of. */
    warnings: z.array(preflightFaultSchema),
    /** Of the sealed run file, hexadecimal. */
    fileSha256: z.string().nullable(),
  })
  .meta({ id: 'Run' });
export type Run = z.infer<typeof runSchema>;

export const runPageSchema = pageSchema(runSchema).meta({ id: 'RunPage' });

export const runQuerySchema = pageQuerySchema.extend({
  rigId: slugSchema.optional(),
  status: runStatusSchema.optional(),
});
export type RunQuery = z.infer<typeof runQuerySchema>;

export const runStartSchema = z
  .object({
    experimentId: z.string().min(1).max(60),
    /** The latest where it is left out. */
    version: z.int().min(1).optional(),
  })
  .meta({ id: 'RunStart' });
export type RunStart = z.infer<typeof runStartSchema>;

/** What the client calls its request, e.g. a UUID. */
export const idempotencyKeySchema = z
  .string()
  .regex(/^[\x21-\x7e]{1,100}$/, 'Use 1 to 100 visible ASCII characters, e.g. a UUID.');

export const runColumnsSchema = z.array(runColumnSchema.meta({ id: 'RunColumn' }));
export const runEventsSchema = z.array(runEventSchema.meta({ id: 'RunEvent' }));

export const runEventsQuerySchema = z.object({
  /** Only events with a higher sequence number. */
  afterSequence: z.coerce.number().int().min(0).default(0),
});
export type RunEventsQuery = z.infer<typeof runEventsQuerySchema>;

const columnListSchema = z
  .string()
  .max(4000)
  .default('')
  .transform((text) => text.split(',').filter((name) => name !== ''));

export const samplesQuerySchema = z
  .object({
    /** Names joined by commas; all where it is left out. */
    columns: columnListSchema,
    /** Ends of the span, s since the run began, both included; open where left out. */
    fromS: z.coerce.number().optional(),
    toS: z.coerce.number().optional(),
    /** Greatest number of points per column. */
    points: z.coerce.number().int().min(1).max(20_000).default(1000),
  })
  .refine(({ fromS, toS }) => fromS === undefined || toS === undefined || fromS <= toS, {
    path: ['fromS'],
    message: 'The span begins after its end: give fromS at or below toS.',
  });
export type SamplesRequest = z.infer<typeof samplesQuerySchema>;

const series = z.array(z.array(z.number().nullable()));

/** Column-major: `mean[c][i]` belongs to `columns[c]` and `tS[i]`; null where nothing was good. */
export const samplesSchema = z
  .object({
    columns: z.array(z.string()),
    /** True where each point is one scan. */
    isExact: z.boolean(),
    tS: z.array(z.number()),
    mean: series,
    min: series,
    max: series,
  })
  .meta({ id: 'Samples' });
