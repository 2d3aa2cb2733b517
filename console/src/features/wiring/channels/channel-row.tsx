import type { ReactNode } from 'react';
import Button from '@mui/material/Button';
import type { ChannelColumn, ChannelRow as Row } from '@cresthold/shared';
import { CellInput } from './cell-input.js';

export interface RowActions {
  change: (index: number, key: string, text: string) => void;
  duplicate: (index: number) => void;
  remove: (index: number) => void;
}

interface ChannelRowProps {
  index: number;
  row: Row;
  columns: readonly ChannelColumn[];
  /** Keys of the columns in which this row has a cell. */
  keys: ReadonlySet<string>;
  faults: ReadonlyMap<string, string>;
  connections: readonly { value: string; label: string }[];
  /** Null where the table is only shown. */
  actions: RowActions | null;
  /** Cells of the live test. */
  test: ReactNode;
}

/** One channel: its cells, its live test, its buttons. */
export function ChannelRow(props: ChannelRowProps) {
  const { index, row, columns, keys, faults, connections, actions, test } = props;
  const name = row['title'] || row['id'] || `row ${index + 1}`;
  const cellOf = (column: ChannelColumn, at: number) => {
    const text = row[column.key] ?? '';
    if (actions === null) return <span>{text === '' ? (column.fallback ?? '') : text}</span>;
    return (
      <CellInput
        column={column}
        label={`${column.title} of ${name}`}
        text={text}
        options={column.key === 'connection' ? connections : undefined}
        fault={faults.get(column.key)}
        place={{ row: index, column: at }}
        onChange={(next) => actions.change(index, column.key, next)}
      />
    );
  };
  return (
    <tr>
      {columns.map((column, at) => {
        if (at === 0) {
          return (
            <th key={column.key} scope="row" data-head={column.title}>
              {cellOf(column, at)}
            </th>
          );
        }
        if (!keys.has(column.key)) {
          return (
            <td key={column.key} className="cell-none">
              <span aria-hidden="true">·</span>
            </td>
          );
        }
        return (
          <td key={column.key} data-head={column.title}>
            {cellOf(column, at)}
          </td>
        );
      })}
      {test}
      {actions && <RowButtons index={index} name={name} actions={actions} />}
    </tr>
  );
}

function RowButtons({ index, name, actions }: { index: number; name: string; actions: RowActions }) {
  return (
    <td className="cell-wide" style={{ whiteSpace: 'nowrap' }}>
      <Button aria-label={`Duplicate ${name}`} onClick={() => actions.duplicate(index)}>
        Duplicate
      </Button>{' '}
      <Button aria-label={`Remove ${name}`} onClick={() => actions.remove(index)}>
        Remove
      </Button>
    </td>
  );
}
