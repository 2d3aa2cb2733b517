import { z } from 'zod';
import { placeholdersOf } from './command-template.js';
import { sampleTypes } from './definite-block.js';
import { numberNotations, writeNotations } from './number-text.js';
import { commandSchema, escapedTextSchema, optionalPatternSchema } from './text-fields.js';

const finite = z.number();

const askFields = {
  query: commandSchema.default('').meta({
    title: 'Query',
    description:
      'Command that asks for the value, e.g. MEAS:VOLT? {channel}. Channels with the same query share one.',
  }),
  stream: optionalPatternSchema.default('').meta({
    title: 'Stream',
    description:
      'In place of a query: pattern of the lines that the device sends by itself and that carry the value, e.g. $??GGA,*.',
  }),
  channel: z
    .string()
    .max(60)
    .regex(/^[\x20-\x7e]*$/, 'Use printable ASCII characters.')
    .default('')
    .meta({ title: 'Channel', description: 'Fills {channel} in the commands.' }),
  mostAgeMs: z.number().min(1).max(3_600_000).default(3000).meta({
    title: 'Most age (ms)',
    description: 'For a stream: an older line counts as missing.',
  }),
};

const replyFields = {
  shape: z.enum(['value', 'list', 'block']).default('value').meta({
    title: 'Shape',
    description:
      'One value, or a trace: a list of numbers on one line, or a block of bytes (#…, IEEE 488.2).',
  }),
  points: z.int().min(1).max(100_000).default(1).meta({
    title: 'Points',
    description: 'Values per reply: 1, or those of the trace.',
  }),
  prefix: escapedTextSchema(60).default('').meta({
    title: 'Prefix',
    description: 'What the reply must begin with; it is taken off.',
  }),
  suffix: escapedTextSchema(60).default('').meta({
    title: 'Suffix',
    description: 'What the reply must end with, e.g. a unit; it is taken off.',
  }),
  separator: escapedTextSchema(4)
    .refine((text) => text !== '', 'Give at least one character.')
    .default(',')
    .meta({ title: 'Separator', description: 'Between fields; a blank stands for any number of them.' }),
  field: z.int().min(0).max(10_000).default(0).meta({
    title: 'Field',
    description: 'Which field of the reply, counted from 0; for a list the first of its points.',
  }),
  notation: z.enum(numberNotations).default('decimal').meta({
    title: 'Notation',
    description: 'How the number is written: with point or comma, as hexadecimal digits, or as dddmm.mmm.',
  }),
  signField: z.int().min(0).max(10_000).optional().meta({
    title: 'Sign field',
    description: 'Field whose S or W makes the value negative (N or E: positive).',
  }),
  words: z.record(z.string().min(1).max(40), finite).default({}).meta({
    title: 'Words',
    description: 'Texts that stand for numbers, e.g. ON for 1.',
  }),
  specials: z
    .array(z.string().max(40))
    .max(20)
    .default(['9.91E37', '9.9E37', '-9.9E37', 'NAN', 'INF', '-INF'])
    .meta({
      title: 'No value',
      description: 'Replies that say "no value now", e.g. OVLD: the reading is bad, the device is well.',
    }),
  sampleType: z.enum(sampleTypes).default('f32').meta({
    title: 'Sample type',
    description: 'Form of one value of a block.',
  }),
  byteOrder: z.enum(['big', 'little']).default('big').meta({
    title: 'Byte order',
    description: 'Of the values of a block.',
  }),
  scale: finite
    .refine((scale) => scale !== 0, 'A scale of 0 would make every value the same: give another number.')
    .default(1)
    .meta({ title: 'Scale', description: 'Engineering value = number · scale + offset.' }),
  offset: finite
    .default(0)
    .meta({ title: 'Offset', description: 'Engineering value = number · scale + offset.' }),
};

