import { z } from 'zod';
import { channelIdSchema, titleSchema } from '../rigs/channel-id.js';
import { numericParameterSchema } from './numeric-parameter.schema.js';
import { seekParametersSchema } from './seek/seek-parameters.schema.js';
import { surveyParametersSchema } from './survey/survey-parameters.schema.js';

export * from './numeric-parameter.schema.js';

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

export const surveyStepSchema = z.object({
  kind: z.literal('survey'),
  ...stepBase,
  parameters: surveyParametersSchema,
});

export const seekStepSchema = z.object({
  kind: z.literal('seek'),
  ...stepBase,
  parameters: seekParametersSchema,
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
