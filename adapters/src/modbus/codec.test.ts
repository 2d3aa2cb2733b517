import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { decodeValue, encodeRaw, factsOfCoding, type ModbusCoding, wireMaskOf, wordsOfRaw } from './codec.js';
import { modbusTypes } from './modbus-address.schema.js';

const plain: ModbusCoding = { type: 'u16', wordOrder: 'big', byteOrder: 'big', scale: 1, offset: 0 };
const coding = (more: Partial<ModbusCoding>): ModbusCoding => ({ ...plain, ...more });
const decodeHex = (hex: string, more: Partial<ModbusCoding>): number =>
  decodeValue(Buffer.from(hex.replaceAll(' ', ''), 'hex'), 0, coding(more));

function bytesOf(words: readonly number[]): Buffer {
  const bytes = Buffer.alloc(words.length * 2);
  words.forEach((word, index) => bytes.writeUInt16BE(word, index * 2));
  return bytes;
}

function roundTrip(value: number, of: ModbusCoding): number {
  const raw = encodeRaw(value, of);
  if (typeof raw !== 'number') throw new Error(raw.fault);
  if (of.type === 'bit') return decodeValue(Uint8Array.of(raw), 0, of);
  return decodeValue(bytesOf(wordsOfRaw(raw, of)), 0, of);
}

describe('words and floats', () => {
  // IEEE 754 binary32 encodings; the four orders of 123456.0 = 47F12000 as the libmodbus manual
  // (modbus_get_float_abcd and its three siblings) gives them.
  it.each([
    ['47F1 2000', 'big', 'big', 123_456],
    ['2000 47F1', 'little', 'big', 123_456],
    ['F147 0020', 'big', 'little', 123_456],
    ['0020 F147', 'little', 'little', 123_456],
    ['3F80 0000', 'big', 'big', 1],
    ['C000 0000', 'big', 'big', -2],
    ['4049 0FDB', 'big', 'big', Math.fround(Math.PI)],
    ['3DCC CCCD', 'big', 'big', Math.fround(0.1)],
    ['3EAA AAAB', 'big', 'big', Math.fround(1 / 3)],
    ['42C8 8000', 'big', 'big', 100.25],
    ['7F80 0000', 'big', 'big', Infinity],
  ] as const)('%s with %s words and %s bytes is %d', (hex, wordOrder, byteOrder, value) => {
    const of = coding({ type: 'f32', wordOrder, byteOrder });
    expect(decodeHex(hex, of)).toBe(value);
    const words = wordsOfRaw(value, of).map((word) => word.toString(16).toUpperCase().padStart(4, '0'));
    expect(words.join(' ')).toBe(hex);
  });

  it('reads a negative zero as zero and lets a NaN through as NaN', () => {
    expect(decodeHex('8000 0000', { type: 'f32' })).toBe(0);
    expect(decodeHex('7FC0 0000', { type: 'f32' })).toBeNaN();
  });

  it('decodes the registers of the examples of the application protocol', () => {
    // MODBUS Application Protocol V1.1b3, 6.3 (022B 0000 0064 is 555, 0, 100) and 6.4 (000A is 10).
    const bytes = Buffer.from('022B00000064', 'hex');
    expect([0, 2, 4].map((at) => decodeValue(bytes, at, plain))).toEqual([555, 0, 100]);
    expect(decodeHex('000A', {})).toBe(10);
  });

  it('decodes the coils of the example of the application protocol', () => {
    // MODBUS Application Protocol V1.1b3, 6.1: CD 6B 05 is coils 20 to 38; CD is 1100 1101, coil 27 to 20.
    const bytes = Uint8Array.of(0xcd, 0x6b, 0x05);
    const bits = Array.from({ length: 19 }, (_, at) => decodeValue(bytes, at, coding({ type: 'bit' })));
    expect(bits).toEqual([1, 0, 1, 1, 0, 0, 1, 1, 1, 1, 0, 1, 0, 1, 1, 0, 1, 0, 1]);
  });

  it.each([
    ['8000', 'i16', -32_768],
    ['FFFF', 'i16', -1],
    ['FFFF FFFF', 'u32', 4_294_967_295],
    ['8000 0000', 'i32', -2_147_483_648],
    ['0001 0002', 'u32', 65_538],
  ] as const)('%s as %s is %d', (hex, type, value) => {
    expect(decodeHex(hex, { type })).toBe(value);
  });
});

