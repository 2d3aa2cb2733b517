import { describe, expect, it } from 'vitest';
import { modbusAddressSchema } from './modbus-address.schema.js';

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

  it('takes the last address for a 16-bit value', () => {
    expect(faultsOf({ address: 65_535 })).toEqual([]);
  });
});
