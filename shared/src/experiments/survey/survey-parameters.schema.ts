import { z } from 'zod';
import { channelIdSchema } from '../../rigs/channel-id.js';
import { numericParameterSchema } from '../numeric-parameter.schema.js';

const surveyActuatorSchema = z.object({
  channel: channelIdSchema,
  from: numericParameterSchema,
  to: numericParameterSchema,
  points: z.int().min(3).max(500),
  /** Goes the same way back, which shows hysteresis. */
  isUpAndDown: z.boolean().default(true),
});
export type SurveyActuator = z.infer<typeof surveyActuatorSchema>;

/**
 * Maps the objective over one actuator, or over two on a grid: the first actuator goes back and forth, the second
 * one a step after each of its ways.
 */
export const surveyParametersSchema = z.object({
  actuators: z.array(surveyActuatorSchema).min(1).max(2),
  /** At each point, before it is averaged, s. */
  settleS: z.number().min(0).max(3600),
  averageS: z.number().positive().max(3600),
  /**
   * Which hill is the best: the highest place of all, or the most prominent hill whose top lies within the range
   * and not at its end, where what comes beyond is not known (the highest place where there is no such hill).
   */
  choose: z.enum(['highest', 'most-prominent']).default('highest'),
});
export type SurveyParameters = z.infer<typeof surveyParametersSchema>;
