import { z } from 'zod';
import { channelIdSchema, titleSchema } from '../rigs/channel-id.js';

/**
 * A numeric parameter: a number in the unit that the field states, or an expression over the results
 * of earlier steps and over channels, e.g. `survey.best.airTrim`, evaluated when the step starts.
 */
export const numericParameterSchema = z.union([
  z.number(),
  z.object({ expression: z.string().min(1).max(500) }),
]);
export type NumericParameter = z.infer<typeof numericParameterSchema>;

const stepBase = {
  /** Name of the step in expressions over its results, e.g. `survey`. */
  id: channelIdSchema,
  title: z.string().max(120).default(''),
  /** Where it is drawn, px. */
  position: z.object({ x: z.number(), y: z.number() }),
};

export const startStepSchema = z.object({ kind: z.literal('start'), ...stepBase, parameters: z.object({}) });

/** Ramps actuators to target values, all arriving together where slew limits allow. */
export const moveStepSchema = z.object({
  kind: z.literal('move'),
  ...stepBase,
  parameters: z.object({
    targets: z
      .array(z.object({ channel: channelIdSchema, value: numericParameterSchema }))
      .min(1)
      .max(16),
    /** Time of the ramp, s; the guard's slew limit may make it longer. */
    rampS: z.number().min(0).max(86_400),
    /** Gives up by the port `timeout` after this, s. */
    timeoutS: z.number().positive().max(86_400),
  }),
});

/** Waits until a channel has stayed within a band (peak to peak) for a time. */
export const settleStepSchema = z.object({
  kind: z.literal('settle'),
  ...stepBase,
  parameters: z.object({
    channel: channelIdSchema,
    /** Greatest peak-to-peak in the channel's unit. */
    band: z.number().positive(),
    forS: z.number().positive().max(86_400),
    timeoutS: z.number().positive().max(86_400),
  }),
});

export const holdStepSchema = z.object({
  kind: z.literal('hold'),
  ...stepBase,
  parameters: z.object({ durationS: z.number().positive().max(604_800) }),
});

/** Maps the objective over one actuator, up and then down again to show hysteresis. */
export const surveyStepSchema = z.object({
  kind: z.literal('survey'),
  ...stepBase,
  parameters: z.object({
    actuator: channelIdSchema,
    from: numericParameterSchema,
    to: numericParameterSchema,
    points: z.int().min(3).max(500),
    settleS: z.number().min(0).max(3600),
    averageS: z.number().positive().max(3600),
    isUpAndDown: z.boolean(),
  }),
});

/** Steers one actuator to the best side of the objective by a seeking law. */
export const seekStepSchema = z.object({
  kind: z.literal('seek'),
  ...stepBase,
  parameters: z.object({
    actuator: channelIdSchema,
    /** The gradient law of Krstić and Wang (2000): washout, demodulation, low-pass, integrator. */
    law: z.literal('gradient'),
    /** Half of peak to peak, in the actuator's unit. */
    ditherAmplitude: numericParameterSchema,
    ditherPeriodS: numericParameterSchema,
    /** Corner of the washout (high-pass) as a fraction of the dither frequency. */
    washoutRatio: z.number().positive().max(2),
    /** Corner of the low-pass as a fraction of the dither frequency. */
    lowPassRatio: z.number().positive().max(2),
    /** Integrator gain: actuator unit per second per (objective unit per actuator unit); always positive. */
    gain: numericParameterSchema,
    /** Lag of the demodulating sine that makes up for the plant's lag at the dither frequency, degrees. */
    phaseDeg: z.number().min(-180).max(180),
    /** Box within which the estimate may move, in the actuator's unit; null leaves it to the envelope. */
    min: z.number().nullable(),
    max: z.number().nullable(),
    end: z.object({
      /** Ends by `done` after this, s. */
      afterS: z.number().positive().max(604_800),
      /** Ends earlier by `done` when the estimate stayed within `band` (peak to peak) for `forS`. */
      whenConverged: z
        .object({ band: z.number().positive(), forS: z.number().positive().max(86_400) })
        .nullable(),
      /** Ends earlier by `done` when this expression is true. */
      when: z.string().min(1).max(500).nullable(),
    }),
    /** Invalid objective for longer than this ends by `failed`, s; until then it retreats to the last good point. */
    invalidForS: z.number().positive().max(3600),
  }),
});

/** A criterion; all checks of a run together decide its verdict. */
export const checkStepSchema = z.object({
  kind: z.literal('check'),
  ...stepBase,
  parameters: z.object({ criterion: z.string().min(1).max(500) }),
});

export const finishStepSchema = z.object({
  kind: z.literal('finish'),
  ...stepBase,
  parameters: z.object({}),
});

export const stepSchema = z.discriminatedUnion('kind', [
  startStepSchema,
  moveStepSchema,
  settleStepSchema,
  holdStepSchema,
  surveyStepSchema,
  seekStepSchema,
  checkStepSchema,
  finishStepSchema,
]);

export const edgeSchema = z.object({
  id: z.string().min(1).max(100),
  from: channelIdSchema,
  /** The outcome of `from` that leads on. */
  port: z.string().min(1).max(20),
  to: channelIdSchema,
});

/** A graph of steps: edges are order, ports are outcomes. Structure is judged by preflight, not here. */
export const experimentGraphSchema = z.object({
  steps: z.array(stepSchema).max(300),
  edges: z.array(edgeSchema).max(1000),
});

export const experimentContentSchema = z.object({
  title: titleSchema,
  /** Id of the objective that Survey and Seek use; null where no step needs one. */
  objectiveId: z.string().nullable(),
  graph: experimentGraphSchema,
});

export type Step = z.infer<typeof stepSchema>;
export type StepKind = Step['kind'];
export type StepOf<K extends StepKind> = Extract<Step, { kind: K }>;
export type Edge = z.infer<typeof edgeSchema>;
export type ExperimentGraph = z.infer<typeof experimentGraphSchema>;
export type ExperimentContent = z.infer<typeof experimentContentSchema>;
