import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { type ModbusAddress, modbusAddressSchema, widthOf } from './modbus-address.schema.js';
import { planWrites, readBackWriteLimits } from './write-planner.js';

const holding = (address: number, type = 'u16', unit = 1): ModbusAddress =>
  modbusAddressSchema.parse({ unit, table: 'holding-register', address, type });

describe('planWrites', () => {
  it('joins neighbours in the given order only', () => {
    expect(planWrites([holding(1, 'f32'), holding(3), holding(4)])).toEqual([{ from: 0, to: 3 }]);
    expect(planWrites([holding(2), holding(1)])).toEqual([
      { from: 0, to: 1 },
      { from: 1, to: 2 },
    ]);
  });

  it('writes no more than 123 registers at once', () => {
    const many = Array.from({ length: 130 }, (_, index) => holding(index));
    expect(planWrites(many)).toEqual([
      { from: 0, to: 123 },
      { from: 123, to: 130 },
    ]);
  });

  it('joins neighbouring coils, up to 1968', () => {
    const coil = (address: number) => modbusAddressSchema.parse({ table: 'coil', address, type: 'bit' });
    expect(planWrites([0, 1, 2].map(coil))).toEqual([{ from: 0, to: 3 }]);
    expect(planWrites([0, 2].map(coil))).toHaveLength(2);
    const many = Array.from({ length: 1970 }, (_, address) => coil(address));
    expect(planWrites(many)).toEqual([
      { from: 0, to: 1968 },
      { from: 1968, to: 1970 },
    ]);
  });

  it('writes no more than 121 registers where they are read back', () => {
    const many = Array.from({ length: 123 }, (_, index) => holding(index));
    expect(planWrites(many, readBackWriteLimits)).toHaveLength(2);
  });

  it('joins bit fields of one register that do not overlap, and never a field with a whole register', () => {
    const field = (address: number, from: number, count: number): ModbusAddress =>
      modbusAddressSchema.parse({
        table: 'holding-register',
        address,
        type: 'u16',
        bits: { from, count },
      });
    expect(planWrites([field(1, 0, 4), field(1, 4, 4)])).toHaveLength(1);
    expect(planWrites([field(1, 0, 4), field(1, 3, 4)])).toHaveLength(2);
    expect(planWrites([field(1, 0, 4), field(2, 0, 4)])).toHaveLength(2);
    expect(planWrites([holding(0), field(1, 0, 4), holding(2)])).toHaveLength(3);
  });

  it('cuts any list into runs that follow one another and are neighbours inside', () => {
    const anyList = fc.array(
      fc.record({ at: fc.nat(9), type: fc.constantFrom('u16', 'f32'), unit: fc.constantFrom(1, 2) }),
    );
    fc.assert(
      fc.property(anyList, (items) => {
        const addresses = items.map(({ at, type, unit }) => holding(at, type, unit));
        const runs = planWrites(addresses);
        const order = runs.flatMap(({ from, to }) => Array.from({ length: to - from }, (_, i) => from + i));
        expect(order).toEqual(addresses.map((_, index) => index));
        for (const { from, to } of runs) {
          const run = addresses.slice(from, to);
          run.slice(1).forEach((address, index) => {
            const before = run[index]!;
            expect([address.unit, address.address]).toEqual([before.unit, before.address + widthOf(before)]);
          });
        }
      }),
    );
  });
});
