import fc from 'fast-check';
import { expect } from 'vitest';
import { channelOfRow, rowOfChannel } from './channel-row.js';
import { addressColumns } from './channel-table-columns.js';
import { readChannelTable, writeChannelTable, type TableSetting } from './channel-table.js';

/** Addresses of every kind of field that an adapter may ask for. */
const registers = {
  type: 'object',
  required: ['register', 'type', 'query'],
  properties: {
    register: { type: 'integer', title: 'Register' },
    type: { type: 'string', enum: ['u16', 'f32'] },
    scale: { type: 'number', default: 1 },
    query: { type: 'string' },
    isMasked: { type: 'boolean' },
    bits: { type: 'object', properties: { from: { type: 'integer' }, count: { type: 'integer' } } },
    answers: { type: 'array', items: { type: 'string' } },
    parity: {
      anyOf: [
        { const: 1, type: 'number' },
        { const: 2, type: 'number' },
      ],
    },
  },
} as const;

export const setting: TableSetting = {
  connections: ['plc', 'line', 'odd'],
  columnsOf: (id) => (id === 'odd' ? null : addressColumns(registers)),
};
export const only = (...connections: string[]): TableSetting => ({ ...setting, connections });

const finite = fc.double({ noNaN: true, noDefaultInfinity: true }).map((value) => (value === 0 ? 0 : value));
const text = fc.string({ unit: 'binary', maxLength: 12 }).filter((s) => s.trim() !== '');
const optional = { requiredKeys: ['register', 'type', 'query'] as ('register' | 'type' | 'query')[] };
const address = fc.record(
  {
    register: fc.integer({ min: 0, max: 65_535 }),
    type: fc.constantFrom('u16', 'f32'),
    query: fc.string({ unit: 'binary', maxLength: 12 }),
    scale: finite,
    isMasked: fc.boolean(),
    bits: fc.record({ from: fc.nat(15), count: fc.nat(16) }),
    answers: fc.array(fc.string({ maxLength: 5 }), { maxLength: 3 }),
    parity: fc.constantFrom(1, 2),
  },
  optional,
);
const display = fc.record({ min: finite, max: finite, decimals: fc.nat(9) });
const base = {
  title: text.map((s) => s.trim()),
  unit: fc.string({ unit: 'binary', maxLength: 8 }),
  display,
};
const wired = { ...base, connection: fc.constantFrom('plc', 'line'), address };
const odd = fc.dictionary(
  fc.stringMatching(/^[a-z]{1,6}$/),
  fc.jsonValue({ maxDepth: 1 }).filter((v) => v !== null && !Array.isArray(v)),
  { maxKeys: 3 },
);
const axis = fc.record({
  title: base.title,
  unit: base.unit,
  from: finite,
  step: finite.map(Math.abs).filter((v) => v > 0),
});
const kinds = fc.oneof(
  fc.record({ kind: fc.constant('sensor' as const), ...wired }),
  fc.record({ kind: fc.constant('actuator' as const), ...wired }),
  fc.record({ kind: fc.constant('sensor' as const), ...base, connection: fc.constant('odd'), address: odd }),
  fc.record({ kind: fc.constant('trace' as const), ...wired, axis }),
  fc.record({ kind: fc.constant('derived' as const), ...base, expression: text.map((s) => s.trim()) }),
);
const channels = fc
  .array(kinds, { minLength: 1, maxLength: 8 })
  .map((list) => list.map((channel, index) => ({ id: `c${index}`, ...channel })));

/** Export and import give every channel back, whatever is in it. */
export function checkRoundTrip(numRuns: number): void {
  const property = fc.property(channels, (given) => {
    const rows = given.map((channel) => rowOfChannel(channel, setting.columnsOf));
    const back = readChannelTable(writeChannelTable(rows, setting), setting);
    expect(back.faults).toEqual([]);
    expect(back.rows.map((row) => channelOfRow(row, setting.columnsOf).channel)).toEqual(given);
  });
  fc.assert(property, { numRuns });
}