const writeFields = {
  write: commandSchema.default('').meta({
    title: 'Write command',
    description: 'Command that sets the value, e.g. SOUR:VOLT {value}; empty where it can only be read.',
  }),
  writeNotation: z.enum(writeNotations).default('fixed').meta({
    title: 'Write notation',
    description: 'How the command writes the number.',
  }),
  decimals: z.int().min(0).max(12).default(3).meta({
    title: 'Decimals',
    description: 'Digits behind the decimal mark in the command.',
  }),
  min: finite.default(-1e12).meta({ title: 'Least', description: 'Least value that may be sent.' }),
  max: finite.default(1e12).meta({ title: 'Greatest', description: 'Greatest value that may be sent.' }),
  acknowledgement: optionalPatternSchema.default('').meta({
    title: 'Acknowledgement',
    description: 'Pattern of the reply to a write; empty where the device sends none.',
  }),
  hasReadback: z.boolean().default(false).meta({
    title: 'Read back',
    description: 'Whether the query follows each write and its value must agree.',
  }),
  readbackTolerance: z.number().min(0).default(0).meta({
    title: 'Read-back tolerance',
    description: 'Difference that is allowed beside the rounding of the command, engineering unit.',
  }),
};

const allowedPlaceholders: readonly string[] = ['channel', 'value'];

/** Where one value lives in an ASCII instrument: how to ask for it, how to take it from the reply, how to set it. */
export const serialTextAddressSchema = z
  .strictObject({ ...askFields, ...replyFields, ...writeFields })
  .superRefine((value, context) => {
    for (const [field, message] of faultsOf(value)) {
      context.addIssue({ code: 'custom', path: [field], message });
    }
  });

export type SerialTextAddress = z.infer<typeof serialTextAddressSchema>;
export type SerialTextAddressInput = z.input<typeof serialTextAddressSchema>;

type Fault = [field: string, message: string];

function faultsOf(
  address: z.infer<z.ZodObject<typeof askFields & typeof replyFields & typeof writeFields>>,
): Fault[] {
  return [...askFaults(address), ...traceFaults(address), ...writeFaults(address)];
}

type Parsed = Parameters<typeof faultsOf>[0];

function* askFaults({ query, stream, write }: Parsed): Iterable<Fault> {
  if (query !== '' && stream !== '') yield ['stream', 'Give a query or a stream, not both.'];
  if (query === '' && stream === '' && write === '')
    yield ['query', 'Give a query, a stream or a write command.'];
  const unknown = placeholdersOf(query).find((name) => name !== 'channel');
  if (unknown !== undefined) yield ['query', `A query has no {${unknown}}: use {channel}.`];
}

function* traceFaults({ shape, points, signField, notation }: Parsed): Iterable<Fault> {
  if (shape === 'value' && points !== 1)
    yield ['points', 'One value has one point: choose the shape of the trace.'];
  if (shape !== 'value' && points < 2) yield ['points', 'A trace has at least two points.'];
  if (signField !== undefined && shape !== 'value')
    yield ['signField', 'The points of a trace have no sign field.'];
  if (notation === 'degrees-minutes' && shape !== 'value') yield ['notation', 'A trace has plain numbers.'];
}

function* writeFaults({ write, query, hasReadback, shape, min, max }: Parsed): Iterable<Fault> {
  const placeholders = placeholdersOf(write);
  const unknown = placeholders.find((name) => !allowedPlaceholders.includes(name));
  if (unknown !== undefined)
    yield ['write', `A write command has no {${unknown}}: use {value} and {channel}.`];
  if (write !== '' && !placeholders.includes('value')) yield ['write', 'Say where the value goes: {value}.'];
  if (write !== '' && shape !== 'value') yield ['write', 'A trace can only be read.'];
  if (hasReadback && (query === '' || write === ''))
    yield ['hasReadback', 'Reading back needs a query and a write.'];
  if (min >= max) yield ['min', 'The least value must be below the greatest.'];
}
