/** Longest text that is read as a table, characters; 200 channels with every column filled take a tenth. */
export const tableTextMax = 1_000_000;
/** Most records and columns of one table; more is no register map of one rig. */
export const tableRecordsMax = 2_000;
export const tableColumnsMax = 200;

export type TableSeparator = ',' | ';' | '\t';

export interface TableRecord {
  /** Line on which it begins, from 1. */
  line: number;
  cells: string[];
}

export interface TextTable {
  separator: TableSeparator;
  /** Records with anything in them. */
  records: TableRecord[];
}

/** What is wrong with a text as a table. */
export class TableTextError extends Error {
  constructor(
    readonly line: number,
    message: string,
  ) {
    super(message);
    this.name = 'TableTextError';
  }
}

/**
 * Reads comma, semicolon or tab separated text: the separator is the one that the first line has, tab before
 * semicolon before comma. Quotes as RFC 4180 has them; a byte order mark, any line ends and spaces around cells that
 * are not quoted do no harm. Empty lines are left out.
 *
 * @throws TableTextError for a text that is too large, or has a quote that is not closed
 * @example
 * readTextTable('id;unit\r\no2;"%"').records[1].cells // ['o2', '%']
 */
export function readTextTable(text: string): TextTable {
  if (text.length > tableTextMax) {
    throw new TableTextError(1, `The text has more than ${tableTextMax} characters: give a smaller table.`);
  }
  const whole = text.replace(/^\uFEFF/, '');
  const separator = separatorOf(whole);
  const reader = new CellReader(whole, separator);
  const records: TableRecord[] = [];
  for (let record = reader.next(); record !== null; record = reader.next()) {
    if (record.cells.every((cell) => cell === '')) continue;
    if (records.length === tableRecordsMax) {
      throw new TableTextError(record.line, `A table has at most ${tableRecordsMax} lines.`);
    }
    records.push(record);
  }
  return { separator, records };
}

/**
 * Writes cells as RFC 4180 has it: lines end in CRLF, cells are quoted where they must be.
 *
 * @example
 * writeTextTable([['a', 'b"c']]) // 'a,"b""c"\r\n'
 */
export function writeTextTable(
  records: readonly (readonly string[])[],
  separator: TableSeparator = ',',
): string {
  return records.map((cells) => `${cells.map(quoted).join(separator)}\r\n`).join('');
}

/** Any separator is quoted, so that the first line alone says which one parts the cells. */
function quoted(cell: string): string {
  const isPlain = cell.trim() === cell && !/[,;\t"\r\n\uFEFF]/.test(cell);
  return isPlain ? cell : `"${cell.replaceAll('"', '""')}"`;
}

/** Looked for outside quotes, since a quoted cell may have line ends in it. */
function separatorOf(text: string): TableSeparator {
  const unquoted = text.replaceAll(/"[^"]*"?/g, '').replace(/^[\r\n]+/, '');
  const firstLine = /^[^\r\n]*/.exec(unquoted)?.[0] ?? '';
  if (firstLine.includes('\t')) return '\t';
  return firstLine.includes(';') ? ';' : ',';
}

/** Goes through a text once, record by record. */
class CellReader {
  private at = 0;
  private line = 1;

  constructor(
    private readonly text: string,
    private readonly separator: TableSeparator,
  ) {}

  /** @returns null at the end */
  next(): TableRecord | null {
    if (this.at >= this.text.length) return null;
    const record: TableRecord = { line: this.line, cells: [] };
    for (;;) {
      record.cells.push(this.cell());
      if (record.cells.length > tableColumnsMax) {
        throw new TableTextError(record.line, `A table has at most ${tableColumnsMax} columns.`);
      }
      if (this.text[this.at] !== this.separator) break;
      this.at += 1;
    }
    this.endLine();
    return record;
  }

  private cell(): string {
    const begin = this.at;
    while (this.text[this.at] === ' ') this.at += 1;
    if (this.text[this.at] === '"') return this.quotedCell();
    this.at = begin;
    const end = this.plainEnd();
    this.at = end;
    return this.text.slice(begin, end).trim();
  }

  private plainEnd(): number {
    let end = this.at;
    while (end < this.text.length && !this.isCellEnd(this.text[end] ?? '')) end += 1;
    return end;
  }

  private quotedCell(): string {
    const openedAt = this.line;
    let value = '';
    let from = this.at + 1;
    for (;;) {
      const quote = this.text.indexOf('"', from);
      if (quote < 0) throw new TableTextError(openedAt, 'A quote that begins here is not closed.');
      value += this.text.slice(from, quote);
      if (this.text[quote + 1] !== '"') {
        this.at = quote + 1;
        break;
      }
      value += '"';
      from = quote + 2;
    }
    this.line += lineEndsIn(value);
    const rest = this.plainEnd();
    if (this.text.slice(this.at, rest).trim() !== '') {
      throw new TableTextError(
        this.line,
        'After a closing quote comes the next cell: double the quotes inside one.',
      );
    }
    this.at = rest;
    return value;
  }

  private isCellEnd(character: string): boolean {
    return character === this.separator || character === '\r' || character === '\n';
  }

  private endLine(): void {
    if (this.at >= this.text.length) return;
    this.at += this.text.startsWith('\r\n', this.at) ? 2 : 1;
    this.line += 1;
  }
}

function lineEndsIn(value: string): number {
  return value.match(/\r\n|\r|\n/g)?.length ?? 0;
}
