import { z } from 'zod';
import { calibrationInForceSchema } from '../calibrations/calibration.schema.js';
import { envelopeInForceSchema } from '../envelopes/envelope.schema.js';
import type { ErrorRecord } from '../errors/domain-error.js';
import { experimentGraphSchema } from '../experiments/experiment.schema.js';
import { objectiveContentSchema } from '../objectives/objective.schema.js';
import { rigSchema } from '../rigs/rig.schema.js';
import { wireFaultSchema } from '../rigs/wire-fault.schema.js';
import { moveHoldSchema } from '../scan/held-move.schema.js';
import { runEventSchema, runStatusSchema, verdictSchema } from '../runs/run-event.schema.js';
import { interlockResponseSchema } from './interlock-response.schema.js';
import { liveTraceSchema } from './live-trace.schema.js';
import { rigStatusSchema, tripSchema } from './rig-status.schema.js';
import { stopTrajectorySchema } from './stop-trajectory.schema.js';
import { telemetrySchema } from './telemetry.schema.js';

/** What a run needs to be executed; all of it goes into the manifest of its file. */
export const runOrderSchema = z.object({
  runId: z.string(),
  /** Path of the run file that the recorder creates. */
  file: z.string(),
  by: z.string(),
  experiment: z.object({
    id: z.string(),
    title: z.string(),
    version: z.int(),
    graph: experimentGraphSchema,
  }),
  objective: objectiveContentSchema.nullable(),
  /** Warnings of preflight and whatever else the record should carry. */
  manifest: z.record(z.string(), z.unknown()),
});
export type RunOrder = z.infer<typeof runOrderSchema>;

/** What the server asks of a rig host; each is answered by one `reply` with the same `requestId`. */
export const hostCommandSchema = z.discriminatedUnion('type', [
  z.object({
    type: z.literal('configure'),
    rig: rigSchema,
    envelope: envelopeInForceSchema.nullable(),
    /** One a sensor at most; left out where none is calibrated. */
    calibrations: z.array(calibrationInForceSchema).optional(),
    /** A trip that was latched before this host began. */
    trip: tripSchema.nullable(),
    isLockedOut: z.boolean(),
  }),
  z.object({ type: z.literal('set-envelope'), envelope: envelopeInForceSchema }),
  z.object({ type: z.literal('set-lockout'), isLockedOut: z.boolean() }),
  z.object({ type: z.literal('arm'), by: z.string() }),
  z.object({ type: z.literal('disarm'), by: z.string() }),
  z.object({
    type: z.literal('move'),
    channel: z.string(),
    value: z.number(),
    by: z.string(),
    /** Null for a move that goes on by itself. */
    hold: moveHoldSchema.nullable(),
  }),
  z.object({ type: z.literal('release-move'), channel: z.string(), holdId: z.string() }),
  z.object({ type: z.literal('start-run'), order: runOrderSchema }),
  z.object({ type: z.literal('pause'), by: z.string(), reason: z.string() }),
  z.object({ type: z.literal('resume'), by: z.string() }),
  z.object({ type: z.literal('stop'), by: z.string(), reason: z.string() }),
  z.object({ type: z.literal('emergency-stop'), by: z.string(), reason: z.string() }),
  z.object({ type: z.literal('reset'), by: z.string(), reason: z.string() }),
  z.object({
    type: z.literal('bypass-interlock'),
    interlock: z.string(),
    forS: z.number(),
    by: z.string(),
    reason: z.string(),
  }),
  z.object({ type: z.literal('end-bypass'), interlock: z.string(), by: z.string() }),
  z.object({ type: z.literal('acknowledge-interlock'), interlock: z.string(), by: z.string() }),
  z.object({ type: z.literal('force-interlock'), interlock: z.string(), forS: z.number(), by: z.string() }),
  /** Puts a fault on a connection of a bench, or takes it off; refused for a rig that is no bench. */
  z.object({
    type: z.literal('set-fault'),
    connection: z.string(),
    fault: wireFaultSchema.nullable(),
    by: z.string(),
  }),
  /** Live test of one channel; the reply carries a `ChannelProbe` as its data. */
  z.object({ type: z.literal('probe'), channel: z.string() }),
  /** Stops in order, brings the rig to rest, closes the wire and ends the process. */
  z.object({ type: z.literal('shut-down') }),
]);
export type HostCommand = z.infer<typeof hostCommandSchema>;

export const toHostSchema = z.discriminatedUnion('type', [
  z.object({ type: z.literal('command'), requestId: z.int(), command: hostCommandSchema }),
  /** The server lives; sent every 500 ms. */
  z.object({ type: z.literal('server-alive') }),
]);
export type ToHost = z.infer<typeof toHostSchema>;

const errorRecordSchema = z.custom<ErrorRecord>(
  (value) => typeof value === 'object' && value !== null && 'code' in value,
);

export const fromHostSchema = z.discriminatedUnion('type', [
  /** The program runs and waits for `configure`. */
  z.object({ type: z.literal('ready'), pid: z.int() }),
  z.object({
    type: z.literal('reply'),
    requestId: z.int(),
    error: errorRecordSchema.nullable(),
    /** What the command was to find out; left out where it found nothing. */
    data: z.unknown().optional(),
  }),
  /** On every change and once a second; also the sign that the host lives. */
  z.object({ type: z.literal('status'), status: rigStatusSchema }),
  z.object({ type: z.literal('telemetry'), telemetry: telemetrySchema }),
  z.object({ type: z.literal('trace'), trace: liveTraceSchema }),
  /** An interlock acted. */
  z.object({ type: z.literal('interlock-response'), response: interlockResponseSchema }),
  z.object({ type: z.literal('run-event'), runId: z.string(), event: runEventSchema }),
  z.object({ type: z.literal('run-status'), runId: z.string(), status: runStatusSchema }),
  z.object({
    type: z.literal('run-ended'),
    runId: z.string(),
    status: runStatusSchema,
    verdict: verdictSchema,
    reason: z.string(),
    results: z.record(z.string(), z.number()),
    scans: z.int(),
  }),
  /** Sent once for each trip that the host saw, when the rig has come to rest or the record is full. */
  z.object({
    type: z.literal('stop-trajectory'),
    trip: z.object({ cause: z.string(), at: z.string() }),
    trajectory: stopTrajectorySchema,
  }),
  z.object({ type: z.literal('log'), level: z.enum(['info', 'warn', 'error']), text: z.string() }),
]);
export type FromHost = z.infer<typeof fromHostSchema>;
