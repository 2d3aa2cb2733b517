import { describe, expect, it } from 'vitest';
import { rigSchema } from './rig.schema.js';

const display = { min: 0, max: 100, decimals: 1 };
const connection = { id: 'plc', title: 'PLC', adapter: 'in-memory', configuration: {} };
const sensor = (id: string, change: object = {}) => ({
  kind: 'sensor',
  id,
  title: id,
  display,
  connection: 'plc',
  address: {},
  ...change,
});
const faultsOf = (channels: object[]) => {
  const rig = { id: 'bench-1', title: 'Bench', periodMs: 50, connections: [connection], channels };
  const { error } = rigSchema.safeParse(rig);
  return (error?.issues ?? []).map(({ path, message }) => `${path.join('.')}: ${message}`);
};

describe('a rig', () => {
  it('is accepted with channels of different names on its connections', () => {
    expect(faultsOf([sensor('o2'), sensor('co')])).toEqual([]);
  });

  it.each(['objective', 'not', 'true'])('has no channel "%s", which expressions could not name', (id) => {
    expect(faultsOf([sensor(id)])).toEqual([
      `channels.0.id: "${id}" means something in expressions: choose another name.`,
    ]);
  });

  it.each([
    ['a name used twice', [sensor('o2'), sensor('o2')], 'channels.1.id'],
    ['an unknown connection', [sensor('o2', { connection: 'ghost' })], 'channels.0.connection'],
    [
      'a display range upside down',
      [sensor('o2', { display: { ...display, max: 0 } })],
      'channels.0.display.min',
    ],
    ['a name with a capital first', [sensor('O2')], 'channels.0.id'],
  ])('is refused with %s, at the field', (_name, channels, field) => {
    expect(faultsOf(channels).map((fault) => fault.split(':')[0])).toEqual([field]);
  });
});
