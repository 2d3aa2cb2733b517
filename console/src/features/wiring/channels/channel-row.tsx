import { Fragment, useState, type ReactNode } from 'react';
import Box from '@mui/material/Box';
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
  const [isOpen, setOpen] = useState(false);
  const isShown = isOpen || faults.size > 0 || actions === null;
  return (
    <tr className={isShown ? undefined : 'row-folded'}>
      {columns.map((column, at) => {
        const Cell = at === 0 ? 'th' : 'td';
        const has = keys.has(column.key);
        return (
          <Fragment key={column.key}>
            <Cell
              scope={at === 0 ? 'row' : undefined}
              data-head={column.title}
              className={has ? (headKeys.has(column.key) ? undefined : 'cell-more') : 'cell-none'}
            >
              {has ? cellOf(column, at) : <span aria-hidden="true">·</span>}
            </Cell>
            {column.key === 'title' && test}
          </Fragment>
        );
      })}
      {actions && (
        <RowButtons
          index={index}
          name={name}
          actions={actions}
          isOpen={isShown}
          onFold={() => setOpen((before) => !before)}
        />
      )}
    </tr>
  );
}

/** What a card shows while it is folded. */
const headKeys = new Set(['id', 'title']);

interface RowButtonsProps {
  index: number;
  name: string;
  actions: RowActions;
  isOpen: boolean;
  onFold: () => void;
}

function RowButtons({ index, name, actions, isOpen, onFold }: RowButtonsProps) {
  return (
    <td className="cell-wide">
      <Box sx={{ display: 'flex', gap: 0.5, flexWrap: { xs: 'wrap', md: 'nowrap' } }}>
        <Button
          sx={{ display: { md: 'none' } }}
          aria-expanded={isOpen}
          aria-label={`All fields of ${name}`}
          onClick={onFold}
        >
          All fields
        </Button>
        <Button aria-label={`Duplicate ${name}`} onClick={() => actions.duplicate(index)}>
          Duplicate
        </Button>
        <Button aria-label={`Remove ${name}`} onClick={() => actions.remove(index)}>
          Remove
        </Button>
      </Box>
    </td>
  );
}
