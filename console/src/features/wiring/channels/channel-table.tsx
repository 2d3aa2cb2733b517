import { Fragment, useMemo, useState, type ClipboardEvent, type ReactNode } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import TextField from '@mui/material/TextField';
import {
  columnsOfRow,
  type AddressColumnsOf,
  type ChannelColumn,
  type ChannelRow as Row,
  type Connection,
} from '@cresthold/shared';
import { rowFaults, type DraftFaults } from '../draft/draft-faults.js';
import { ChannelRow, type RowActions } from './channel-row.js';
import { moveAbout, placeOf } from './move-about.js';
import { cellWidthPx, channelTableStyles } from './table-styles.js';

/** Rows that are drawn at once; the rest comes page by page. */
const pageRows = 25;

export interface ChannelTableProps {
  rows: readonly Row[];
  columns: readonly ChannelColumn[];
  columnsOf: AddressColumnsOf;
  connections: readonly Connection[];
  faults: DraftFaults;
  actions: RowActions | null;
  /** Takes text that was pasted into a cell. */
  onPaste: (text: string, at: { row: number; column: number }) => void;
  /** The cell of the live test of a row. */
  testOf: (row: Row) => ReactNode;
}

/** The channels of the rig as a table; cards where it is narrow. */
export function ChannelTable(props: ChannelTableProps) {
  const { rows, columns, columnsOf, connections, faults, actions, testOf } = props;
  const [wanted, setWanted] = useState('');
  const [page, setPage] = useState(0);
  const shown = useMemo(() => matching(rows, wanted), [rows, wanted]);
  const pages = Math.max(1, Math.ceil(shown.length / pageRows));
  const at = Math.min(page, pages - 1);
  const choices = useMemo(
    () => connections.map(({ id, title }) => ({ value: id, label: title || id })),
    [connections],
  );
  const paste = (event: ClipboardEvent) => {
    const place = placeOf(event.target);
    const text = event.clipboardData.getData('text/plain');
    // One plain cell goes where the caret is.
    if (actions === null || !place || !/[\t\n\r]/.test(text.trim())) return;
    event.preventDefault();
    props.onPaste(text, place);
  };
  return (
    <Box sx={{ display: 'grid', gap: 1, gridTemplateColumns: 'minmax(0, 1fr)' }}>
      {rows.length > pageRows && (
        <TextField
          label="Find channels"
          value={wanted}
          onChange={(event) => setWanted(event.target.value)}
          sx={{ maxWidth: '20rem' }}
        />
      )}
      <Box
        sx={{ overflowX: 'auto', scrollPaddingLeft: '11rem' }}
        role="region"
        aria-label="Channels, table"
        tabIndex={0}
      >
        <Box
          component="table"
          aria-label="Channels"
          sx={channelTableStyles}
          onKeyDown={moveAbout}
          onPaste={paste}
        >
          <TableHead columns={columns} isReadOnly={actions === null} />
          <tbody>
            {shown.slice(at * pageRows, (at + 1) * pageRows).map((index) => {
              const row = rows[index] ?? {};
              const keys = new Set(columnsOfRow(row, columnsOf).map(({ key }) => key));
              return (
                <ChannelRow
                  key={index}
                  index={index}
                  row={row}
                  columns={columns}
                  keys={keys}
                  faults={rowFaults(faults, index, keys)}
                  connections={choices}
                  actions={actions}
                  test={testOf(row)}
                />
              );
            })}
          </tbody>
        </Box>
      </Box>
      {pages > 1 && <Pages page={at} pages={pages} rows={shown.length} onGo={setPage} />}
    </Box>
  );
}

function TableHead({ columns, isReadOnly }: { columns: readonly ChannelColumn[]; isReadOnly: boolean }) {
  return (
    <thead>
      <tr>
        {columns.map(({ key, title, kind, help }) => (
          <Fragment key={key}>
            <th scope="col" title={help} style={{ minWidth: widthOf(key, kind) }}>
              {title}
            </th>
            {key === 'title' && <th scope="col">Live test, as saved</th>}
          </Fragment>
        ))}
        {!isReadOnly && <th scope="col">Row</th>}
      </tr>
    </thead>
  );
}

function widthOf(key: string, kind: ChannelColumn['kind']): number {
  if (key === 'title' || key === 'expression') return cellWidthPx.title;
  if (key === 'unit' || key === 'axis.unit') return cellWidthPx.number;
  return kind === 'integer' ? cellWidthPx.number : cellWidthPx[kind];
}

interface PagesProps {
  page: number;
  pages: number;
  rows: number;
  onGo: (page: number) => void;
}

function Pages({ page, pages, rows, onGo }: PagesProps) {
  return (
    <Box
      component="nav"
      aria-label="Pages of the table"
      sx={{ display: 'flex', gap: 1, alignItems: 'center', flexWrap: 'wrap' }}
    >
      <Button disabled={page === 0} onClick={() => onGo(page - 1)}>
        Previous
      </Button>
      <span role="status">
        {page * pageRows + 1} to {Math.min(rows, (page + 1) * pageRows)} of {rows}
      </span>
      <Button disabled={page === pages - 1} onClick={() => onGo(page + 1)}>
        Next
      </Button>
    </Box>
  );
}

/** Indices of the rows in which the text is found. */
function matching(rows: readonly Row[], wanted: string): number[] {
  const text = wanted.trim().toLowerCase();
  const all = rows.map((_, index) => index);
  if (text === '') return all;
  return all.filter((index) =>
    Object.values(rows[index] ?? {}).some((cell) => cell.toLowerCase().includes(text)),
  );
}
