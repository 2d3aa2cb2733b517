import type { AddressFacts } from '../contract.js';
import type { ModbusAddress, ModbusType } from './modbus-address.schema.js';

/** What the codec needs of an address. */
export type ModbusCoding = Pick<ModbusAddress, 'type' | 'wordOrder' | 'byteOrder' | 'scale' | 'offset'>;

/** Greatest finite single-precision number (IEEE 754 binary32): (2 − 2^−23) · 2^127. */
const maxFloat32 = (2 - 2 ** -23) * 2 ** 127;

const rawRanges: Readonly<Record<ModbusType, readonly [min: number, max: number]>> = {
  bit: [0, 1],
  u16: [0, 65_535],
  i16: [-32_768, 32_767],
  u32: [0, 4_294_967_295],
  i32: [-2_147_483_648, 2_147_483_647],
  f32: [-maxFloat32, maxFloat32],
};

const scratch = new DataView(new ArrayBuffer(4));

function swapBytes(word: number): number {
  return ((word & 0xff) << 8) | (word >>> 8);
}

function wordAt(bytes: Uint8Array, at: number, byteOrder: ModbusCoding['byteOrder']): number {
  const first = bytes[at] ?? 0;
  const second = bytes[at + 1] ?? 0;
  return byteOrder === 'big' ? (first << 8) | second : (second << 8) | first;
}

function unsigned32At(bytes: Uint8Array, at: number, coding: ModbusCoding): number {
  const first = wordAt(bytes, at, coding.byteOrder);
  const second = wordAt(bytes, at + 2, coding.byteOrder);
  return coding.wordOrder === 'big' ? first * 65_536 + second : second * 65_536 + first;
}

function rawRegisterValue(bytes: Uint8Array, at: number, coding: ModbusCoding): number {
  switch (coding.type) {
    case 'bit':
      return ((bytes[at >>> 3] ?? 0) >>> (at & 7)) & 1;
    case 'u16':
      return wordAt(bytes, at, coding.byteOrder);
    case 'i16':
      return (wordAt(bytes, at, coding.byteOrder) << 16) >> 16;
    case 'u32':
      return unsigned32At(bytes, at, coding);
    case 'i32':
      return unsigned32At(bytes, at, coding) | 0;
    case 'f32':
      scratch.setUint32(0, unsigned32At(bytes, at, coding));
      return scratch.getFloat32(0);
  }
}

/**
 * The engineering value that the payload of a read answer carries.
 *
 * A float that is not a number or not finite comes out as it is: whether to trust it is judged by
 * the reader of the value, who marks it bad.
 *
 * @param at place of the value: bytes from the start for registers, bits from the start for `bit`
 * @realtime safe: allocates nothing
 */
export function decodeValue(bytes: Uint8Array, at: number, coding: ModbusCoding): number {
  return rawRegisterValue(bytes, at, coding) * coding.scale + coding.offset;
}

/** Why a value cannot go over the wire, as text that says what can. */
export interface EncodeFault {
  fault: string;
}

/**
 * The raw value nearest to an engineering value; ties go up.
 *
 * @returns the raw number, or a fault where the value is not finite or the type cannot carry it
 */
export function encodeRaw(value: number, coding: ModbusCoding): number | EncodeFault {
  if (!Number.isFinite(value)) return { fault: `${value} is no number that can be written.` };
  const exact = (value - coding.offset) / coding.scale;
  const raw = coding.type === 'f32' ? Math.fround(exact) : Math.round(exact);
  const [min, max] = rawRanges[coding.type];
  if (!(raw >= min && raw <= max)) {
    const facts = factsOfCoding(coding);
    return { fault: `${value} is outside what ${coding.type} can carry here: ${facts.min} to ${facts.max}.` };
  }
  return raw;
}

/**
 * The words of a raw value in the order in which they go over the wire.
 *
 * @example
 * wordsOfRaw(123456, { type: 'f32', wordOrder: 'little', byteOrder: 'big', scale: 1, offset: 0 }) // [0x2000, 0x47f1]
 */
export function wordsOfRaw(raw: number, coding: ModbusCoding): number[] {
  const toWire = (word: number): number => (coding.byteOrder === 'big' ? word : swapBytes(word));
  if (coding.type === 'bit' || coding.type === 'u16' || coding.type === 'i16') return [toWire(raw & 0xffff)];
  if (coding.type === 'f32') scratch.setFloat32(0, raw);
  else scratch.setUint32(0, raw >>> 0);
  const high = toWire(scratch.getUint16(0));
  const low = toWire(scratch.getUint16(2));
  return coding.wordOrder === 'big' ? [high, low] : [low, high];
}

/** Grid and range of the engineering values that this coding can carry; quantum 0 for floats. */
export function factsOfCoding(coding: ModbusCoding): Omit<AddressFacts, 'isWritable'> {
  const [rawMin, rawMax] = rawRanges[coding.type];
  const ends = [rawMin * coding.scale + coding.offset, rawMax * coding.scale + coding.offset] as const;
  return {
    quantum: coding.type === 'f32' ? 0 : Math.abs(coding.scale),
    quantumOrigin: coding.offset,
    min: Math.min(...ends),
    max: Math.max(...ends),
  };
}
