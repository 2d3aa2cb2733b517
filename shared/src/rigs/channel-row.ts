import { readCell, writeCell } from './channel-cell.js';
import { fixedColumns, hasCell, type ChannelColumn } from './channel-table-columns.js';
import type { Channel } from './rig.schema.js';

/** A channel as a table holds it: the text of each cell by the key of its column; what is not there is empty. */
export type ChannelRow = Readonly<Record<string, string>>;

/** The columns of a connection's addresses; null where its adapter is not known. */
export type AddressColumnsOf = (connectionId: string) => readonly ChannelColumn[] | null;

export interface CellFault {
  column: string;
  message: string;
}

/** Where the cells of fields go that no schema names. */
export function unknownColumn(key: string): ChannelColumn {
  return {
    key,
    title: key.replace(/^address\./, ''),
    help: '',
    kind: 'json',
    options: [],
    fallback: null,
    isRequired: false,
  };
}

/** The row of a channel; `channelOfRow` gives the channel back. */
export function rowOfChannel(channel: Channel, columnsOf: AddressColumnsOf): ChannelRow {
  const known = channel.kind === 'derived' ? [] : (columnsOf(channel.connection) ?? []);
  const row: Record<string, string> = {};
  for (const column of [...fixedColumns, ...known]) put(row, column, valueAt(channel, column.key));
  if (channel.kind !== 'derived') {
    for (const key of leavesWithout(channel.address, 'address', known)) {
      put(row, unknownColumn(key), valueAt(channel, key));
    }
  }
  return row;
}

/**
 * The channel that a row stands for, as far as it can be read, and what is wrong with its cells. A cell that cannot be
 * read gives its text, so that no check takes it for right.
 *
 * @param hasDecimalComma whether `1,5` is a number
 */
export function channelOfRow(
  row: ChannelRow,
  columnsOf: AddressColumnsOf,
  hasDecimalComma = true,
): { channel: Record<string, unknown>; faults: CellFault[] } {
  const channel: Record<string, unknown> = {};
  const faults: CellFault[] = [];
  for (const column of columnsOfRow(row, columnsOf)) {
    const { key } = column;
    const text = row[key] ?? '';
    const { value, fault } = readCell(column, text, hasDecimalComma);
    if (fault !== null) faults.push({ column: key, message: fault });
    else if (value === undefined && column.isRequired) faults.push({ column: key, message: 'Needed.' });
    if (fault !== null) setAt(channel, key, text);
    else if (value !== undefined) setAt(channel, key, value);
    else if (key === 'unit' || key === 'axis.unit') setAt(channel, key, '');
  }
  if (row['kind'] !== 'derived' && channel['address'] === undefined) channel['address'] = {};
  faults.push(...strayCells(row, columnsOf));
  return { channel, faults };
}

/** Columns in which a row has a cell: by its kind, and by the adapter of its connection. */
export function columnsOfRow(row: ChannelRow, columnsOf: AddressColumnsOf): ChannelColumn[] {
  const kind = row['kind'] ?? '';
  const fixed = fixedColumns.filter(({ key }) => hasCell(kind, key));
  if (kind === 'derived') return fixed;
  const known = columnsOf(row['connection'] ?? '');
  if (known) return [...fixed, ...known];
  const given = Object.keys(row).filter((key) => key.startsWith('address.') && row[key] !== '');
  return [...fixed, ...given.map(unknownColumn)];
}

/** Cells of an address that the adapter of the row's connection has no field for. */
function strayCells(row: ChannelRow, columnsOf: AddressColumnsOf): CellFault[] {
  const known = row['kind'] === 'derived' ? null : columnsOf(row['connection'] ?? '');
  if (!known) return [];
  const keys = new Set(known.map(({ key }) => key));
  return Object.keys(row)
    .filter((key) => key.startsWith('address.') && row[key] !== '' && !keys.has(key))
    .map((column) => ({
      column,
      message: 'The adapter of this connection has no such field: leave it empty.',
    }));
}

/** No unit is an empty cell, not an empty text in quotes. */
const isEmptyUnit = (key: string, value: unknown) => value === '' && (key === 'unit' || key === 'axis.unit');

function put(row: Record<string, string>, column: ChannelColumn, value: unknown): void {
  if (isEmptyUnit(column.key, value)) return;
  const text = writeCell(column, value);
  if (text !== '') row[column.key] = text;
}

function leavesWithout(address: unknown, root: string, known: readonly ChannelColumn[]): string[] {
  return Object.entries(fieldsOf(address)).flatMap(([name, value]) => {
    const key = `${root}.${name}`;
    if (known.some((column) => column.key === key)) return [];
    const isGroup = known.some((column) => column.key.startsWith(`${key}.`));
    return isGroup ? leavesWithout(value, key, known) : [key];
  });
}

function valueAt(value: unknown, key: string): unknown {
  return key.split('.').reduce<unknown>((inner, part) => fieldsOf(inner)[part], value);
}

function setAt(target: Record<string, unknown>, key: string, value: unknown): void {
  const parts = key.split('.');
  const last = parts.pop() ?? '';
  let inner = target;
  for (const part of parts) {
    const next = fieldsOf(inner[part]);
    inner[part] = next;
    inner = next;
  }
  inner[last] = value;
}

function fieldsOf(value: unknown): Record<string, unknown> {
  return typeof value === 'object' && value !== null ? (value as Record<string, unknown>) : {};
}
