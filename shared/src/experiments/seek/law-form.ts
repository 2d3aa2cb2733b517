import { z } from 'zod';
import { seekingLaws, type SeekingLawId } from '../../seeking/seeking-laws.js';
import { expressionParameterSchema } from '../numeric-parameter.schema.js';

/**
 * One parameter of a seeking law, as forms, checks and documents of the Seek step show it. Everything in it is
 * read from the law's own schema: names, units, ranges and help are written there and nowhere else.
 */
export interface LawField {
  name: string;
  title: string;
  unit: string;
  help: string;
  /** A list is given as the law's schema says it, numbers only; it has no place in a form. */
  type: 'number' | 'choice' | 'group' | 'list';
  /** A group may be left out, a number may be empty. */
  isNullable: boolean;
  /** Its value where none is given; undefined where one must be given. */
  initial: unknown;
  /** Of a choice. */
  options: readonly string[];
  /** Of a group. */
  fields: readonly LawField[];
  /** Judges the value once every expression in it is a number. */
  schema: z.ZodType;
}

/** Ids of all laws in the order of the palette. */
export const seekingLawIds = Object.keys(seekingLaws) as [SeekingLawId, ...SeekingLawId[]];

/** Parameters of a law beside those of its actuators. */
export function lawFields(id: SeekingLawId): readonly LawField[] {
  return known(id).law;
}

/** Parameters that a law has for each actuator, under the law's own names. */
export function axisFields(id: SeekingLawId): readonly LawField[] {
  return known(id).axis;
}

/** The fields of a schema that is an object. */
export function fieldsOf(schema: z.ZodType): LawField[] {
  return Object.entries(shapeOf(schema)).map(([name, field]) => fieldOf(name, field));
}

/** The schema of a field in a step: as the law's, but any number may be an expression as well. */
export function stepSchemaOf(field: LawField): z.ZodType {
  const { title, unit, help, isNullable, initial } = field;
  const plain = isNullable ? bare(field).nullable() : bare(field);
  const named = plain.meta({ title, unit, description: help });
  return initial === undefined ? named : named.prefault(initial);
}

/** The schema of an object of such fields. */
export function stepObjectOf(fields: readonly LawField[]): z.ZodObject {
  return z.object(Object.fromEntries(fields.map((field) => [field.name, stepSchemaOf(field)])));
}

function bare({ type, schema, fields }: LawField): z.ZodType {
  if (type === 'group') return stepObjectOf(fields);
  return type === 'number'
    ? z.union([unwrapped(schema).inner, expressionParameterSchema])
    : unwrapped(schema).inner;
}

interface Known {
  law: readonly LawField[];
  axis: readonly LawField[];
}

const read = new Map<SeekingLawId, Known>();

function known(id: SeekingLawId): Known {
  const before = read.get(id);
  if (before) return before;
  const { axes, ...rest } = shapeOf(seekingLaws[id].parametersSchema);
  if (!(axes instanceof z.ZodArray)) throw new Error(`The law "${id}" has no list of axes.`);
  const now = {
    law: Object.entries(rest).map(([name, schema]) => fieldOf(name, schema)),
    axis: fieldsOf(axes.element as z.ZodType),
  };
  read.set(id, now);
  return now;
}

function shapeOf(schema: z.ZodType): Record<string, z.ZodType> {
  if (!(schema instanceof z.ZodObject)) throw new Error('Parameters of a law are one object.');
  return schema.shape;
}

function fieldOf(name: string, schema: z.ZodType): LawField {
  const { inner, isNullable, initial } = unwrapped(schema);
  const { title = name, unit = '', description = '' } = schema.meta() ?? {};
  return {
    name,
    title: String(title),
    unit: String(unit),
    help: String(description),
    type: typeOf(inner),
    isNullable,
    initial,
    options: inner instanceof z.ZodEnum ? (inner.options as string[]) : [],
    fields: inner instanceof z.ZodObject ? fieldsOf(inner) : [],
    schema,
  };
}

function typeOf(inner: z.ZodType): LawField['type'] {
  if (inner instanceof z.ZodObject) return 'group';
  if (inner instanceof z.ZodArray) return 'list';
  return inner instanceof z.ZodEnum ? 'choice' : 'number';
}

interface Unwrapped {
  inner: z.ZodType;
  isNullable: boolean;
  initial: unknown;
}

/** What stands within the wrappers that say that a value may be empty or left out. */
function unwrapped(schema: z.ZodType): Unwrapped {
  if (schema instanceof z.ZodDefault || schema instanceof z.ZodPrefault) {
    return { ...unwrapped(schema.def.innerType as z.ZodType), initial: schema.def.defaultValue };
  }
  if (schema instanceof z.ZodNullable) {
    return { ...unwrapped(schema.def.innerType as z.ZodType), isNullable: true };
  }
  return { inner: schema, isNullable: false, initial: undefined };
}
