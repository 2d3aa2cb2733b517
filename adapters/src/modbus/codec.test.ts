import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { decodeValue, encodeRaw, factsOfCoding, type ModbusCoding, wordsOfRaw } from './codec.js';
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
        const bound = of.type === 'f32' ? 1e6 : Infinity;
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
        fc.pre(of.type !== 'bit' && of.type !== 'f32');
        const whole = { ...of, scale: 1, offset: 0 };
        const width = of.type === 'u16' || of.type === 'i16' ? 1 : 2;
        const words = [first, second].slice(0, width);
        expect(wordsOfRaw(decodeValue(bytesOf(words), 0, whole), whole)).toEqual(words);
      }),
    );
  });
});
