import { bytesOfSample, readSamples } from './definite-block.js';
import { plainText, showText } from './escaped-text.js';
import { parseNumberText } from './number-text.js';
import type { SerialTextAddress } from './serial-text-address.schema.js';

/** Why a reply carries no value for an address. */
export interface ReplyFault {
  fault: string;
}

/**
 * The engineering value that a reply carries; NaN where it says "no value now".
 *
 * @param text the reply without terminator and checksum
 * @example
 * valueOfReply('VOLT 1.25 V', { ...address, prefix: 'VOLT ', suffix: ' V' }) // 1.25
 */
export function valueOfReply(text: string, address: SerialTextAddress): number | ReplyFault {
  const fields = fieldsOf(text, address);
  if (!Array.isArray(fields)) return fields;
  const raw = numberOfField(fields, address.field, address);
  if (typeof raw !== 'number') return raw;
  const sign = signOf(fields, address);
  if (typeof sign !== 'number') return Number.isNaN(raw) ? NaN : sign;
  return sign * raw * address.scale + address.offset;
}

/** Takes the engineering values of a list from a reply. @returns null where all of them came */
export function listOfReply(text: string, address: SerialTextAddress, into: Float64Array): ReplyFault | null {
  const fields = fieldsOf(text, address);
  if (!Array.isArray(fields)) return fields;
  if (fields.length - address.field !== address.points) {
    return { fault: `it has ${Math.max(0, fields.length - address.field)} points, not ${address.points}` };
  }
  for (let point = 0; point < address.points; point += 1) {
    const raw = numberOfField(fields, address.field + point, address);
    if (typeof raw !== 'number') return raw;
    into[point] = raw * address.scale + address.offset;
  }
  return null;
}

/** Takes the engineering values of a block from its bytes. @returns null where all of them came */
export function samplesOfBlock(
  bytes: Uint8Array,
  address: SerialTextAddress,
  into: Float64Array,
): ReplyFault | null {
  const due = address.points * bytesOfSample[address.sampleType];
  if (bytes.length !== due) return { fault: `its block has ${bytes.length} bytes, not ${due}` };
  readSamples(bytes, address.sampleType, address.byteOrder, into);
  for (let index = 0; index < into.length; index += 1) {
    into[index] = (into[index] ?? NaN) * address.scale + address.offset;
  }
  return null;
}

function fieldsOf(text: string, { prefix, suffix, separator }: SerialTextAddress): string[] | ReplyFault {
  const begin = plainText(prefix);
  const end = plainText(suffix);
  if (!text.startsWith(begin)) return { fault: `it does not begin with "${showText(begin)}"` };
  const rest = text.slice(begin.length);
  if (!rest.endsWith(end)) return { fault: `it does not end with "${showText(end)}"` };
  const inner = rest.slice(0, rest.length - end.length);
  const between = plainText(separator);
  const fields = inner.split(between).map((field) => field.trim());
  // Devices align columns with blanks: several of them separate no more than one does.
  return between.trim() === '' ? fields.filter((field) => field !== '') : fields;
}

function numberOfField(
  fields: readonly string[],
  index: number,
  { words, specials, notation }: SerialTextAddress,
): number | ReplyFault {
  const text = fields[index];
  if (text === undefined) return { fault: `it has no field ${index}` };
  if (Object.hasOwn(words, text)) return words[text] ?? NaN;
  const value = parseNumberText(text, notation);
  if (isSpecial(text, value, specials)) return NaN;
  return (
    value ?? { fault: `field ${index}, "${showText(text, 40)}", is no number of the notation ${notation}` }
  );
}

/** A special reply is compared as text and as number: 9.91E37 also comes as +9.910000E+37. */
function isSpecial(text: string, value: number | null, specials: readonly string[]): boolean {
  return specials.some((special) => {
    if (special.toLowerCase() === text.toLowerCase()) return true;
    return value !== null && special !== '' && parseNumberText(special, 'decimal') === value;
  });
}

function signOf(fields: readonly string[], { signField }: SerialTextAddress): 1 | -1 | ReplyFault {
  if (signField === undefined) return 1;
  const text = fields[signField] ?? '';
  if (text === 'N' || text === 'E') return 1;
  if (text === 'S' || text === 'W') return -1;
  return { fault: `field ${signField}, "${showText(text, 40)}", is none of N, E, S, W` };
}
