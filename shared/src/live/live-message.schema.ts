import { z } from 'zod';
import { runEventSchema, runStatusSchema, verdictSchema } from '../runs/run-event.schema.js';
import { liveTraceSchema } from './live-trace.schema.js';
import { rigStatusSchema } from './rig-status.schema.js';
import { telemetrySchema } from './telemetry.schema.js';

/** Console or script → server on `/api/v1/live`. Rig states of all rigs come unasked. */
export const toLiveSchema = z.discriminatedUnion('type', [
  /** Telemetry of a rig and events of its runs. */
  z.object({ type: z.literal('subscribe'), rigId: z.string() }),
  z.object({ type: z.literal('unsubscribe'), rigId: z.string() }),
]);
export type ToLive = z.infer<typeof toLiveSchema>;

/** Server → console or script. */
export const fromLiveSchema = z.discriminatedUnion('type', [
  z.object({ type: z.literal('rig-status'), status: rigStatusSchema }),
  z.object({ type: z.literal('telemetry'), telemetry: telemetrySchema }),
  z.object({ type: z.literal('trace'), trace: liveTraceSchema }),
  z.object({ type: z.literal('run-event'), runId: z.string(), event: runEventSchema }),
  z.object({
    type: z.literal('run-changed'),
    runId: z.string(),
    status: runStatusSchema,
    verdict: verdictSchema.nullable(),
  }),
  z.object({ type: z.literal('error'), message: z.string() }),
]);
export type FromLive = z.infer<typeof fromLiveSchema>;
