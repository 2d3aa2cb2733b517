import { z } from 'zod';
import { channelIdSchema, slugSchema, titleSchema } from '../rigs/channel-id.js';

/** What holds for one actuator; all values in the channel's unit. */
export const actuatorLimitSchema = z
  .object({
    channel: channelIdSchema,
    min: z.number(),
    max: z.number(),
    /** Greatest rate of change, unit per second. */
    slewPerS: z.number().positive('The slew limit must be above zero.'),
    /** Greatest dither amplitude (half of peak to peak); 0 forbids dither. */
    ditherAmplitudeMax: z.number().min(0),
    /** Where the actuator rests; the goal of every stop. */
    rest: z.number(),
    /**
     * Stop category per IEC 60204-1: 0 to rest at once and released, 1 ramped to rest and then
     * released, 2 ramped to rest and held.
     */
    stopCategory: z.union([z.literal(0), z.literal(1), z.literal(2)]),
    /** Actuators with a lower number stop first; equal numbers stop together. */
    stopOrder: z.int().min(0).max(99).default(0),
    /** Greatest |read back − written| once the actuator has had time to follow, in the channel's unit. */
    readBackTolerance: z.number().positive(),
    /** How long the read-back may be outside its tolerance, s. */
    readBackWithinS: z.number().positive().default(2),
    /** What arming does when the actuator is found outside its range. */
    whenFoundOutside: z.enum(['slew-in', 'refuse']).default('refuse'),
  })
  .superRefine((limit, context) => {
    const fault = (path: string, message: string) =>
      context.addIssue({ code: 'custom', path: [path], message });
    if (limit.min >= limit.max) fault('min', 'The lower limit must be below the upper limit.');
    if (limit.rest < limit.min || limit.rest > limit.max)
      fault('rest', 'The rest value must lie inside the limits.');
    if (limit.ditherAmplitudeMax > (limit.max - limit.min) / 2) {
      fault('ditherAmplitudeMax', 'The dither amplitude must not exceed half of the range.');
    }
  });

export const interlockActionSchema = z.enum(['warn', 'pause', 'stop', 'trip']);

/** Whom or what an interlock protects; a trip that protects people is never bypassed. */
export const interlockPurposeSchema = z.enum(['people', 'equipment', 'process']);

/** A condition with an action. A bad or stale input counts as violated. */
export const interlockSchema = z
  .object({
    id: slugSchema,
    title: titleSchema,
    /** Expression over channels; true is the unsafe side. */
    condition: z.string().min(1).max(500),
    /** How long the condition must hold before the action, s. */
    delayS: z.number().min(0).max(3600),
    /**
     * Hysteresis: once it has acted it clears only where this expression is true as well; null clears it as soon as
     * the condition is false.
     */
    clearCondition: z.string().min(1).max(500).nullable().default(null),
    /** How long it must be safe again before it clears, s. */
    clearDelayS: z.number().min(0).max(3600).default(0),
    /** Stays until somebody acknowledges it, though it could be clear. A trip latches in any case. */
    isLatching: z.boolean().default(false),
    action: interlockActionSchema,
    protects: interlockPurposeSchema.default('people'),
    /** Longest bypass, s; null forbids bypassing. */
    bypassAtMostS: z.number().positive().max(604_800).nullable().default(null),
    /** Days between two proof tests; null asks for none. */
    proofTestEveryDays: z.number().positive().max(3660).nullable().default(null),
    /** Days after a proof test fell due until it forbids arming. */
    proofTestGraceDays: z.number().min(0).max(366).default(7),
    /** What the technician reads when it acts. */
    message: z.string().trim().min(1).max(300),
  })
  .superRefine((interlock, context) => {
    const isForPeople = interlock.action === 'trip' && interlock.protects === 'people';
    if (!isForPeople || interlock.bypassAtMostS === null) return;
    const message = 'A trip that protects people cannot be bypassed: leave this empty.';
    context.addIssue({ code: 'custom', path: ['bypassAtMostS'], message });
  });

/** A sensor that follows a hard-wired emergency stop, so that this software stops with it and says why. */
export const emergencyStopInputSchema = z.object({
  channel: channelIdSchema,
  title: titleSchema,
  /** Which reading means pressed. A circuit that reads 0 when pressed also shows a broken wire. */
  pressedWhen: z.enum(['zero', 'not-zero']),
});

/** The approved limits, interlocks, watchdogs and stop actions of a rig. */
export const envelopeContentSchema = z
  .object({
    limits: z
      .array(actuatorLimitSchema)
      .min(1, 'An envelope needs a limit for at least one actuator.')
      .max(64),
    interlocks: z.array(interlockSchema).max(100),
    /** Sensors that must be fresh: older than this is a trip while armed, running or stopping. */
    staleness: z
      .array(z.object({ channel: channelIdSchema, afterS: z.number().positive().max(60) }))
      .max(200),
    emergencyStopInputs: z.array(emergencyStopInputSchema).max(16).default([]),
    /** The host counts up this channel each period; the rig's own watchdog acts when it stands still. */
    heartbeat: z.object({ channel: channelIdSchema, periodS: z.number().positive().max(10) }).nullable(),
    /** Consecutive scans later than one period that are a trip. */
    overrunLimit: z.int().min(1).max(1000),
    /** How long the server may be silent before the host stops the rig, s. */
    serverSilenceS: z.number().min(0.5).max(60),
  })
  .superRefine((content, context) => {
    const seen = new Set<string>();
    content.limits.forEach((limit, index) => {
      if (seen.has(limit.channel)) {
        context.addIssue({
          code: 'custom',
          path: ['limits', index, 'channel'],
          message: `"${limit.channel}" has two limits: keep one.`,
        });
      }
      seen.add(limit.channel);
    });
    if (content.heartbeat && seen.has(content.heartbeat.channel)) {
      context.addIssue({
        code: 'custom',
        path: ['heartbeat', 'channel'],
        message: 'The heartbeat channel belongs to the host: it cannot have a limit for steps as well.',
      });
    }
    const ids = new Set<string>();
    content.interlocks.forEach((interlock, index) => {
      if (ids.has(interlock.id)) {
        context.addIssue({
          code: 'custom',
          path: ['interlocks', index, 'id'],
          message: 'This id is used twice.',
        });
      }
      ids.add(interlock.id);
    });
  });

/** Life of an envelope version. */
export const envelopeStatusSchema = z.enum(['draft', 'submitted', 'returned', 'in-force', 'superseded']);

export type ActuatorLimit = z.infer<typeof actuatorLimitSchema>;
export type Interlock = z.infer<typeof interlockSchema>;
export type InterlockPurpose = z.infer<typeof interlockPurposeSchema>;
export type EmergencyStopInput = z.infer<typeof emergencyStopInputSchema>;
export type InterlockAction = z.infer<typeof interlockActionSchema>;
export type EnvelopeContent = z.infer<typeof envelopeContentSchema>;
export type EnvelopeStatus = z.infer<typeof envelopeStatusSchema>;

/** An envelope version as rig host and run record know it. */
export const envelopeInForceSchema = z.object({
  id: z.string(),
  version: z.int(),
  content: envelopeContentSchema,
});
export type EnvelopeInForce = z.infer<typeof envelopeInForceSchema>;
