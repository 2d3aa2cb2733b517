import { describe, expect, it } from 'vitest';
import type { JsonSchema } from './json-schema.types.js';
import { fieldOf, labelOf } from './schema-field.js';
import { schemaFaults } from './schema-faults.js';

const object = (property: JsonSchema, isRequired = false): JsonSchema => ({
  type: 'object',
  properties: { a: property },
  ...(isRequired ? { required: ['a'] } : {}),
});

describe('what a value lacks', () => {
  it.each<[JsonSchema, unknown, string | null]>([
    [{ type: 'integer' }, 1, null],
    [{ type: 'integer' }, 1.5, 'Give a whole number.'],
    [{ type: 'number' }, 'much', 'Give a number.'],
    [{ type: 'number', minimum: 2 }, 1, 'Give 2 or more.'],
    [{ type: 'number', maximum: 2 }, 3, 'Give 2 or less.'],
    [{ type: 'number', exclusiveMinimum: 0 }, 0, 'Give more than 0.'],
    [{ type: 'number', exclusiveMaximum: 5 }, 5, 'Give less than 5.'],
    [{ type: 'string', minLength: 1 }, '', 'Needed.'],
    [{ type: 'string', minLength: 3 }, 'ab', '3 characters at least.'],
    [{ type: 'string', maxLength: 1 }, 'ab', '1 characters at most.'],
    [{ type: 'string', pattern: '^x' }, 'y', 'This form is not taken.'],
    [{ type: 'string', pattern: '(' }, 'y', null],
    [{ type: 'string', enum: ['x'] }, 'y', 'Choose one.'],
    [{ type: 'string', enum: ['x'] }, 'x', null],
    [{ type: 'boolean', default: false }, true, null],
  ])('%j with %j: %s', (property, value, message) => {
    expect(schemaFaults(object(property), { a: value }).map((fault) => fault.message)).toEqual(
      message === null ? [] : [message],
    );
  });

  it('is named by its path, into objects, lists and tables', () => {
    const whole = object({ type: 'number' }, true);
    const schema: JsonSchema = {
      type: 'object',
      properties: {
        group: whole,
        list: { type: 'array', items: whole },
        table: { type: 'object', additionalProperties: { type: 'number' } },
      },
    };
    const value = { group: {}, list: [{ a: 1 }, {}], table: { on: 'x' } };
    expect(schemaFaults(schema, value, 'address').map(({ field }) => field)).toEqual([
      'address.group.a',
      'address.list[1].a',
      'address.table.on',
    ]);
  });

  it('is nothing where it is left out and may be', () => {
    expect(schemaFaults(object({ type: 'number' }), {})).toEqual([]);
    expect(schemaFaults(object({ type: 'number', default: 1 }, true), {})).toEqual([]);
  });
});

describe('a field', () => {
  it.each<[JsonSchema, string]>([
    [
      {
        anyOf: [
          { type: 'string', minLength: 1 },
          { type: 'string', const: '' },
        ],
      },
      'text',
    ],
    [{ anyOf: [{ type: 'number' }, { type: 'null' }] }, 'number'],
    [{ anyOf: [{ const: 'a' }, { const: 'b' }] }, 'choice'],
    [{ anyOf: [{ type: 'number' }, { type: 'string' }] }, 'json'],
    [{ type: 'object' }, 'json'],
    [{ type: 'array' }, 'json'],
    [{}, 'json'],
  ])('of %j is a %s', (schema, kind) => {
    expect(fieldOf('a', schema, true).kind).toBe(kind);
  });

  it.each([
    ['wordOrder', 'Word order'],
    ['timeoutMs', 'Timeout ms'],
    ['', 'Value'],
  ])('called %s is labelled %s', (name, label) => {
    expect(labelOf(name)).toBe(label);
  });
});
