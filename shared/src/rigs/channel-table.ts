import { readCell, writeCell } from './channel-cell.js';
import {
  channelOfRow,
  columnsOfRow,
  unknownColumn,
  type AddressColumnsOf,
  type ChannelRow,
} from './channel-row.js';
import { fixedColumns, hasCell, type ChannelColumn } from './channel-table-columns.js';
import {
  readTextTable,
  TableTextError,
  writeTextTable,
  type TableRecord,
  type TextTable,
} from './channel-table-text.js';
import { channelSchema } from './rig.schema.js';

/** Most channels of a rig, and so most rows of its table. */
export const channelRowsMax = 200;
/** Faults that are told of one text; a table that is wrong throughout needs no more. */
export const tableFaultsMax = 100;

/** What a table is read against. */
export interface TableSetting {
  columnsOf: AddressColumnsOf;
  /** Ids of the rig's connections. */
  connections: readonly string[];
}

export interface TableFault {
  /** Line in the text, from 1. */
  line: number;
  /** Name of the column, as a file has it; empty where the whole line is meant. */
  column: string;
  message: string;
}

export interface ReadTable {
  rows: ChannelRow[];
  /** Empty where every row is a channel; at most `tableFaultsMax`. */
  faults: TableFault[];
}

/** The columns of some rows: those of every rig, those of the adapters, and fields that no schema names. */
export function tableColumns(
  rows: readonly ChannelRow[],
  { columnsOf, connections }: TableSetting,
): ChannelColumn[] {
  const byKey = new Map(fixedColumns.map((column) => [column.key, column]));
  for (const connection of connections) {
    for (const column of columnsOf(connection) ?? [])
      if (!byKey.has(column.key)) byKey.set(column.key, column);
  }
  for (const row of rows) {
    for (const key of Object.keys(row))
      if (row[key] !== '' && !byKey.has(key)) byKey.set(key, unknownColumn(key));
  }
  return [...byKey.values()];
}

/** A table as a file: RFC 4180, one line a channel, columns by their keys; empty columns are left out. */
export function writeChannelTable(rows: readonly ChannelRow[], setting: TableSetting): string {
  const used = tableColumns(rows, setting).filter(
    ({ key }) => !key.startsWith('address.') || rows.some((row) => (row[key] ?? '') !== ''),
  );
  const keys = used.map(({ key }) => key);
  return writeTextTable([keys, ...rows.map((row) => keys.map((key) => row[key] ?? ''))]);
}

/**
 * Reads a register map: comma, semicolon or tab separated, with a line of column names first. Where the comma does not
 * part the cells it may stand for the decimal point. What is missing is taken as a sensor that is shown from 0 to 100.
 *
 * @example
 * readChannelTable('id;unit;connection\no2;%;plc', setting).rows[0].title // 'o2'
 */
export function readChannelTable(text: string, setting: TableSetting): ReadTable {
  let table: TextTable;
  try {
    table = readTextTable(text);
  } catch (error) {
    if (!(error instanceof TableTextError)) throw error;
    return { rows: [], faults: [{ line: error.line, column: '', message: error.message }] };
  }
  const [head, ...records] = table.records;
  if (head === undefined)
    return { rows: [], faults: [{ line: 1, column: '', message: 'The text is empty.' }] };
  const heads = readHeads(head, setting);
  if (!heads.keys.includes('id')) {
    const message = 'The first line must name the columns, "id" among them.';
    return { rows: [], faults: [...heads.faults, { line: head.line, column: 'id', message }] };
  }
  const reader = new RecordReader(heads.keys, setting, table.separator !== ',');
  const read = records.map((record) => reader.read(record));
  const faults = [...heads.faults, ...reader.faults];
  if (records.length > channelRowsMax) {
    const line = records[channelRowsMax]?.line ?? 1;
    faults.push({ line, column: '', message: `A rig has at most ${channelRowsMax} channels.` });
  }
  return { rows: read, faults: faults.slice(0, tableFaultsMax) };
}

/** True where a text begins with a line of column names, `id` and another at least. */
export function hasTableHead(text: string, setting: TableSetting): boolean {
  try {
    const head = readTextTable(text.slice(0, 20_000).replace(/(\r\n|\r|\n)[^]*$/, '')).records[0];
    const keys = head ? readHeads(head, setting).keys : [];
    return keys.includes('id') && keys.filter((key) => key !== null).length > 1;
  } catch {
    return false;
  }
}

/** Rows of the same id are replaced where they stand, others are added at the end. */
export function mergeRows(rows: readonly ChannelRow[], imported: readonly ChannelRow[]): ChannelRow[] {
  const news = new Map(imported.map((row) => [row['id'], row]));
  const kept = rows.map((row) => {
    const fresh = news.get(row['id']);
    if (fresh) news.delete(row['id']);
    return fresh ?? row;
  });
  return [...kept, ...imported.filter((row) => news.get(row['id']) === row)];
}

/**
 * Puts cells from a spreadsheet into a table, down and to the right of one cell; rows are added as they are needed.
 *
 * @param keys columns as they are shown, from left to right
 * @throws TableTextError as `readTextTable`
 */
