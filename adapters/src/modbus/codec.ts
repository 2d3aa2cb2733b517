import type { AddressFacts } from '../contract.js';
import {
  type BitField,
  type ModbusAddress,
  type ModbusType,
  registersOfType,
} from './modbus-address.schema.js';

/** What the codec needs of an address. */
export type ModbusCoding = Pick<
  ModbusAddress,
  'type' | 'wordOrder' | 'byteOrder' | 'scale' | 'offset' | 'bits'
>;

/** Greatest finite single-precision number (IEEE 754 binary32): (2 − 2^−23) · 2^127. */
const maxFloat32 = (2 - 2 ** -23) * 2 ** 127;

/** 64-bit integers go as far as a number holds each of them exactly. */
const rawRanges: Readonly<Record<ModbusType, readonly [min: number, max: number]>> = {
  bit: [0, 1],
  u16: [0, 65_535],
  i16: [-32_768, 32_767],
  u32: [0, 4_294_967_295],
  i32: [-2_147_483_648, 2_147_483_647],
  f32: [-maxFloat32, maxFloat32],
  u64: [0, Number.MAX_SAFE_INTEGER],
  i64: [Number.MIN_SAFE_INTEGER, Number.MAX_SAFE_INTEGER],
  f64: [-Number.MAX_VALUE, Number.MAX_VALUE],
};

const scratch = new DataView(new ArrayBuffer(8));

export function swapBytes(word: number): number {
  return ((word & 0xff) << 8) | (word >>> 8);
}

function wordAt(bytes: Uint8Array, at: number, byteOrder: ModbusCoding['byteOrder']): number {
  const first = bytes[at] ?? 0;
  const second = bytes[at + 1] ?? 0;
  return byteOrder === 'big' ? (first << 8) | second : (second << 8) | first;
}

/** Two neighbouring words, the higher first; `rank` 0 is the highest pair of the value. */
function pairAt(bytes: Uint8Array, at: number, coding: ModbusCoding, rank: number): number {
  const isBig = coding.wordOrder === 'big';
  const last = registersOfType[coding.type] - 1;
  const high = isBig ? 2 * rank : last - 2 * rank;
  const low = isBig ? high + 1 : high - 1;
  const highWord = wordAt(bytes, at + 2 * high, coding.byteOrder);
  return highWord * 65_536 + wordAt(bytes, at + 2 * low, coding.byteOrder);
}

function floatAt(bytes: Uint8Array, at: number, coding: ModbusCoding): number {
  scratch.setUint32(0, pairAt(bytes, at, coding, 0));
  if (coding.type === 'f32') return scratch.getFloat32(0);
  scratch.setUint32(4, pairAt(bytes, at, coding, 1));
  return scratch.getFloat64(0);
}

function rawRegisterValue(bytes: Uint8Array, at: number, coding: ModbusCoding): number {
  switch (coding.type) {
    case 'bit':
      return ((bytes[at >>> 3] ?? 0) >>> (at & 7)) & 1;
    case 'u16': {
      const word = wordAt(bytes, at, coding.byteOrder);
      return coding.bits ? (word & maskOf(coding.bits)) >>> coding.bits.from : word;
    }
    case 'i16':
      return (wordAt(bytes, at, coding.byteOrder) << 16) >> 16;
    case 'u32':
      return pairAt(bytes, at, coding, 0);
    case 'i32':
      return pairAt(bytes, at, coding, 0) | 0;
    case 'u64':
      return pairAt(bytes, at, coding, 0) * 2 ** 32 + pairAt(bytes, at, coding, 1);
    case 'i64':
      return (pairAt(bytes, at, coding, 0) | 0) * 2 ** 32 + pairAt(bytes, at, coding, 1);
    case 'f32':
    case 'f64':
      return floatAt(bytes, at, coding);
  }
}