describe('values of 64 bits', () => {
  const orders = [
    ['0123 4567 89AB CDEF', 'big', 'big'],
    ['CDEF 89AB 4567 0123', 'little', 'big'],
    ['2301 6745 AB89 EFCD', 'big', 'little'],
    ['EFCD AB89 6745 2301', 'little', 'little'],
  ] as const;

  it.each(orders)('%s with %s words and %s bytes is 0123456789ABCDEF', (hex, wordOrder, byteOrder) => {
    const of = coding({ type: 'u64', wordOrder, byteOrder });
    expect(decodeHex(hex, of)).toBe(Number(0x0123456789abcdefn));
  });

  // IEEE 754 binary64 encodings: 1.5 is 3FF8…; π as every table has it.
  it.each([
    ['3FF8 0000 0000 0000', 1.5],
    ['4009 21FB 5444 2D18', Math.PI],
    ['C05D A800 0000 0000', -118.625],
  ] as const)('%s as f64 is %d', (hex, value) => {
    expect(decodeHex(hex, { type: 'f64' })).toBe(value);
    expect(bytesOf(wordsOfRaw(value, coding({ type: 'f64' })))).toEqual(
      Buffer.from(hex.replaceAll(' ', ''), 'hex'),
    );
  });

  it('reads what the platform reads, and writes what it writes', () => {
    const bytes = Buffer.alloc(8);
    fc.assert(
      fc.property(fc.bigInt(-(2n ** 63n), 2n ** 63n - 1n), fc.maxSafeInteger(), (big, small) => {
        bytes.writeBigInt64BE(big);
        expect(decodeValue(bytes, 0, coding({ type: 'i64' }))).toBe(Number(big));
        expect(decodeValue(bytes, 0, coding({ type: 'u64' }))).toBe(Number(bytes.readBigUInt64BE()));
        bytes.writeBigInt64BE(BigInt(small));
        expect(bytesOf(wordsOfRaw(small, coding({ type: 'i64' })))).toEqual(bytes);
      }),
    );
  });

  it('are written only as far as a number is exact', () => {
    expect(encodeRaw(2 ** 53, coding({ type: 'u64' }))).toHaveProperty('fault');
    expect(encodeRaw(2 ** 53 - 1, coding({ type: 'u64' }))).toBe(2 ** 53 - 1);
  });
});

describe('bit fields', () => {
  const field = (from: number, count: number, byteOrder: 'big' | 'little' = 'big'): ModbusCoding =>
    coding({ bits: { from, count }, byteOrder });

  it('are read from their place', () => {
    expect(decodeHex('0B40', field(8, 4))).toBe(11);
    expect(decodeHex('0B40', field(6, 1))).toBe(1);
    expect(decodeHex('400B', field(8, 4, 'little'))).toBe(11);
    expect(decodeHex('FFFF', field(0, 16))).toBe(65_535);
  });

  it('are written to their place, with a mask of their own bits', () => {
    expect(wordsOfRaw(11, field(8, 4))).toEqual([0x0b00]);
    expect(wireMaskOf(field(8, 4))).toBe(0x0f00);
    expect(wordsOfRaw(11, field(8, 4, 'little'))).toEqual([0x000b]);
    expect(wireMaskOf(field(8, 4, 'little'))).toBe(0x000f);
  });

  it('carry what fits into their bits', () => {
    expect(encodeRaw(16, field(8, 4))).toHaveProperty('fault');
    expect(factsOfCoding(field(8, 4))).toMatchObject({ min: 0, max: 15, quantum: 1 });
  });
});

