import { useMemo, useState } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import {
  channelRowsMax,
  columnsOfRow,
  hasTableHead,
  pasteCells,
  tableColumns,
  writeChannelTable,
  type AddressColumnsOf,
  type ChannelColumn,
  type ChannelRow,
  type Rig,
  type TableSetting,
} from '@cresthold/shared';
import { Empty, Notice, Panel } from '../../../components/index.js';
import { useObstacle } from '../../auth/index.js';
import type { DraftFaults } from '../draft/draft-faults.js';
import { freeId, rowOnConnection } from '../draft/rig-draft.js';
import type { WiringDraft } from '../draft/use-wiring-draft.js';
import { saveText } from '../save-text.js';
import { ChannelTable } from './channel-table.js';
import type { RowActions } from './channel-row.js';
import { ImportDialog } from './import-dialog.js';
import { useLiveTest } from './live-test.js';
import { TestCell } from './test-cell.js';

export interface ChannelsPanelProps {
  wiring: WiringDraft;
  columnsOf: AddressColumnsOf;
  faults: DraftFaults;
  /** The rig as it is saved; null for a new one. */
  saved: { rig: Rig; rows: readonly ChannelRow[] } | null;
  isReadOnly: boolean;
}

/** All channels: typed, pasted, imported, exported, tested. */
export function ChannelsPanel({ wiring, columnsOf, faults, saved, isReadOnly }: ChannelsPanelProps) {
  const { draft } = wiring;
  const [pasted, setPasted] = useState<string | null>(null);
  const [problem, setProblem] = useState('');
  const setting = useMemo<TableSetting>(
    () => ({ columnsOf, connections: draft.connections.map(({ id }) => id) }),
    [columnsOf, draft.connections],
  );
  const columns = useMemo(() => columnsInUse(draft.rows, setting), [draft.rows, setting]);
  const setRows = (rows: readonly ChannelRow[]) => wiring.change((before) => ({ ...before, rows }));
  const paste = (text: string, at: { row: number; column: number }) => {
    if (hasTableHead(text, setting)) return setPasted(text);
    try {
      setRows(
        pasteCells(
          draft.rows,
          columns.map(({ key }) => key),
          at,
          text,
          newRow(draft.rows, setting),
        ),
      );
      setProblem('');
    } catch (error) {
      setProblem(error instanceof Error ? error.message : String(error));
    }
  };
  const isFull = draft.rows.length >= channelRowsMax;
  return (
    <Panel
      title={`Channels (${draft.rows.length})`}
      actions={
        <Tools
          isReadOnly={isReadOnly}
          canAdd={!isFull}
          canExport={draft.rows.length > 0}
          onAdd={() => setRows([...draft.rows, newRow(draft.rows, setting)])}
          onImport={() => setPasted('')}
          onExport={() =>
            saveText(`${draft.id || 'rig'}-channels.csv`, writeChannelTable(draft.rows, setting))
          }
        />
      }
    >
      {problem !== '' && (
        <Notice kind="warn" role="alert" title="Not pasted">
          {problem}
        </Notice>
      )}
      {draft.rows.length === 0 ? (
        <Empty title="No channel yet">
          {isReadOnly
            ? ''
            : 'Add one, or import a register map. A connection comes first: it says what an address is.'}
        </Empty>
      ) : (
        <TestedTable {...{ wiring, columnsOf, faults, saved, isReadOnly, columns }} onPaste={paste} />
      )}
      {pasted !== null && (
        <ImportDialog
          setting={setting}
          rows={draft.rows}
          initialText={pasted}
          onRows={setRows}
          onClose={() => setPasted(null)}
        />
      )}
    </Panel>
  );
}

interface TestedTableProps extends ChannelsPanelProps {
  columns: readonly ChannelColumn[];
  onPaste: (text: string, at: { row: number; column: number }) => void;
}

