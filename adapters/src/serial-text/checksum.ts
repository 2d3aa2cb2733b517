/** Checksums of ASCII instruments; each is written as hexadecimal digits behind the text that it covers. */
export const checksumKinds = [
  'none',
  'nmea-xor',
  'xor-8',
  'sum-8',
  'negated-sum-8',
  'crc-16-modbus',
  'crc-16-ccitt',
  'crc-16-xmodem',
] as const;
export type ChecksumKind = (typeof checksumKinds)[number];

export interface ChecksumRule {
  kind: ChecksumKind;
  /** Text between the covered text and the digits; `nmea-xor` has its own. */
  separator: string;
  /** Characters at the beginning that are not covered; `nmea-xor` has its own. */
  skips: number;
}

interface Algorithm {
  digits: number;
  of: (text: string) => number;
}

const xor = (text: string): number => fold(text, 0, (sum, code) => sum ^ code);
const sum = (text: string): number => fold(text, 0, (total, code) => (total + code) & 0xff);

const algorithms: Readonly<Record<Exclude<ChecksumKind, 'none' | 'nmea-xor'>, Algorithm>> = {
  'xor-8': { digits: 2, of: xor },
  'sum-8': { digits: 2, of: sum },
  'negated-sum-8': { digits: 2, of: (text) => -sum(text) & 0xff },
  'crc-16-modbus': { digits: 4, of: (text) => fold(text, 0xffff, crcReflected) },
  'crc-16-ccitt': { digits: 4, of: (text) => fold(text, 0xffff, crcForward) },
  'crc-16-xmodem': { digits: 4, of: (text) => fold(text, 0, crcForward) },
};

function fold(text: string, start: number, step: (value: number, code: number) => number): number {
  let value = start;
  for (let index = 0; index < text.length; index += 1) value = step(value, text.charCodeAt(index));
  return value;
}

/** Polynomial x16 + x15 + x2 + 1, low bit first (MODBUS over Serial Line V1.02, 6.2.2). */
function crcReflected(crc: number, code: number): number {
  let value = crc ^ code;
  for (let bit = 0; bit < 8; bit += 1) value = value & 1 ? (value >> 1) ^ 0xa001 : value >> 1;
  return value;
}

/** Polynomial x16 + x12 + x5 + 1, high bit first (ITU-T V.41). */
function crcForward(crc: number, code: number): number {
  let value = crc ^ (code << 8);
  for (let bit = 0; bit < 8; bit += 1) value = ((value << 1) ^ (value & 0x8000 ? 0x1021 : 0)) & 0xffff;
  return value;
}

function hex(value: number, digits: number): string {
  return value.toString(16).toUpperCase().padStart(digits, '0');
}

/**
 * The text with its checksum behind it.
 *
 * @example
 * withChecksum('123456789', { kind: 'crc-16-modbus', separator: '', skips: 0 }) // '1234567894B37'
 */
export function withChecksum(text: string, rule: ChecksumRule): string {
  if (rule.kind === 'none') return text;
  if (rule.kind === 'nmea-xor') return `${text}*${hex(xor(text.slice(sentenceStart(text) + 1)), 2)}`;
  const { digits, of } = algorithms[rule.kind];
  return `${text}${rule.separator}${hex(of(text.slice(rule.skips)), digits)}`;
}

/**
 * The text that a line carries once its checksum is checked and taken off, or why it carries none.
 *
 * @source NMEA 0183: exclusive or of all characters between `$` (or `!`) and `*`; other kinds as named
 */
export function withoutChecksum(line: string, rule: ChecksumRule): string | { fault: string } {
  if (rule.kind === 'none') return line;
  if (rule.kind === 'nmea-xor') return sentenceOf(line);
  const { digits, of } = algorithms[rule.kind];
  const end = line.length - digits;
  const text = line.slice(0, Math.max(0, end - rule.separator.length));
  const isWhole =
    end - rule.separator.length >= rule.skips && line.slice(text.length, end) === rule.separator;
  const fault = isWhole ? faultOf(line.slice(end), of(text.slice(rule.skips)), digits) : missing;
  return fault ?? text;
}

const missing = { fault: 'it ends in no checksum' };

/** The line from its last `$` or `!` on; the whole line where it has none. */
export function sentenceIn(line: string): string {
  return line.slice(Math.max(0, sentenceStart(line)));
}

function sentenceStart(line: string): number {
  return Math.max(line.lastIndexOf('$'), line.lastIndexOf('!'));
}

/** A sentence begins at its `$` or `!`: whatever noise came before on the same line is not part of it. */
function sentenceOf(line: string): string | { fault: string } {
  const start = sentenceStart(line);
  const star = line.lastIndexOf('*');
  if (start < 0) return { fault: 'no sentence begins in it ($ or !)' };
  if (star < start) return missing;
  return faultOf(line.slice(star + 1), xor(line.slice(start + 1, star)), 2) ?? line.slice(start, star);
}

function faultOf(given: string, due: number, digits: number): { fault: string } | null {
  if (given.length !== digits || !/^[0-9a-fA-F]+$/.test(given)) return missing;
  if (parseInt(given, 16) === due) return null;
  return { fault: `its checksum is ${given}, ${hex(due, digits)} is due` };
}
