import { useMemo, useState } from 'react';
import {
  addressColumns,
  type AddressColumnsOf,
  type ChannelColumn,
  type ChannelRow,
  type Connection,
} from '@cresthold/shared';
import type { AdapterDocument } from '../../../api/index.js';
import { beginHistory, record, redo, undo, type History } from '../../../components/index.js';
import type { RigDraft } from './rig-draft.js';

export interface WiringDraft {
  draft: RigDraft;
  /** One step of the history; a change of the same `mark` as the one before joins it, so that typing is one step. */
  change: (update: (draft: RigDraft) => RigDraft, mark?: string) => void;
  setRow: (index: number, update: (row: ChannelRow) => ChannelRow, mark?: string) => void;
  setConnection: (index: number, update: (connection: Connection) => Connection, mark?: string) => void;
  undo: (() => void) | null;
  redo: (() => void) | null;
  /** Begins anew from what the server has. */
  reset: (draft: RigDraft) => void;
}

interface Kept {
  history: History<RigDraft>;
  mark: string;
}

/** The draft with undo and redo. */
export function useWiringDraft(initial: RigDraft): WiringDraft {
  const [{ history }, setKept] = useState<Kept>(() => ({ history: beginHistory(initial), mark: '' }));
  const change: WiringDraft['change'] = (update, mark = '') =>
    setKept((kept) => {
      const next = update(kept.history.present);
      const isSameStep = mark !== '' && mark === kept.mark && kept.history.past.length > 0;
      const joined = { ...kept.history, present: next, future: [] };
      return { history: isSameStep ? joined : record(kept.history, next), mark };
    });
  const go = (step: typeof undo<RigDraft>) => () =>
    setKept((kept) => ({ history: step(kept.history), mark: '' }));
  return {
    draft: history.present,
    change,
    setRow: (index, update, mark) =>
      change((draft) => ({ ...draft, rows: replaced(draft.rows, index, update) }), mark),
    setConnection: (index, update, mark) =>
      change((draft) => ({ ...draft, connections: replaced(draft.connections, index, update) }), mark),
    undo: history.past.length > 0 ? go(undo) : null,
    redo: history.future.length > 0 ? go(redo) : null,
    reset: (draft) => setKept({ history: beginHistory(draft), mark: '' }),
  };
}

function replaced<T>(list: readonly T[], index: number, update: (item: T) => T): T[] {
  return list.map((item, at) => (at === index ? update(item) : item));
}

/** Columns of addresses by connection, for the adapters that are there. */
export function useAddressColumns(
  connections: readonly Pick<Connection, 'id' | 'adapter'>[],
  adapters: readonly AdapterDocument[],
): AddressColumnsOf {
  const byAdapter = useMemo(() => columnsByAdapter(adapters), [adapters]);
  // The same function while nothing that it says has changed: rows are drawn anew by it.
  const wires = connections.map(({ id, adapter }) => `${id}:${adapter}`).join(' ');
  return useMemo(() => columnsOfWires(wires, byAdapter), [wires, byAdapter]);
}

export function columnsByAdapter(adapters: readonly AdapterDocument[]): ReadonlyMap<string, ChannelColumn[]> {
  return new Map(
    adapters.flatMap(({ id, addressSchema }) =>
      id !== null && addressSchema !== null ? [[id, addressColumns(addressSchema)] as const] : [],
    ),
  );
}

export function columnsOfWires(
  wires: string,
  byAdapter: ReadonlyMap<string, ChannelColumn[]>,
): AddressColumnsOf {
  const adapterOf = new Map(wires.split(' ').map((wire) => wire.split(':') as [string, string]));
  return (connection) => byAdapter.get(adapterOf.get(connection) ?? '') ?? null;
}