describe('encoding', () => {
  it('rounds to the nearest raw value, also where the division is not exact', () => {
    expect(encodeRaw(0.3, coding({ scale: 0.1 }))).toBe(3);
    expect(encodeRaw(12.34, coding({ scale: 0.1 }))).toBe(123);
    expect(encodeRaw(12.36, coding({ scale: 0.1 }))).toBe(124);
    expect(encodeRaw(-20.5, coding({ type: 'i16', scale: 0.5, offset: 10 }))).toBe(-61);
  });

  it.each([
    [65_535.5, 'u16'],
    [-0.6, 'u16'],
    [32_768, 'i16'],
    [-2_147_483_649, 'i32'],
    [4e38, 'f32'],
    [2, 'bit'],
    [NaN, 'f32'],
    [-Infinity, 'f32'],
  ] as const)('refuses %d as %s', (value, type) => {
    expect(encodeRaw(value, coding({ type }))).toHaveProperty('fault');
  });

  it('says what the type can carry, in the engineering unit', () => {
    const result = encodeRaw(700, coding({ scale: 0.01 }));
    expect(result).toEqual({
      fault: expect.stringContaining('700 is outside what u16 can carry here: 0 to 655.35'),
    });
  });
});

const anyCoding = fc.record({
  type: fc.constantFrom(...modbusTypes),
  wordOrder: fc.constantFrom('big', 'little'),
  byteOrder: fc.constantFrom('big', 'little'),
  scale: fc.constantFrom(1, -1, 0.1, 0.001, 10, -0.5),
  offset: fc.constantFrom(0, -40, 273.15),
}) as fc.Arbitrary<ModbusCoding>;

describe('every coding', () => {
  it('reads back what it wrote to within half a step, or one part in 2^22 for floats', () => {
    fc.assert(
      fc.property(anyCoding, fc.double({ min: 0, max: 1, noNaN: true }), (of, place) => {
        const { min, max, quantum } = factsOfCoding(of);
        const bound = of.type === 'f32' || of.type === 'f64' ? 1e6 : Infinity;
        const low = Math.max(min, -bound);
        const value = low + place * (Math.min(max, bound) - low);
        const error = Math.abs(roundTrip(value, of) - value);
        const rounding = 1e-9 * (Math.abs(value) + Math.abs(of.offset) + 1);
        const floating = (Math.abs(value) + Math.abs(of.offset)) * 2 ** -22;
        expect(error).toBeLessThanOrEqual(quantum > 0 ? quantum / 2 + rounding : floating);
      }),
    );
  });

  it('takes exactly the values within its range', () => {
    fc.assert(
      fc.property(anyCoding, fc.double({ noNaN: true, min: -1e12, max: 1e12 }), (of, value) => {
        const { min, max, quantum } = factsOfCoding(of);
        const isWithin = value >= min && value <= max;
        const isNearEdge = Math.min(Math.abs(value - min), Math.abs(value - max)) <= quantum;
        fc.pre(!isNearEdge);
        expect(typeof encodeRaw(value, of) === 'number').toBe(isWithin);
      }),
    );
  });

  it('brings raw words back unchanged', () => {
    fc.assert(
      fc.property(anyCoding, fc.nat(0xffff), fc.nat(0xffff), (of, first, second) => {
        fc.pre(['u16', 'i16', 'u32', 'i32'].includes(of.type));
        const whole = { ...of, scale: 1, offset: 0 };
        const width = of.type === 'u16' || of.type === 'i16' ? 1 : 2;
        const words = [first, second].slice(0, width);
        expect(wordsOfRaw(decodeValue(bytesOf(words), 0, whole), whole)).toEqual(words);
      }),
    );
  });
});
