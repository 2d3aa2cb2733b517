import type { FieldFault } from '@cresthold/shared';
import { asList, asObject } from './field-value.js';
import type { JsonSchema } from './json-schema.types.js';
import { fieldsOf, type SchemaField } from './schema-field.js';

/**
 * What a value lacks against its schema, by field path below `root`, so that it can be said before it is sent. The
 * server judges by more than this.
 *
 * @example
 * schemaFaults(schema, {}, 'configuration') // [{ field: 'configuration.host', message: 'Needed.' }]
 */
export function schemaFaults(schema: JsonSchema, value: unknown, root = ''): FieldFault[] {
  const object = asObject(value);
  return fieldsOf(schema).flatMap((field) => faultsOf(field, object[field.name], pathOf(root, field.name)));
}

export function pathOf(root: string, part: string | number): string {
  if (typeof part === 'number') return `${root}[${part}]`;
  return root === '' ? part : `${root}.${part}`;
}

function faultsOf(field: SchemaField, value: unknown, path: string): FieldFault[] {
  if (value === undefined || value === null) {
    const isNeeded = field.isRequired && field.schema.default === undefined;
    return isNeeded ? [{ field: path, message: 'Needed.' }] : [];
  }
  switch (field.kind) {
    case 'group':
      return schemaFaults(field.schema, value, path);
    case 'list':
      return asList(value).flatMap((item, index) => faultsOf(field.item, item, pathOf(path, index)));
    case 'table':
      return Object.entries(asObject(value)).flatMap(([key, item]) =>
        faultsOf(field.value, item, pathOf(path, key)),
      );
    default: {
      const message = faultOfValue(field, value);
      return message === null ? [] : [{ field: path, message }];
    }
  }
}

function faultOfValue({ kind, schema, ...field }: SchemaField, value: unknown): string | null {
  if (kind === 'number') return faultOfNumber(schema, value);
  if (kind === 'text') return faultOfText(schema, value);
  if (kind !== 'choice' || !('options' in field)) return null;
  return field.options.some((option) => option === value) ? null : 'Choose one.';
}

function faultOfNumber(schema: JsonSchema, value: unknown): string | null {
  if (typeof value !== 'number') return 'Give a number.';
  if (schema.type === 'integer' && !Number.isInteger(value)) return 'Give a whole number.';
  const { minimum = -Infinity, maximum = Infinity, exclusiveMinimum = -Infinity } = schema;
  if (value < minimum || value <= exclusiveMinimum) {
    return `Give ${minimum > -Infinity ? `${minimum} or more` : `more than ${exclusiveMinimum}`}.`;
  }
  if (value > maximum) return `Give ${maximum} or less.`;
  const { exclusiveMaximum = Infinity } = schema;
  return value >= exclusiveMaximum ? `Give less than ${exclusiveMaximum}.` : null;
}

function faultOfText(
  { minLength = 0, maxLength = Infinity, pattern }: JsonSchema,
  value: unknown,
): string | null {
  if (typeof value !== 'string') return 'Give a text.';
  if (value.length < minLength) return minLength === 1 ? 'Needed.' : `${minLength} characters at least.`;
  if (value.length > maxLength) return `${maxLength} characters at most.`;
  return pattern === undefined || matches(pattern, value) ? null : 'This form is not taken.';
}

/** A pattern that this browser cannot read is left to the server. */
function matches(pattern: string, value: string): boolean {
  try {
    return new RegExp(pattern, 'u').test(value);
  } catch {
    return true;
  }
}
