import { channelIdSchema, titleSchema, traceAxisSchema } from '@cresthold/shared';
import { z } from 'zod';
import { pageQuerySchema, pageSchema } from '../../paging/page.js';

/** A channel whose arrays a run recorded; point i of a trace stands at `axis.from + i * axis.step`. */
export const traceChannelSchema = z
  .object({
    id: channelIdSchema,
    title: titleSchema,
    unit: z.string(),
    display: z.object({ min: z.number(), max: z.number(), decimals: z.int() }),
    axis: traceAxisSchema,
  })
  .meta({ id: 'TraceChannel' });
export const traceChannelsSchema = z.array(traceChannelSchema);
export type TraceChannelDto = z.infer<typeof traceChannelSchema>;

export const tracesQuerySchema = pageQuerySchema
  .extend({
    channel: channelIdSchema,
    /** Ends of the span, s since the run began, both included; open where left out. */
    fromS: z.coerce.number().optional(),
    toS: z.coerce.number().optional(),
    /** Every so many scans only, counted from the first one; all where left out. */
    every: z.coerce.number().int().min(1).default(1),
  })
  .refine(({ fromS, toS }) => fromS === undefined || toS === undefined || fromS <= toS, {
    path: ['fromS'],
    message: 'The span begins after its end: give fromS at or below toS.',
  });
export type TracesRequest = z.infer<typeof tracesQuerySchema>;

const pointsSchema = z.string().meta({
  contentEncoding: 'base64',
  description: 'The points as little-endian Float32 in base64, bit for bit those of the run file.',
});

/** The trace of one channel in one scan. A scan in which it was not good has none. */
export const runTraceSchema = z
  .object({
    /** Number of the scan in the run, from 1. */
    scan: z.int(),
    /** Time since the run began, s. */
    tS: z.number(),
    /** Wall time, ms since 1970. */
    atMs: z.number(),
    points: pointsSchema,
  })
  .meta({ id: 'RunTrace' });
export type RunTrace = z.infer<typeof runTraceSchema>;
export const runTracePageSchema = pageSchema(runTraceSchema).meta({ id: 'RunTracePage' });

/** All traces of one scan; those that were not good are left out. */
export const scanTracesSchema = z
  .object({
    scan: z.int(),
    tS: z.number(),
    atMs: z.number(),
    traces: z.array(z.object({ channel: channelIdSchema, points: pointsSchema })),
  })
  .meta({ id: 'ScanTraces' });
export type ScanTraces = z.infer<typeof scanTracesSchema>;

export const scanOfRunSchema = z.object({
  id: z.string(),
  scan: z.coerce.number('Give the number of a scan, from 1.').int().min(1),
});
export type ScanOfRun = z.infer<typeof scanOfRunSchema>;
