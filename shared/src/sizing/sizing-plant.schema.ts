import { z } from 'zod';
import { DomainError } from '../errors/domain-error.js';

const positive = z.number().positive().max(1e12);
const orNone = z.number().min(0).max(1e12).default(0);

const sizedActuatorSchema = z
  .object({
    /** Box of all that is asked for, dither included, actuator unit. */
    min: z.number().min(-1e12).max(1e12),
    max: z.number().min(-1e12).max(1e12),
    /** Step of the wire or the drive, actuator unit. */
    resolution: orNone,
    /** Greatest dither amplitude of the envelope, actuator unit; null for none. */
    amplitudeMax: positive.nullable().default(null),
    /** Greatest speed of the envelope, actuator unit / s; null for none. */
    slewPerS: positive.nullable().default(null),
    /** Greatest speed of the best point, actuator unit / s. */
    driftPerS: orNone,
    /** Change of the constrained quantity per change of the actuator, for the constrained law. */
    constraintSlope: z.number().min(-1e12).max(1e12).default(0),
    /** Ripple that the plant has anyway, for the dither `measured`: its amplitude and period, s. */
    ripple: z.object({ amplitude: positive, periodS: positive }).nullable().default(null),
  })
  .refine(({ min, max }) => min < max, { message: 'The box begins below its end.', path: ['max'] });

/** What identification knows of a plant, for `sizeLaw`. */
export const sizingPlantSchema = z
  .object({
    /** Time between two scans, s. */
    scanS: positive,
    /** Time constants, s; empty for a plant that answers within a scan. */
    timeConstantsS: z.array(positive).max(5).default([]),
    deadTimeS: orNone,
    /**
     * Noise of the objective. `sigma`: standard deviation from scan to scan; where it is not white, that of white
     * noise as dense as it at `referenceHz`. `slope`: exponent α of a density ~ 1/f^α.
     */
    noise: z.object({
      sigma: orNone,
      slope: z.number().min(-4).max(4).default(0),
      referenceHz: positive.default(1),
    }),
    /**
     * Curvature at the best point: the matrix of second derivatives, its sign turned so that the diagonal is above
     * zero, objective unit / actuator unit².
     */
    curvature: z
      .array(z.array(z.number().min(-1e15).max(1e15)).min(1).max(16))
      .min(1)
      .max(16),
    /** Standard errors of the diagonal of `curvature`; null where unknown. */
    curvatureErrors: z.array(orNone).max(16).nullable().default(null),
    /** One for each row of `curvature`. */
    actuators: z.array(sizedActuatorSchema).min(1).max(16),
    /** Standard deviation of the constrained quantity from scan to scan, its unit. */
    constraintNoise: orNone,
  })
  .refine(({ curvature, actuators }) => curvature.length === actuators.length, {
    message: 'The curvature needs one row for each actuator.',
    path: ['curvature'],
  })
  .refine(({ curvature }) => isPositiveSymmetric(curvature), {
    message: 'The curvature must be square and symmetric, with a diagonal above zero.',
    path: ['curvature'],
  });
export type SizingPlant = z.input<typeof sizingPlantSchema>;
export type CheckedPlant = z.output<typeof sizingPlantSchema>;

function isPositiveSymmetric(rows: readonly (readonly number[])[]): boolean {
  return rows.every(
    (row, i) =>
      row.length === rows.length &&
      (row[i] ?? NaN) > 0 &&
      row.every((value, j) => Math.abs(value - (rows[j]?.[i] ?? NaN)) <= 1e-9 * Math.abs(value)),
  );
}

/** What is wanted of a seeking law, for `sizeLaw`. */
export const sizingDemandsSchema = z.object({
  /** Mean loss by the dithers of all actuators together that is allowed, objective unit. */
  lossAllowed: positive,
  /** How far the best point may be from the start, in dither amplitudes; bounded rate goes by it. */
  distanceAmplitudes: positive.default(10),
  /** `measured` uses the ripple of each actuator and injects nothing. */
  dither: z.enum(['sine', 'measured']).default('sine'),
  /** Bands that no dither may touch, Hz. */
  forbidden: z
    .array(z.object({ fromHz: z.number().min(0), toHz: positive }))
    .max(50)
    .default([]),
  /** Wanted slope per actuator, objective unit / actuator unit, for slope seeking; 0 is the best point. */
  slopes: z.array(z.number().min(-1e12).max(1e12)).max(16).default([]),
  /** Allowed side of the bound, for the constrained law. */
  side: z.enum(['above', 'below']).default('below'),
  /** Time that is planned for the seek, s, for simultaneous perturbation; null where it goes on. */
  seekS: positive.nullable().default(null),
});
export type SizingDemands = z.input<typeof sizingDemandsSchema>;
export type CheckedDemands = z.output<typeof sizingDemandsSchema>;

/** @throws analysis.invalid-input naming each field at fault */
export function checkedForSizing<S extends z.ZodType>(schema: S, input: z.input<S>): z.output<S> {
  const outcome = schema.safeParse(input);
  if (outcome.success) return outcome.data;
  const details = outcome.error.issues.map(({ path, message }) => ({ field: path.join('.'), message }));
  throw new DomainError('analysis.invalid-input', 'What the sizing is to go by has faults.', details);
}

/** Standard deviation of white noise that is as dense as the objective's at a frequency. */
export function noiseAt({ noise }: Pick<CheckedPlant, 'noise'>, frequencyHz: number): number {
  return noise.sigma * (noise.referenceHz / frequencyHz) ** (noise.slope / 2);
}
