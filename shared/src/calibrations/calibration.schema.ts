import { z } from 'zod';
import { channelIdSchema } from '../rigs/channel-id.js';
import { thermocoupleTypes } from './thermocouples.js';

const finite = z.number();

export const linearConversionSchema = z
  .object({
    kind: z.literal('linear'),
    gain: finite
      .refine((gain) => gain !== 0, 'A gain of 0 would make every value the same.')
      .meta({
        title: 'Gain',
        description: 'Value = gain · raw + offset.',
      }),
    offset: finite.meta({ title: 'Offset', description: 'Value = gain · raw + offset.' }),
  })
  .meta({ title: 'Straight line' });

export const polynomialConversionSchema = z
  .object({
    kind: z.literal('polynomial'),
    coefficients: z
      .array(finite)
      .min(2, 'Give at least the constant and the slope.')
      .max(10, 'At most ten coefficients.')
      .meta({ title: 'Coefficients', description: 'From the constant upward: c0 + c1 · raw + c2 · raw² …' }),
    /** Raw range over which the fit was made; outside it the value is bad. */
    from: finite.meta({ title: 'Valid from', description: 'Least raw value that the fit covers.' }),
    to: finite.meta({ title: 'Valid to', description: 'Greatest raw value that the fit covers.' }),
  })
  .refine(({ from, to }) => from < to, { path: ['from'], error: 'The range must begin below its end.' })
  .meta({ title: 'Polynomial' });

export const tableConversionSchema = z
  .object({
    kind: z.literal('table'),
    points: z
      .array(z.object({ raw: finite, value: finite }))
      .min(2, 'Give at least two points.')
      .max(500, 'At most 500 points.')
      .superRefine((points, context) => {
        points.forEach((point, index) => {
          const before = points[index - 1];
          if (before && point.raw <= before.raw) {
            const message = 'Raw values must rise from row to row.';
            context.addIssue({ code: 'custom', path: [index, 'raw'], message });
          }
        });
      })
      .meta({ title: 'Points', description: 'Straight lines between them; outside them the value is bad.' }),
  })
  .meta({ title: 'Table' });

export const thermocoupleConversionSchema = z
  .object({
    kind: z.literal('thermocouple'),
    type: z.enum(thermocoupleTypes).meta({ title: 'Type', description: 'Letter type of the ITS-90 tables.' }),
    coldJunction: z
      .union([z.object({ celsius: finite }), z.object({ channel: channelIdSchema })])
      .meta({ title: 'Cold junction', description: 'Its temperature, °C, or the channel that measures it.' }),
  })
  .meta({ title: 'Thermocouple', description: 'The raw value is a voltage in mV.' });

export const platinumConversionSchema = z
  .object({
    kind: z.literal('platinum'),
    r0Ohm: z
      .number()
      .positive()
      .max(100_000)
      .meta({ title: 'Resistance at 0 °C', description: 'ohm; 100 for a Pt100.' }),
  })
  .meta({ title: 'Platinum resistance', description: 'The raw value is a resistance in ohm (IEC 60751).' });

/** How what the wire brings becomes the value of a sensor. */
export const conversionSchema = z.discriminatedUnion('kind', [
  linearConversionSchema,
  polynomialConversionSchema,
  tableConversionSchema,
  thermocoupleConversionSchema,
  platinumConversionSchema,
]);

/** What a person enters of a calibration. */
export const calibrationContentSchema = z.object({
  conversion: conversionSchema,
  /** Day of the calibration. */
  calibratedOn: z.iso.date(),
  /** Day from which it is overdue; null where it does not expire. */
  dueOn: z.iso.date().nullable(),
  /** Expanded uncertainty (k = 2), in the channel's unit; null where the certificate gives none. */
  expandedUncertainty: z.number().positive().nullable(),
  /** Number and issuer as they stand on the certificate. */
  certificate: z.string().trim().max(200),
  note: z.string().trim().max(2000),
});

/** The calibration of a sensor as a rig host and a run know it. */
export const calibrationInForceSchema = calibrationContentSchema.extend({
  id: z.string(),
  channel: channelIdSchema,
  version: z.int().min(1),
});

export type Conversion = z.infer<typeof conversionSchema>;
export type CalibrationContent = z.infer<typeof calibrationContentSchema>;
export type CalibrationInForce = z.infer<typeof calibrationInForceSchema>;
