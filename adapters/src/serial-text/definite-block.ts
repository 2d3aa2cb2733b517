/** Longest count of bytes that a header can state: nine digits. */
const mostCountDigits = 9;

/** What the beginning of a text says of a block: where its bytes are, that more must come, or why it is none. */
export type BlockHeader =
  { kind: 'whole'; from: number; count: number } | { kind: 'more' } | { kind: 'none'; fault: string };

/**
 * Reads the header of a definite-length block: `#`, one digit that counts the digits of the length, the length.
 *
 * @source IEEE 488.2, 8.7.9 (definite length arbitrary block response data)
 * @example
 * readBlockHeader('#15hello') // { kind: 'whole', from: 3, count: 5 }
 */
export function readBlockHeader(text: string): BlockHeader {
  if (text === '') return { kind: 'more' };
  if (!text.startsWith('#')) return { kind: 'none', fault: 'no block begins here (#)' };
  if (text.length < 2) return { kind: 'more' };
  const digits = text.charCodeAt(1) - 48;
  if (digits === 0)
    return { kind: 'none', fault: 'a block without a length (#0) has no end on a serial line' };
  if (digits < 1 || digits > mostCountDigits) return { kind: 'none', fault: 'its block has no valid header' };
  const count = text.slice(2, 2 + digits);
  if (!/^\d*$/.test(count)) return { kind: 'none', fault: 'the length of its block is no number' };
  if (count.length < digits) return { kind: 'more' };
  return { kind: 'whole', from: 2 + digits, count: Number(count) };
}

export const sampleTypes = ['i8', 'u8', 'i16', 'u16', 'i32', 'u32', 'f32', 'f64'] as const;
export type SampleType = (typeof sampleTypes)[number];

export const bytesOfSample: Readonly<Record<SampleType, number>> = {
  i8: 1,
  u8: 1,
  i16: 2,
  u16: 2,
  i32: 4,
  u32: 4,
  f32: 4,
  f64: 8,
};

type Getter = (view: DataView, at: number, isLittle: boolean) => number;

const getters: Readonly<Record<SampleType, Getter>> = {
  i8: (view, at) => view.getInt8(at),
  u8: (view, at) => view.getUint8(at),
  i16: (view, at, isLittle) => view.getInt16(at, isLittle),
  u16: (view, at, isLittle) => view.getUint16(at, isLittle),
  i32: (view, at, isLittle) => view.getInt32(at, isLittle),
  u32: (view, at, isLittle) => view.getUint32(at, isLittle),
  f32: (view, at, isLittle) => view.getFloat32(at, isLittle),
  f64: (view, at, isLittle) => view.getFloat64(at, isLittle),
};

/** Takes the raw samples of a block whose length fits. */
export function readSamples(
  bytes: Uint8Array,
  type: SampleType,
  byteOrder: 'big' | 'little',
  into: Float64Array,
): void {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const get = getters[type];
  for (let index = 0; index < into.length; index += 1) {
    into[index] = get(view, index * bytesOfSample[type], byteOrder === 'little');
  }
}