/**
 * The engineering value that the payload of a read answer carries.
 *
 * A float that is not a number or not finite comes out as it is: whether to trust it is judged by
 * the reader of the value, who marks it bad. A 64-bit integer beyond 2^53 comes out as the nearest number.
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

function rawRangeOf({ type, bits }: ModbusCoding): readonly [min: number, max: number] {
  return bits ? [0, 2 ** bits.count - 1] : rawRanges[type];
}

function isFloat(type: ModbusType): boolean {
  return type === 'f32' || type === 'f64';
}

/**
 * The raw value nearest to an engineering value; ties go up.
 *
 * @returns the raw number, or a fault where the value is not finite or the type cannot carry it
 */
export function encodeRaw(value: number, coding: ModbusCoding): number | EncodeFault {
  if (!Number.isFinite(value)) return { fault: `${value} is no number that can be written.` };
  const exact = (value - coding.offset) / coding.scale;
  const single = coding.type === 'f32' ? Math.fround(exact) : exact;
  const raw = isFloat(coding.type) ? single : Math.round(exact);
  const [min, max] = rawRangeOf(coding);
  if (raw >= min && raw <= max) return raw;
  const facts = factsOfCoding(coding);
  // At the very ends the way back to the raw value may round to the next one.
  if (value >= facts.min && value <= facts.max) return Math.min(Math.max(raw, min), max);
  return { fault: `${value} is outside what ${coding.type} can carry here: ${facts.min} to ${facts.max}.` };
}

/**
 * The words of a raw value in the order in which they go over the wire; of a bit field, its own bits in
 * their place.
 *
 * @example
 * wordsOfRaw(123456, { type: 'f32', wordOrder: 'little', byteOrder: 'big', scale: 1, offset: 0 }) // [0x2000, 0x47f1]
 */
export function wordsOfRaw(raw: number, coding: ModbusCoding): number[] {
  const words = wordsFromHighest(raw, coding);
  const onWire = coding.byteOrder === 'big' ? words : words.map(swapBytes);
  return coding.wordOrder === 'big' ? onWire : onWire.reverse();
}

function wordsFromHighest(raw: number, coding: ModbusCoding): number[] {
  switch (coding.type) {
    case 'bit':
    case 'u16':
    case 'i16':
      return [coding.bits ? raw << coding.bits.from : raw & 0xffff];
    case 'f32':
      scratch.setFloat32(0, raw);
      break;
    case 'f64':
      scratch.setFloat64(0, raw);
      break;
    case 'u32':
    case 'i32':
      scratch.setUint32(0, raw >>> 0);
      break;
    case 'u64':
    case 'i64': {
      const high = Math.floor(raw / 2 ** 32);
      scratch.setUint32(0, high >>> 0);
      scratch.setUint32(4, raw - high * 2 ** 32);
    }
  }
  return Array.from({ length: registersOfType[coding.type] }, (_, index) => scratch.getUint16(2 * index));
}

/** The bits of a field as they lie in the register's value, before its byte order. */
function maskOf({ from, count }: BitField): number {
  return ((1 << count) - 1) << from;
}

/** The bits of a field as they go over the wire; all of them where the value is no field. */
export function wireMaskOf({ bits, byteOrder }: Pick<ModbusCoding, 'bits' | 'byteOrder'>): number {
  if (!bits) return 0xffff;
  return byteOrder === 'big' ? maskOf(bits) : swapBytes(maskOf(bits));
}

/** Grid and range of the engineering values that this coding can carry; quantum 0 for floats. */
export function factsOfCoding(coding: ModbusCoding): Omit<AddressFacts, 'isWritable'> {
  const [rawMin, rawMax] = rawRangeOf(coding);
  const ends = [rawMin * coding.scale + coding.offset, rawMax * coding.scale + coding.offset] as const;
  return {
    quantum: isFloat(coding.type) ? 0 : Math.abs(coding.scale),
    quantumOrigin: coding.offset,
    min: Math.min(...ends),
    max: Math.max(...ends),
  };
}
