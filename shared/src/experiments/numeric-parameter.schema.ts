import { z } from 'zod';

/** An expression over the results of earlier steps and over channels, evaluated when the step starts. */
export const expressionParameterSchema = z.object({ expression: z.string().min(1).max(500) });

/**
 * A numeric parameter: a number in the unit that the field states, or an expression over the results
 * of earlier steps and over channels, e.g. `survey.best.airTrim`, evaluated when the step starts.
 */
export const numericParameterSchema = z.union([z.number(), expressionParameterSchema]);
export type NumericParameter = z.infer<typeof numericParameterSchema>;

/** A parameter that may be a number or an expression, with its place in the step. */
export interface NumericField {
  /** E.g. `parameters.targets[0].value`. */
  field: string;
  parameter: NumericParameter;
}
