import type { AdapterRegistry } from '@cresthold/adapters';
import { DerivedChannels, Readings, type FieldFault, type Rig } from '@cresthold/shared';
import { faultsOf } from '../documents/prefix-faults.js';
import { traceAddressFaults } from './trace-address-faults.js';

/** What is wrong with a rig beyond its schema: wiring that its adapters refuse, expressions that do not compile. */
export function rigFaults(rig: Rig, adapters: AdapterRegistry): FieldFault[] {
  return [...connectionFaults(rig, adapters), ...addressFaults(rig, adapters), ...derivedFaults(rig)];
}

function connectionFaults(rig: Rig, adapters: AdapterRegistry): FieldFault[] {
  return rig.connections.flatMap((connection, index) =>
    adapters.checkConnection(connection, `connections[${index}]`),
  );
}

function addressFaults(rig: Rig, adapters: AdapterRegistry): FieldFault[] {
  const adapterOf = new Map(rig.connections.map((connection) => [connection.id, connection.adapter]));
  return rig.channels.flatMap((channel, index) => {
    if (channel.kind === 'derived') return [];
    const adapter = adapterOf.get(channel.connection);
    // A connection that is missing, or an adapter that is not installed, is a fault already.
    if (adapter === undefined || !adapters.adapters.has(adapter)) return [];
    const faults = adapters.checkAddress(adapter, channel.address, `channels[${index}]`);
    return faults.length > 0 ? faults : traceAddressFaults(channel, adapter, adapters, `channels[${index}]`);
  });
}

/** Judged by the code that evaluates them in the scan, so that what is taken here also runs there. */
function derivedFaults(rig: Rig): FieldFault[] {
  return faultsOf(() => new DerivedChannels(rig, Readings.of(rig)), 'channels');
}
