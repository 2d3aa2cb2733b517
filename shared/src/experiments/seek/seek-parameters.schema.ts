import { z } from 'zod';
import { channelIdSchema } from '../../rigs/channel-id.js';
import { ditherKinds } from '../../seeking/seeking-law.js';
import type { SeekingLawId } from '../../seeking/seeking-laws.js';
import { visitSchema } from '../../seeking/wide-search.js';
import { numericParameterSchema, type NumericParameter } from '../numeric-parameter.schema.js';
import { fieldsOf, lawFields, seekingLawIds, stepObjectOf } from './law-form.js';

/** A parameter of a law in a step: as in the law's own schema, any number also as an expression. */
export type LawParameter =
  NumericParameter | string | null | readonly LawParameter[] | { [name: string]: LawParameter };

/** The law of a Seek, with what it takes beside its actuators. */
export interface SeekLaw {
  id: SeekingLawId;
  parameters: Record<string, LawParameter>;
}

const lawSchemas = seekingLawIds.map((id) =>
  z.object({ id: z.literal(id), parameters: stepObjectOf(lawFields(id)) }),
);
/** Built from the schemas of the laws themselves: names, units, ranges and help stand there. */
const seekLawSchema = z.discriminatedUnion(
  'id',
  lawSchemas as [(typeof lawSchemas)[number], ...typeof lawSchemas],
) as unknown as z.ZodType<SeekLaw, { id: SeekingLawId; parameters: Record<string, unknown> }>;

const orEmpty = numericParameterSchema.nullable().default(null);

/**
 * One actuator that a Seek steers. Which of `periodS`, `phaseDeg`, `gain`, `speedMax` and `own` a law uses, and what
 * they mean to it, its own schema says (`seekActuatorFields`); the others are kept for when the law is changed.
 */
const seekActuatorSchema = z.object({
  channel: channelIdSchema,
  /** Box of the estimate, actuator unit; null leaves it to the envelope, within which the dither has to fit. */
  min: orEmpty,
  max: orEmpty,
  /** Half of peak to peak, actuator unit; of measured ripple the least that is worked with. */
  amplitude: numericParameterSchema,
  /** One period of the dither, s. */
  periodS: orEmpty,
  /** Lag of the demodulation that makes up for plant and washout, degrees. */
  phaseDeg: numericParameterSchema.default(0),
  /** Null is what the law usually does. */
  dither: z.enum(ditherKinds).nullable().default(null),
  /** Channel on which the plant's own ripple is measured, in the actuator's unit; for the dither `measured`. */
  measuredChannel: channelIdSchema.nullable().default(null),
  gain: orEmpty,
  /** Greatest speed of the estimate, actuator unit / s; null leaves it to law and envelope. */
  speedMax: orEmpty,
  /** What only this law has for each actuator, by the law's names: `curvature`, `slope`. */
  own: z.record(z.string().min(1).max(40), numericParameterSchema.nullable()).default({}),
});
export type SeekActuator = z.infer<typeof seekActuatorSchema>;

/** How often and where a wide search looks; its times and their help are those of `visitSchema`. */
const wideSearchSchema = z.object({
  /** A grid with so many points per actuator, so many spread points, or given ones (one value per actuator each). */
  starts: z.discriminatedUnion('by', [
    z.object({ by: z.literal('grid'), points: z.int().min(2).max(100) }),
    z.object({ by: z.literal('spread'), count: z.int().min(1).max(1000) }),
    z.object({
      by: z.literal('list'),
      points: z.array(z.array(numericParameterSchema).min(1).max(16)).min(1).max(100),
    }),
  ]),
  visit: stepObjectOf(fieldsOf(visitSchema.omit({ starts: true }))) as unknown as z.ZodType<
    WideSearchVisit,
    Partial<WideSearchVisit>
  >,
});

export interface WideSearchVisit {
  settleS: NumericParameter;
  seekS: NumericParameter;
  averageS: NumericParameter;
  everyS: NumericParameter | null;
  advantage: NumericParameter;
}
export type SeekWideSearch = z.infer<typeof wideSearchSchema>;

/** Steers one to sixteen actuators to the best side of the objective by a seeking law. */
export const seekParametersSchema = z.object({
  law: seekLawSchema,
  actuators: z.array(seekActuatorSchema).min(1).max(16),
  /**
   * Quantity that the constrained law keeps on the allowed side of a bound, in the same unit; which side and with
   * what reserve are parameters of the law. Null for the other laws.
   */
  constraint: z
    .object({ expression: z.string().min(1).max(500), bound: numericParameterSchema })
    .nullable()
    .default(null),
  /** Visits many points first and seeks from the best; null seeks from where the actuators stand. */
  wideSearch: wideSearchSchema.nullable().default(null),
  end: z.object({
    /** Ends by `done` after this, s. */
    afterS: z.number().positive().max(604_800),
    /**
     * Ends earlier by `done` when every estimate stayed within `band` (peak to peak) for `forS`. The band is in
     * the unit of the first actuator; each other one's is as large beside its dither amplitude.
     */
    whenConverged: z
      .object({ band: z.number().positive(), forS: z.number().positive().max(86_400) })
      .nullable(),
    /** Ends earlier by `done` when this expression is true. */
    when: z.string().min(1).max(500).nullable(),
  }),
  /** Invalid objective for longer than this ends by `failed`, s; until then it retreats to the last good point. */
  invalidForS: z.number().positive().max(3600),
});
export type SeekParameters = z.infer<typeof seekParametersSchema>;
