import { z } from 'zod';
import { titleSchema } from '../rigs/channel-id.js';

export const directionSchema = z.enum(['maximise', 'minimise']);

/** The number that is to be made large or small, with the conditions under which it means anything. */
export const objectiveContentSchema = z.object({
  title: titleSchema,
  direction: directionSchema,
  /** Expression over the rig's channels. */
  expression: z.string().min(1).max(500),
  unit: z.string().max(16).default(''),
  /** Conditions that must all be true for the objective to be valid. */
  validity: z
    .array(z.object({ condition: z.string().min(1).max(500), message: z.string().trim().min(1).max(300) }))
    .max(20)
    .default([]),
});

export type Direction = z.infer<typeof directionSchema>;
export type ObjectiveContent = z.infer<typeof objectiveContentSchema>;
