import { z } from 'zod';

/** One finding of preflight: where it is and what to do. Errors forbid a run; warnings are recorded with it. */
export const preflightFaultSchema = z.object({
  severity: z.enum(['error', 'warning']),
  /** Stable code, e.g. `preflight.dangling-port`. */
  code: z.string(),
  /** Step at fault; null where the whole graph is. */
  step: z.string().nullable(),
  /** Field within the step, e.g. `parameters.ditherAmplitude` or `ports.done`; null where the whole step is. */
  field: z.string().nullable(),
  message: z.string(),
});
export type PreflightFault = z.infer<typeof preflightFaultSchema>;
