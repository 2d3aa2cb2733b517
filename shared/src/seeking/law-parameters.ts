import { z } from 'zod';
import { ditherKinds, type DitherKind } from './seeking-law.js';

/** Gives a parameter the name, unit and help text that the palette and the documentation show. */
export function parameter<S extends z.ZodType>(schema: S, title: string, unit: string, help: string): S {
  return schema.meta({ title, unit, description: help });
}

const positive = z.number().positive().max(1e12);

export const gainParameter = parameter(
  positive,
  'Gain',
  'actuator unit² / (objective unit · s)',
  'Speed of the estimate per slope of the objective. On a peak with second derivative f″ the estimate approaches it with the rate gain · |f″| per second.',
);

const common = {
  min: parameter(
    z.number(),
    'Lowest',
    'actuator unit',
    'Lowest value that is ever asked for, dither included.',
  ),
  max: parameter(
    z.number(),
    'Highest',
    'actuator unit',
    'Highest value that is ever asked for, dither included.',
  ),
  amplitude: parameter(
    positive,
    'Dither amplitude',
    'actuator unit',
    'Half of peak to peak. For the plant’s own ripple: the least ripple that is worked with.',
  ),
  speedMax: parameter(
    positive.nullable().default(null),
    'Greatest speed of the estimate',
    'actuator unit / s',
    'The estimate never moves faster; empty for no limit but that of the envelope.',
  ),
};

const periodic = {
  periodS: parameter(
    positive,
    'Dither period',
    's',
    'One period of the perturbation; several times the time constant of the plant.',
  ),
  phaseRad: parameter(
    z
      .number()
      .min(-2 * Math.PI)
      .max(2 * Math.PI)
      .default(0),
    'Demodulation lag',
    'rad',
    'Lag of the demodulation that makes up for that of plant and washout at the dither frequency.',
  ),
};

interface Box {
  min: number;
  max: number;
  amplitude: number;
  dither?: DitherKind;
}

/** @returns the schema with the condition that box and dither go together */
function inItsBox<S extends z.ZodType<Box>>(schema: S): S {
  return schema.refine(
    ({ min, max, amplitude, dither }) => max - min >= (dither === 'measured' ? 0 : 2 * amplitude),
    {
      message:
        'The box must be at least twice the dither amplitude wide: widen it or make the dither smaller.',
      path: ['max'],
    },
  );
}

/** One actuator of a law that dithers periodically. */
export function periodicAxis<Extra extends z.ZodRawShape>(
  kinds: readonly [DitherKind, ...DitherKind[]],
  extra: Extra,
) {
  const dither = parameter(
    z
      .enum(ditherKinds)
      .default('sine')
      .refine((kind) => kinds.includes(kind), {
        message: `This law can use: ${kinds.join(', ')}.`,
      }),
    'Dither',
    '',
    'Injected sine, injected square, or the ripple that the plant has anyway, measured on the actuator.',
  );
  return z.object({ ...common, ...periodic, dither, ...extra });
}

/** One actuator of a law that tries points and dwells on them. */
export function dwellingAxis<Extra extends z.ZodRawShape>(extra: Extra) {
  return z.object({ ...common, ...extra });
}

/** @returns a list of 1 to `max` actuators whose boxes hold their dithers */
export function axesOf<S extends z.ZodType<Box>>(axis: S, max: number) {
  return parameter(z.array(inItsBox(axis)).min(1).max(max), 'Actuators', '', 'One entry per actuator.');
}

const ratio = z.number().positive().max(10);

export const washoutRatioParameter = parameter(
  ratio.default(0.2),
  'Washout',
  'of the dither frequency',
  'Corner of the high-pass that takes the mean of the objective away.',
);

export const lowPassRatioParameter = parameter(
  ratio.default(0.2),
  'Low-pass',
  'of the dither frequency',
  'Corner of the filter that takes the ripple off the gradient.',
);

export const dwellParameters = {
  dwellS: parameter(positive, 'Dwell', 's', 'Time at each point that is tried.'),
  settleS: parameter(
    z.number().min(0).max(1e12).default(0),
    'Settling',
    's',
    'First part of the dwell, in which the plant settles and the objective is not used.',
  ),
};

export const taperParameter = parameter(
  z
    .object({
      band: parameter(
        positive.max(10).default(0.05),
        'Band',
        'of the dither amplitude',
        'The estimate counts as standing still while its mean moves less than this from period to period.',
      ),
      afterPeriods: parameter(
        z.int().min(1).max(1000).default(5),
        'After',
        'periods',
        'So long must it stand still.',
      ),
      floor: parameter(
        z.number().min(0.01).max(1).default(0.2),
        'Floor',
        'of the dither amplitude',
        'The dither is not made smaller than this.',
      ),
    })
    .nullable()
    .default(null),
  'Taper',
  '',
  'Makes the dither smaller while the estimate stands still, and large again when it moves.',
);

/** What the shared pieces read of one actuator's parameters. */
export interface SeekingAxis {
  readonly min: number;
  readonly max: number;
  readonly amplitude: number;
  readonly speedMax?: number | null;
}

export interface PeriodicAxis extends SeekingAxis {
  readonly periodS: number;
  readonly phaseRad: number;
  readonly dither: DitherKind;
}

export type TaperParameters = z.infer<typeof taperParameter>;
