import { parseOrMisconfigured } from '../parse-or-misconfigured.js';
import type { AddressFacts } from '../contract.js';
import { renderCommand } from './command-template.js';
import { plainText } from './escaped-text.js';
import type { Expectation } from './frame-reader.js';
import { formatNumberText } from './number-text.js';
import { type SerialTextAddress, serialTextAddressSchema } from './serial-text-address.schema.js';

/** An address with its commands made ready. */
export interface TextAddress {
  readonly given: SerialTextAddress;
  /** Null where there is no query. */
  readonly query: string | null;
  readonly expectation: Expectation;
}

/** @throws adapter.misconfigured with one detail per field at fault, below `field` */
export function parseTextAddress(address: unknown, field: string): TextAddress {
  const given = parseOrMisconfigured(serialTextAddressSchema, address, field);
  const { query, channel, shape, prefix } = given;
  return {
    given,
    query: query === '' ? null : renderCommand(query, { channel }),
    expectation: shape === 'block' ? { kind: 'block', prefix: plainText(prefix) } : { kind: 'line' },
  };
}

export function factsOf({ given }: TextAddress): AddressFacts {
  const { write, writeNotation, decimals, scale, offset, min, max, points } = given;
  const step = writeNotation === 'hex' ? 1 : 10 ** -decimals;
  return {
    isWritable: write !== '',
    // An exponent moves the last digit with the value: no fixed grid.
    quantum: writeNotation === 'exponent' ? 0 : step * Math.abs(scale),
    quantumOrigin: offset,
    min,
    max,
    points,
  };
}

/** The command that writes an engineering value, or why there is none. */
export function writeCommandOf({ given }: TextAddress, value: number): string | { fault: string } {
  const { write, channel, min, max, scale, offset, writeNotation, decimals } = given;
  if (write === '') return { fault: 'this channel can only be read' };
  if (!(value >= min && value <= max))
    return { fault: `${value} is outside what may be sent: ${min} to ${max}` };
  const text = formatNumberText((value - offset) / scale, writeNotation, decimals);
  return typeof text === 'string' ? renderCommand(write, { channel, value: text }) : text;
}

/** How an address is named in messages. */
export function placeOf({ given, query }: TextAddress): string {
  const { stream, write, channel } = given;
  if (query !== null) return `"${query}"`;
  return stream === '' ? `"${renderCommand(write, { channel })}"` : `lines "${stream}"`;
}