export function pasteCells(
  rows: readonly ChannelRow[],
  keys: readonly string[],
  at: { row: number; column: number },
  text: string,
  newRow: ChannelRow,
): ChannelRow[] {
  const { records } = readTextTable(text);
  const result = [...rows];
  records.forEach(({ cells }, down) => {
    const place = at.row + down;
    if (place >= channelRowsMax) return;
    const row: Record<string, string> = { ...(result[place] ?? newRow) };
    cells.forEach((cell, right) => {
      const key = keys[at.column + right];
      if (key !== undefined) row[key] = cell;
    });
    result[place] = row;
  });
  return result;
}

/** Names that other tables use for columns of this one. */
const otherNames: Readonly<Record<string, string>> = {
  channel: 'id',
  name: 'title',
  min: 'display.min',
  max: 'display.max',
  decimals: 'display.decimals',
};

function readHeads(
  head: TableRecord,
  setting: TableSetting,
): { keys: (string | null)[]; faults: TableFault[] } {
  const known = new Map(tableColumns([], setting).map(({ key }) => [key.toLowerCase(), key]));
  const canGuess = setting.connections.some((id) => setting.columnsOf(id) === null);
  const seen = new Set<string>();
  const faults: TableFault[] = [];
  const keys = head.cells.map((cell) => {
    const name = cell.trim().toLowerCase();
    const fallback = canGuess && name.startsWith('address.') ? cell.trim() : null;
    const key = known.get(name) ?? otherNames[name] ?? fallback;
    const fault = (message: string) => faults.push({ line: head.line, column: cell, message });
    if (key === null && name !== '') fault('There is no such column: rename it, or leave it out.');
    if (key !== null && seen.has(key)) fault('This column is there twice.');
    if (key !== null) seen.add(key);
    return key;
  });
  return { keys, faults };
}

/** Reads the lines below the column names. */
class RecordReader {
  readonly faults: TableFault[] = [];
  private readonly lineOfId = new Map<string, number>();

  constructor(
    private readonly keys: readonly (string | null)[],
    private readonly setting: TableSetting,
    private readonly hasDecimalComma: boolean,
  ) {}

  read({ line, cells }: TableRecord): ChannelRow {
    const given: Record<string, string> = {};
    cells.forEach((cell, at) => {
      const key = this.keys[at];
      if (typeof key === 'string') given[key] = cell;
      else if (key === undefined && cell !== '')
        this.fault(line, '', `Cell ${at + 1} stands below no column name.`);
    });
    const row = this.completed(given);
    this.judge(line, row);
    return this.canonical(row);
  }

  private completed(given: Record<string, string>): ChannelRow {
    const { connections } = this.setting;
    const kind = given['kind']?.toLowerCase() || (given['expression'] ? 'derived' : 'sensor');
    const only = kind !== 'derived' && connections.length === 1 ? (connections[0] ?? '') : '';
    const or = (key: string, fallback: string) => given[key] || fallback;
    return {
      ...given,
      kind,
      title: or('title', given['id'] ?? ''),
      'display.min': or('display.min', '0'),
      'display.max': or('display.max', '100'),
      'display.decimals': or('display.decimals', '2'),
      ...(kind === 'derived' ? {} : { connection: or('connection', only) }),
    };
  }

  private judge(line: number, row: ChannelRow): void {
    const kind = row['kind'] ?? '';
    const { channel, faults } = channelOfRow(row, this.setting.columnsOf, this.hasDecimalComma);
    const own = new Map(faults.map(({ column, message }) => [column, message]));
    for (const [key, text] of Object.entries(row)) {
      if (text !== '' && !hasCell(kind, key))
        own.set(key, `A channel of kind ${kind} has none: leave it empty.`);
    }
    const connection = row['connection'] ?? '';
    if (kind !== 'derived' && connection !== '' && !this.setting.connections.includes(connection)) {
      own.set('connection', `The rig has no connection "${connection}".`);
    }
    for (const { path, message } of channelSchema.safeParse(channel).error?.issues ?? []) {
      const column = path.join('.');
      if (!own.has(column)) own.set(column, message);
    }
    const earlier = this.lineOfId.get(row['id'] ?? '');
    if (earlier !== undefined) own.set('id', `Line ${earlier} has this id already.`);
    this.lineOfId.set(row['id'] ?? '', earlier ?? line);
    for (const [column, message] of own) this.fault(line, column, message);
  }

  /** Cells as this table would write them itself; what cannot be read stays as it came. */
  private canonical(row: ChannelRow): ChannelRow {
    const result: Record<string, string> = { ...row };
    for (const column of columnsOfRow(row, this.setting.columnsOf)) {
      const { value, fault } = readCell(column, row[column.key] ?? '', this.hasDecimalComma);
      if (fault === null) result[column.key] = writeCell(column, value);
    }
    return Object.fromEntries(Object.entries(result).filter(([, text]) => text !== ''));
  }

  private fault(line: number, column: string, message: string): void {
    if (this.faults.length < tableFaultsMax) this.faults.push({ line, column, message });
  }
}
