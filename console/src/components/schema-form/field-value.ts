import type { JsonSchema } from './json-schema.types.js';
import { fieldsOf, type SchemaField } from './schema-field.js';

export type FormValue = Readonly<Record<string, unknown>>;

/** What a form begins with: the defaults of the schema, nothing else. */
export function initialValue(schema: JsonSchema): FormValue {
  return Object.fromEntries(fieldsOf(schema).flatMap((field) => entryOf(field)));
}

function entryOf(field: SchemaField): [string, unknown][] {
  const { name, schema } = field;
  if (schema.default === null) return [];
  if (schema.default !== undefined) return [[name, schema.default]];
  if (!field.isRequired) return [];
  if (field.kind === 'group') return [[name, initialValue(schema)]];
  if (field.kind === 'list') return [[name, []]];
  if (field.kind === 'table') return [[name, {}]];
  return [];
}

/** What a new item of a list begins with. */
export function emptyItem(field: SchemaField): unknown {
  if (field.schema.default !== undefined) return field.schema.default;
  switch (field.kind) {
    case 'group':
      return initialValue(field.schema);
    case 'list':
      return [];
    case 'table':
      return {};
    case 'choice':
      return field.options[0];
    case 'switch':
      return false;
    default:
      return '';
  }
}

/** The value with one property set, or taken out where it is undefined. */
export function withProperty(value: FormValue, name: string, property: unknown): FormValue {
  const entries = Object.entries(value).filter(([key]) => key !== name || property !== undefined);
  return { ...Object.fromEntries(entries), ...(property === undefined ? {} : { [name]: property }) };
}

/**
 * What was typed as a number; the text itself where it is none, so that the fault can be shown beside it.
 *
 * @example
 * readNumber('12,5') // 12.5
 * readNumber('fast') // 'fast'
 * readNumber('') // undefined
 */
export function readNumber(text: string): number | string | undefined {
  const trimmed = text.trim();
  if (trimmed === '') return undefined;
  const number = Number(trimmed.replace(',', '.').replace('\u2212', '-'));
  return Number.isFinite(number) ? number : text;
}

export function asObject(value: unknown): FormValue {
  return typeof value === 'object' && value !== null && !Array.isArray(value) ? (value as FormValue) : {};
}

export function asList(value: unknown): readonly unknown[] {
  return Array.isArray(value) ? value : [];
}