function TestedTable({ wiring, columnsOf, faults, saved, isReadOnly, columns, onPaste }: TestedTableProps) {
  const { draft } = wiring;
  const roleObstacle = useObstacle('rig.test-channel');
  const live = useLiveTest(saved?.rig.id ?? '');
  const savedRows = useMemo(() => new Map(saved?.rows.map((row) => [row['id'], row])), [saved]);
  const obstacleOf = (row: ChannelRow): string | null => {
    // Said once above the table, not in every row.
    if (roleObstacle !== null) return '';
    const known = savedRows.get(row['id'] ?? '');
    if (!known) return 'Save it first.';
    return isSameRow(row, known) ? null : 'Changed: save it first.';
  };
  const testable = draft.rows.filter((row) => obstacleOf(row) === null).map((row) => row['id'] ?? '');
  return (
    <Box sx={{ display: 'grid', gap: 1, gridTemplateColumns: 'minmax(0, 1fr)' }}>
      <Box sx={{ display: 'flex', gap: 1, alignItems: 'center', flexWrap: 'wrap', fontSize: '0.8125rem' }}>
        <Button disabled={live.isBusy || testable.length === 0} onClick={() => live.test(testable)}>
          Test all
        </Button>
        <Box component="span" sx={{ color: 'text.secondary' }}>
          {roleObstacle !== null
            ? `Testing ${roleObstacle.charAt(0).toLowerCase()}${roleObstacle.slice(1)}`
            : live.isBusy
              ? 'Testing one after the other …'
              : 'Reads each channel by itself, as it is saved; writes nothing. While the rig moves, the last scan is shown.'}
        </Box>
      </Box>
      <ChannelTable
        rows={draft.rows}
        columns={columns}
        columnsOf={columnsOf}
        connections={draft.connections}
        faults={faults}
        actions={isReadOnly ? null : actionsOf(wiring, columnsOf)}
        onPaste={onPaste}
        testOf={(row) => (
          <TestCell
            id={row['id'] ?? ''}
            title={row['title'] || row['id'] || 'channel'}
            unit={row['unit'] ?? ''}
            state={live.states.get(row['id'] ?? '')}
            obstacle={obstacleOf(row)}
            onTest={live.test}
          />
        )}
      />
    </Box>
  );
}

function actionsOf({ setRow, change }: WiringDraft, columnsOf: AddressColumnsOf): RowActions {
  return {
    change: (index, key, text) =>
      setRow(
        index,
        (row) => (key === 'connection' ? rowOnConnection(row, text, columnsOf) : { ...row, [key]: text }),
        `row ${index} ${key}`,
      ),
    duplicate: (index) =>
      change((draft) => {
        const row = draft.rows[index];
        if (!row || draft.rows.length >= channelRowsMax) return draft;
        const taken = draft.rows.map((one) => one['id'] ?? '');
        const copy = { ...row, id: freeId(row['id'] || 'channel', taken, '') };
        return { ...draft, rows: draft.rows.toSpliced(index + 1, 0, copy) };
      }),
    remove: (index) => change((draft) => ({ ...draft, rows: draft.rows.toSpliced(index, 1) })),
  };
}

/** Columns in which any row has a cell, or has something left over. */
function columnsInUse(rows: readonly ChannelRow[], setting: TableSetting): ChannelColumn[] {
  const used = new Set(rows.flatMap((row) => columnsOfRow(row, setting.columnsOf).map(({ key }) => key)));
  return tableColumns(rows, setting).filter(
    ({ key }) => used.has(key) || rows.some((row) => key.startsWith('address.') && (row[key] ?? '') !== ''),
  );
}

function newRow(rows: readonly ChannelRow[], { connections }: TableSetting): ChannelRow {
  const last = rows.at(-1);
  const taken = rows.map((row) => row['id'] ?? '');
  return {
    id: freeId('channel', taken, ''),
    kind: 'sensor',
    'display.min': '0',
    'display.max': '100',
    'display.decimals': '2',
    connection: last?.['connection'] ?? connections[0] ?? '',
  };
}

function isSameRow(a: ChannelRow, b: ChannelRow): boolean {
  return [...new Set([...Object.keys(a), ...Object.keys(b)])].every(
    (key) => (a[key] ?? '') === (b[key] ?? ''),
  );
}

interface ToolsProps {
  isReadOnly: boolean;
  canAdd: boolean;
  canExport: boolean;
  onAdd: () => void;
  onImport: () => void;
  onExport: () => void;
}

function Tools({ isReadOnly, canAdd, canExport, onAdd, onImport, onExport }: ToolsProps) {
  return (
    <>
      {!isReadOnly && (
        <>
          <Button disabled={!canAdd} onClick={onAdd}>
            Add channel
          </Button>
          <Button onClick={onImport}>Import …</Button>
        </>
      )}
      <Button disabled={!canExport} onClick={onExport}>
        Export CSV
      </Button>
    </>
  );
}
