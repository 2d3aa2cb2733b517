import {
  channelOfRow,
  rigSchema,
  rowOfChannel,
  type AddressColumnsOf,
  type ChannelRow,
  type Connection,
  type Rig,
} from '@cresthold/shared';

/** A rig as it is being wired: texts as typed, channels as rows of a table. */
export interface RigDraft {
  id: string;
  title: string;
  description: string;
  isBench: boolean;
  periodMs: string;
  connections: readonly Connection[];
  rows: readonly ChannelRow[];
}

export const emptyDraft: RigDraft = {
  id: '',
  title: '',
  description: '',
  isBench: false,
  periodMs: '100',
  connections: [],
  rows: [],
};

export function draftOf(rig: Rig, columnsOf: AddressColumnsOf): RigDraft {
  const { id, title, description, isBench, periodMs, connections, channels } = rig;
  const rows = channels.map((channel) => rowOfChannel(channel, columnsOf));
  return { id, title, description, isBench, periodMs: String(periodMs), connections, rows };
}

/** What is sent of a draft, and the faults of its own by the field that the server would name. */
export interface DraftBody {
  body: Record<string, unknown>;
  faults: ReadonlyMap<string, string>;
}

export function bodyOf(draft: RigDraft, columnsOf: AddressColumnsOf): DraftBody {
  const { rows, periodMs, ...rest } = draft;
  const faults = new Map<string, string>();
  const channels = rows.map((row, index) => {
    const { channel, faults: own } = channelOfRow(row, columnsOf);
    for (const { column, message } of own) faults.set(`channels[${index}].${column}`, message);
    return channel;
  });
  const period = Number(periodMs.trim().replace(',', '.'));
  const isPeriod = periodMs.trim() !== '' && Number.isFinite(period);
  if (!isPeriod) faults.set('periodMs', 'Give a number.');
  if (rest.id === '') faults.set('id', needed);
  if (rest.connections.length === 0) faults.set('connections', needed);
  if (rows.length === 0) faults.set('channels', needed);
  if (rest.title.trim() === '') faults.set('title', needed);
  return { body: { ...rest, periodMs: isPeriod ? period : periodMs, channels }, faults };
}

export const needed = 'Needed.';

/** The rig that a body stands for; null while it is none. */
export function rigOf(body: Record<string, unknown>): Rig | null {
  return rigSchema.safeParse(body).data ?? null;
}

/** An id that no other has: `plc`, `plc-2`, `plc-3`; for channels `o2`, `o22`, `o23`. */
export function freeId(wanted: string, taken: readonly string[], joint: '-' | '' = '-'): string {
  if (!taken.includes(wanted)) return wanted;
  for (let count = 2; ; count += 1) {
    const id = `${wanted}${joint}${count}`;
    if (!taken.includes(id)) return id;
  }
}

/** What is left of an address when its channel goes to an adapter with other fields. */
export function rowOnConnection(
  row: ChannelRow,
  connection: string,
  columnsOf: AddressColumnsOf,
): ChannelRow {
  const known = columnsOf(connection);
  const keys = known && new Set(known.map(({ key }) => key));
  const kept = Object.entries(row).filter(([key]) => !key.startsWith('address.') || !keys || keys.has(key));
  return { ...Object.fromEntries(kept), connection };
}
