import type { JsonSchema } from './json-schema.types.js';

interface FieldBase {
  /** Name of the property; empty for an item of a list. */
  name: string;
  label: string;
  help: string;
  isRequired: boolean;
  schema: JsonSchema;
}

/** One field of a form: how it is drawn follows from `kind`. */
export type SchemaField = FieldBase &
  (
    | { kind: 'text' }
    | { kind: 'number' }
    | { kind: 'switch' }
    | { kind: 'json' }
    | { kind: 'choice'; options: readonly (string | number | boolean)[] }
    | { kind: 'group'; fields: readonly SchemaField[] }
    | { kind: 'list'; item: SchemaField }
    | { kind: 'table'; value: SchemaField }
  );

/** Fields of one kind, or of several. */
export type FieldOf<Kind extends SchemaField['kind']> = Extract<SchemaField, { kind: Kind }>;

/** The fields of an object, in the order of its schema. */
export function fieldsOf(schema: JsonSchema): SchemaField[] {
  const required = new Set(schema.required);
  return Object.entries(schema.properties ?? {}).map(([name, property]) =>
    fieldOf(name, property, required.has(name)),
  );
}

/** Only one schema of several alternatives can be drawn: texts of any kind are a text, a null means "left out". */
function oneOf(schema: JsonSchema): JsonSchema {
  const given = schema.anyOf?.filter(({ type }) => type !== 'null');
  if (!given || given.length === 0) return schema;
  const [first] = given;
  if (given.length === 1) return { ...first, ...schema };
  if (given.every(({ type }) => type === 'string')) return { ...schema, type: 'string' };
  if (given.every((choice) => 'const' in choice)) return { ...schema, enum: given.map((c) => c.const) };
  return schema;
}

export function fieldOf(name: string, declared: JsonSchema, isRequired: boolean): SchemaField {
  const schema = oneOf(declared);
  const base: FieldBase = {
    name,
    label: schema.title ?? labelOf(name),
    help: helpOf(schema),
    isRequired,
    schema,
  };
  const options = optionsOf(schema, isRequired);
  if (options) return { ...base, kind: 'choice', options };
  switch (schema.type) {
    case 'string':
      return { ...base, kind: 'text' };
    case 'number':
    case 'integer':
      return { ...base, kind: 'number' };
    case 'boolean':
      return { ...base, kind: 'switch' };
    case 'array':
      return schema.items
        ? { ...base, kind: 'list', item: fieldOf('', schema.items, true) }
        : { ...base, kind: 'json' };
    case 'object':
      return objectField(base);
    default:
      return { ...base, kind: 'json' };
  }
}

function objectField(base: FieldBase): SchemaField {
  const { schema } = base;
  if (schema.properties) return { ...base, kind: 'group', fields: fieldsOf(schema) };
  if (typeof schema.additionalProperties === 'object') {
    return { ...base, kind: 'table', value: fieldOf('', schema.additionalProperties, true) };
  }
  return { ...base, kind: 'json' };
}

/** A boolean that may be left out has three states, which a switch cannot show. */
function optionsOf(schema: JsonSchema, isRequired: boolean): (string | number | boolean)[] | null {
  if (schema.enum) return schema.enum.filter(isOption);
  if (schema.type === 'boolean' && !isRequired && schema.default === undefined) return [true, false];
  return null;
}

function isOption(value: unknown): value is string | number | boolean {
  return typeof value === 'string' || typeof value === 'number' || typeof value === 'boolean';
}

/**
 * A label from the name of a property.
 *
 * @example
 * labelOf('wordOrder') // 'Word order'
 */
export function labelOf(name: string): string {
  const words = name.replace(/([a-z0-9])([A-Z])/g, '$1 $2').toLowerCase();
  return words === '' ? 'Value' : words[0]?.toUpperCase() + words.slice(1);
}

function helpOf({ description = '', minimum, maximum }: JsonSchema): string {
  if (minimum === undefined || maximum === undefined) return description;
  const range = `${minimum} to ${maximum}.`;
  return description === '' ? range : `${description} ${range}`;
}
