import { isDeepStrictEqual } from 'node:util';
import type { Channel, Rig } from '@cresthold/shared';

/**
 * True where a change of wiring gives channels another meaning, so that an envelope approved for the old
 * wiring says nothing about the new: channels added or taken, or another kind, unit, address, axis, expression or
 * adapter; or a machine that becomes a bench, or the other way, since benches may be made to fail on purpose. Titles, display ranges and where a connection leads (host, port) are no such change.
 */
export function changesMeaning(before: Rig, after: Rig): boolean {
  return !isDeepStrictEqual(meaningOf(before), meaningOf(after));
}

function meaningOf(rig: Rig) {
  const adapters = new Map(rig.connections.map((connection) => [connection.id, connection.adapter]));
  const channels = new Map(rig.channels.map((channel) => [channel.id, channelMeaning(channel, adapters)]));
  return { isBench: rig.isBench, channels };
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
