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

/** One engineering value as registers, high word first; out of range it saturates. */
export function encodeValue(value: number, type: RegisterType, scale: number): number[] {
  const bytes = Buffer.alloc(4);
  if (type === 'bit') return [value > 0.5 ? 1 : 0];
  if (type === 'f32') bytes.writeFloatBE(value);
  else {
    const { words, min, max, nan } = layouts[type];
    const count = Number.isNaN(value) ? nan : Math.min(Math.max(Math.round(value / scale), min), max);
    if (words === 1) return [count & 0xffff];
    bytes.writeUInt32BE(count >>> 0);
  }
  return [bytes.readUInt16BE(0), bytes.readUInt16BE(2)];
}

/** The engineering value of registers, high word first. */
export function decodeValue(words: readonly number[], type: RegisterType, scale: number): number {
  const bytes = Buffer.alloc(4);
  words.forEach((word, index) => bytes.writeUInt16BE(word, 2 * index));
  switch (type) {
    case 'bit':
      return words[0] ?? 0;
    case 'f32':
      return bytes.readFloatBE(0);
    case 'u16':
      return bytes.readUInt16BE(0) * scale;
    case 'i16':
      return bytes.readInt16BE(0) * scale;
    case 'u32':
      return bytes.readUInt32BE(0) * scale;
    case 'i32':
      return bytes.readInt32BE(0) * scale;
  }
}
