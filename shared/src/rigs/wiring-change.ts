import type { Channel, Rig } from './rig.schema.js';

/**
 * True where a change of wiring gives channels another meaning, so that an envelope approved for the old
 * wiring says nothing about the new: channels added or taken, or another kind, unit, address, axis, expression or
 * adapter; or a machine that becomes a bench, or the other way, since benches may be made to fail on purpose.
 * Titles, display ranges and where a connection leads (host, port) are no such change.
 */
export function changesMeaning(before: Rig, after: Rig): boolean {
  return canonical(meaningOf(before)) !== canonical(meaningOf(after));
}

function meaningOf(rig: Rig) {
  const adapters = new Map(rig.connections.map((connection) => [connection.id, connection.adapter]));
  const channels = rig.channels.map((channel) => [channel.id, channelMeaning(channel, adapters)]);
  return { isBench: rig.isBench, channels: Object.fromEntries(channels) as Record<string, unknown> };
}

function channelMeaning(channel: Channel, adapters: ReadonlyMap<string, string>) {
  const { kind, unit } = channel;
  if (channel.kind === 'derived') return { kind, unit, expression: channel.expression };
  const { connection, address } = channel;
  return { kind, unit, connection, adapter: adapters.get(connection), address, axis: axisMeaning(channel) };
}

/** What expressions make of the places of a trace's points; its title is for people alone. */
function axisMeaning(channel: Channel) {
  if (channel.kind !== 'trace') return null;
  const { unit, from, step } = channel.axis;
  return { unit, from, step };
}

/** JSON whose properties are in order, so that equal values are equal texts. */
function canonical(value: unknown): string {
  return JSON.stringify(value, (_key, inner: unknown) => {
    if (typeof inner !== 'object' || inner === null || Array.isArray(inner)) return inner;
    return Object.fromEntries(Object.entries(inner).sort(([a], [b]) => (a < b ? -1 : 1)));
  });
}
