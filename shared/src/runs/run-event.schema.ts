import { z } from 'zod';
import { wireFaultSchema } from '../rigs/wire-fault.schema.js';

export const verdictSchema = z.enum(['pass', 'fail', 'inconclusive']);
export type Verdict = z.infer<typeof verdictSchema>;

/** Life of a run. The last four are ends. */
export const runStatusSchema = z.enum([
  'starting',
  'running',
  'paused',
  'stopping',
  'finished',
  'stopped',
  'tripped',
  'interrupted',
]);
export type RunStatus = z.infer<typeof runStatusSchema>;
export const endedStatuses: readonly RunStatus[] = ['finished', 'stopped', 'tripped', 'interrupted'];

const event = <T extends string, S extends z.ZodRawShape>(type: T, shape: S) =>
  z.object({ type: z.literal(type), ...shape });

/** What happened in a run, in the past tense; time is added by whoever records it. */
export const runEventBodySchema = z.discriminatedUnion('type', [
  event('run.started', { by: z.string() }),
  event('run.paused', { reason: z.string() }),
  event('run.resumed', { by: z.string() }),
  event('run.stopping', { reason: z.string() }),
  event('run.ended', { status: runStatusSchema, verdict: verdictSchema, reason: z.string() }),
  event('step.started', { step: z.string(), kind: z.string() }),
  event('step.ended', {
    step: z.string(),
    port: z.string(),
    results: z.record(z.string(), z.number()),
    /** Why it left by a port other than the usual one; missing where there is nothing to say. */
    reason: z.string().optional(),
  }),
  event('survey.point-measured', {
    step: z.string(),
    actuator: z.string(),
    /** Applied value, channel unit. */
    value: z.number(),
    /** Mean objective over the averaging time; null where no reading of it was good. */
    objective: z.number().nullable(),
    /** Standard error of that mean; null below two readings. */
    standardError: z.number().nullable(),
    branch: z.enum(['up', 'down']),
    /** The second actuator of a survey over two; missing where there is one. */
    second: z.object({ actuator: z.string(), value: z.number(), branch: z.enum(['up', 'down']) }).optional(),
    isValid: z.boolean(),
  }),
  event('seek.retreated', {
    step: z.string(),
    /** Where the first actuator went back to, its unit. */
    to: z.number(),
    /** Where each went back to; missing in records from before there could be several. */
    point: z.record(z.string(), z.number()).optional(),
    reason: z.string(),
  }),
  event('check.decided', { step: z.string(), criterion: z.string(), isMet: z.boolean().nullable() }),
  event('guard.intervened', {
    channel: z.string(),
    rule: z.enum(['range', 'dither', 'slew', 'non-finite']),
    requested: z.number().nullable(),
    applied: z.number(),
    /** Interventions of this rule on this channel in the run so far. */
    count: z.int(),
  }),
  event('interlock.acted', { interlock: z.string(), action: z.string(), message: z.string() }),
  event('interlock.cleared', { interlock: z.string() }),
  event('interlock.acknowledged', { interlock: z.string(), by: z.string() }),
  event('interlock.bypassed', {
    interlock: z.string(),
    by: z.string(),
    reason: z.string(),
    /** Longest duration, s. */
    forS: z.number(),
  }),
  event('interlock.bypass-ended', {
    interlock: z.string(),
    /** Who ended it; null where it ran out. */
    by: z.string().nullable(),
  }),
  /** A proof test takes its condition as true. */
  event('interlock.forced', { interlock: z.string(), by: z.string() }),
  event('connection.lost', { connection: z.string(), code: z.string(), message: z.string() }),
  /** A manual move that must be held was not renewed in time, and stopped where it was. */
  event('move.hold-timed-out', { channel: z.string() }),
  event('connection.restored', { connection: z.string() }),
  /** A fault was put on a connection of the bench, or was there when the run began. */
  event('connection.fault-injected', { connection: z.string(), fault: wireFaultSchema, by: z.string() }),
  event('connection.fault-cleared', { connection: z.string(), by: z.string() }),
  /** Scans that began more than one period late, joined into one event a second. */
  event('scan.overran', {
    /** The worst of them. */
    latenessMs: z.number(),
    /** Most in a row; the envelope limits that. */
    consecutive: z.int(),
    /** Such scans since the last event of this kind; missing in records from before it was counted. */
    count: z.int().optional(),
  }),
  event('rig.tripped', { cause: z.string(), message: z.string() }),
]);
export type RunEventBody = z.infer<typeof runEventBodySchema>;
export type RunEventType = RunEventBody['type'];

export const runEventSchema = z.object({
  /** Number of the event in its run, from 1. */
  sequence: z.int(),
  /** Time since the run began, s. */
  tS: z.number(),
  /** Wall time, ISO 8601 with milliseconds, UTC. */
  at: z.string(),
  body: runEventBodySchema,
});
export type RunEvent = z.infer<typeof runEventSchema>;
