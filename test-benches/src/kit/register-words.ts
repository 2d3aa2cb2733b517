import type { RegisterType } from './register-map.types.js';

interface Layout {
  readonly words: 1 | 2;
  readonly min: number;
  readonly max: number;
  /** How "not a number" is shown where the type has none, as a count. */
  readonly nan: number;
}

const layouts: Readonly<Record<Exclude<RegisterType, 'f32' | 'bit'>, Layout>> = {
  u16: { words: 1, min: 0, max: 0xffff, nan: 0xffff },
  i16: { words: 1, min: -0x8000, max: 0x7fff, nan: -0x8000 },
  u32: { words: 2, min: 0, max: 0xffff_ffff, nan: 0xffff_ffff },
  i32: { words: 2, min: -0x8000_0000, max: 0x7fff_ffff, nan: -0x8000_0000 },
};

/** Registers of one value of a type. */
export function wordsOfType(type: RegisterType): 1 | 2 {
  if (type === 'bit') return 1;
  return type === 'f32' ? 2 : layouts[type].words;
}

/** For two words at a time; used up within each call. */
const scratch = new DataView(new ArrayBuffer(4));

/** One engineering value as registers, high word first; out of range it saturates. */
export function encodeValue(value: number, type: RegisterType, scale: number): number[] {
  if (type === 'bit') return [value > 0.5 ? 1 : 0];
  if (type === 'f32') scratch.setFloat32(0, value);
  else {
    const { words, min, max, nan } = layouts[type];
    const count = Number.isNaN(value) ? nan : Math.min(Math.max(Math.round(value / scale), min), max);
    if (words === 1) return [count & 0xffff];
    scratch.setUint32(0, count >>> 0);
  }
  return [scratch.getUint16(0), scratch.getUint16(2)];
}

/** The engineering value of one or two registers from a place on, high word first. */
export function decodeValue(words: readonly number[], type: RegisterType, scale: number, from = 0): number {
  scratch.setUint16(0, words[from] ?? 0);
  scratch.setUint16(2, words[from + 1] ?? 0);
  switch (type) {
    case 'bit':
      return words[from] ?? 0;
    case 'f32':
      return scratch.getFloat32(0);
    case 'u16':
      return scratch.getUint16(0) * scale;
    case 'i16':
      return scratch.getInt16(0) * scale;
    case 'u32':
      return scratch.getUint32(0) * scale;
    case 'i32':
      return scratch.getInt32(0) * scale;
  }
}
