import {
  calibrationInForceSchema,
  envelopeInForceSchema,
  objectiveContentSchema,
  rigSchema,
  runColumnSchema,
  runOrderSchema,
  runStatusSchema,
  verdictSchema,
} from '@cresthold/shared';
import { z } from 'zod';

/**
 * Version of the layout of a run file; raised when a table comes, or a table or manifest entry changes its meaning.
 * 1: scan, event, manifest. 2: and trace. Files of every version are read.
 */
export const runFileSchemaVersion = 2;

/** How a run ended; absent from a file whose run has not ended yet. */
export const runEndSchema = z.object({
  status: runStatusSchema,
  verdict: verdictSchema,
  reason: z.string(),
  results: z.record(z.string(), z.number()),
  /** Rows of table `scan`. */
  scans: z.int(),
});
export type RunEnd = z.infer<typeof runEndSchema>;

/** Everything that is needed to understand and repeat a run; one row of table `manifest` per entry. */
export const runManifestSchema = z.object({
  schema_version: z.int(),
  run: z.object({ id: z.string(), startedBy: z.string(), startedAt: z.string() }),
  experiment: runOrderSchema.shape.experiment,
  objective: objectiveContentSchema.nullable(),
  rig: rigSchema,
  envelope: envelopeInForceSchema,
  /** Of sensors, as they converted in this run; missing from files of earlier versions. */
  calibrations: z.array(calibrationInForceSchema).default([]),
  columns: z.array(runColumnSchema),
  software: z.record(z.string(), z.string()),
  /** What the server adds: warnings of preflight and the like. */
  extra: z.record(z.string(), z.unknown()),
});
export type RunManifest = z.infer<typeof runManifestSchema>;

/** A manifest as it is read back: `end` is null while the run goes on, and after a crash. */
export type StoredManifest = RunManifest & { end: RunEnd | null };
