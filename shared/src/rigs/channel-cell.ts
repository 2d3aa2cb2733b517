import type { ChannelColumn } from './channel-table-columns.js';

export type CellReading = { value: unknown; fault: null } | { value: undefined; fault: string };

const good = (value: unknown): CellReading => ({ value, fault: null });
const bad = (fault: string): CellReading => ({ value: undefined, fault });

const decimalNumber = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i;
const hexadecimalNumber = /^0x[0-9a-f]{1,12}$/i;

/**
 * The value that the text of a cell stands for; undefined for an empty one, which leaves the field out.
 *
 * @param hasDecimalComma whether `1,5` is a number: never where the comma parts the cells
 * @example
 * readCell(numberColumn, '1,5', true) // { value: 1.5, fault: null }
 */
export function readCell(column: ChannelColumn, text: string, hasDecimalComma: boolean): CellReading {
  const trimmed = text.trim();
  if (trimmed === '') return good(undefined);
  switch (column.kind) {
    case 'text':
      return readText(trimmed);
    case 'number':
    case 'integer':
      return readNumber(trimmed, column.kind === 'integer', hasDecimalComma);
    case 'boolean':
      return readBoolean(trimmed);
    case 'choice':
      return readChoice(trimmed, column.options);
    case 'json':
      return readJson(trimmed);
  }
}

/**
 * The text that stands for a value, such that `readCell` gives the value back; empty for undefined and null.
 *
 * @example
 * writeCell(textColumn, '') // '""'
 */
export function writeCell(column: ChannelColumn, value: unknown): string {
  if (value === undefined || value === null) return '';
  if (column.kind === 'json') return jsonText(value);
  if (typeof value !== 'string') return JSON.stringify(value);
  return column.kind === 'text' && !isPlain(value) ? JSON.stringify(value) : value;
}

/** A text that is empty, or that a spreadsheet would trim or split, is written as JSON has it, in quotes. */
function isPlain(value: string): boolean {
  return value !== '' && !value.startsWith('"') && value.trim() === value && isOfOneLine(value);
}

function isOfOneLine(value: string): boolean {
  for (const character of value) if (character < ' ' || character === '\u007f') return false;
  return true;
}

function jsonText(value: unknown): string {
  if (typeof value !== 'string') return JSON.stringify(value);
  return isPlain(value) && readJson(value).value === value ? value : JSON.stringify(value);
}

function readText(text: string): CellReading {
  if (!text.startsWith('"')) return good(text);
  const read = parseJson(text);
  return typeof read?.value === 'string' ? good(read.value) : bad('Close the quotes, or leave them out.');
}

function readNumber(text: string, isInteger: boolean, hasDecimalComma: boolean): CellReading {
  const plain = text.replace('\u2212', '-');
  const pointed = hasDecimalComma && !plain.includes('.') ? plain.replace(',', '.') : plain;
  if (isInteger && hexadecimalNumber.test(pointed)) return good(Number(pointed));
  if (!decimalNumber.test(pointed)) return bad('Give a number.');
  const value = Number(pointed);
  if (!Number.isFinite(value)) return bad('Give a number that is not as large.');
  return isInteger && !Number.isInteger(value) ? bad('Give a whole number.') : good(value);
}

function readBoolean(text: string): CellReading {
  const word = text.toLowerCase();
  if (['true', 'yes', '1'].includes(word)) return good(true);
  if (['false', 'no', '0'].includes(word)) return good(false);
  return bad('Say true or false.');
}

function readChoice(text: string, options: ChannelColumn['options']): CellReading {
  const word = text.toLowerCase();
  const found =
    options.find((option) => String(option) === text) ??
    options.find((o) => String(o).toLowerCase() === word);
  return found === undefined ? bad(`Use one of ${options.join(', ')}.`) : good(found);
}

/** What is no JSON is a text. */
function readJson(text: string): CellReading {
  const read = parseJson(text);
  return good(read ? read.value : text);
}

function parseJson(text: string): { value: unknown } | null {
  try {
    return { value: JSON.parse(text) as unknown };
  } catch {
    return null;
  }
}
