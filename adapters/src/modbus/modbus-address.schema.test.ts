import { describe, expect, it } from 'vitest';
import { modbusAddressSchema, modbusTcpAddressSchema } from './modbus-address.schema.js';

const faultsOf = (more: object): string[] => {
  const value = { table: 'holding-register', address: 0, type: 'u16', ...more };
  const result = modbusAddressSchema.safeParse(value);
  return result.success ? [] : result.error.issues.map((issue) => issue.path.join('.'));
};

describe('a modbus address', () => {
  it('fills in unit, orders, scale and offset', () => {
    expect(modbusAddressSchema.parse({ table: 'coil', address: 3, type: 'bit' })).toEqual({
      unit: 1,
      table: 'coil',
      address: 3,
      type: 'bit',
      wordOrder: 'big',
      byteOrder: 'big',
      scale: 1,
      offset: 0,
    });
  });

  it.each([
    [{ unit: 0 }, 'unit'],
    [{ unit: 248 }, 'unit'],
    [{ address: 65_536 }, 'address'],
    [{ address: 65_535, type: 'f32' }, 'address'],
    [{ type: 'bit' }, 'type'],
    [{ table: 'discrete-input' }, 'type'],
    [{ scale: 0 }, 'scale'],
    [{ offset: NaN }, 'offset'],
    [{ register: 3 }, ''],
  ])('names the field at fault in %o', (more, field) => {
    expect(faultsOf(more)).toEqual([field]);
  });

  it.each([
    [{ bits: { from: 15, count: 2 } }, ['bits']],
    [{ type: 'i16', bits: { from: 0 } }, ['bits']],
    [{ bits: { from: 16 } }, ['bits.from', 'bits']],
    [{ points: 512, bits: { from: 0 } }, ['bits']],
    [{ table: 'coil', type: 'bit', points: 2 }, ['points']],
    [{ stamp: 4 }, ['stamp']],
    [{ address: 65_000, points: 537 }, ['address']],
  ])('names the fields that do not go together in %o', (more, fields) => {
    expect(faultsOf(more)).toEqual(fields);
  });

  it('takes bit fields and traces', () => {
    expect(faultsOf({ bits: { from: 12, count: 4 } })).toEqual([]);
    expect(faultsOf({ address: 0, points: 512, type: 'f32', stamp: 2000 })).toEqual([]);
  });

  it('refuses the broadcast address and says why', () => {
    const result = modbusAddressSchema.safeParse({ unit: 0, table: 'coil', address: 0, type: 'bit' });
    expect(result.error?.issues[0]?.message).toMatch(/^Unit 0 is the broadcast address, which no device/);
  });

  it('knows unit 255 on TCP only', () => {
    const of = (unit: number) => ({ unit, table: 'coil', address: 0, type: 'bit' });
    expect(modbusTcpAddressSchema.safeParse(of(255)).success).toBe(true);
    expect(modbusTcpAddressSchema.safeParse(of(248)).success).toBe(false);
    expect(modbusAddressSchema.safeParse(of(255)).success).toBe(false);
  });

  it('takes the last address for a 16-bit value', () => {
    expect(faultsOf({ address: 65_535 })).toEqual([]);
  });
});
