import { DomainError, type FieldFault } from '@cresthold/shared';
import { z } from 'zod';
import { type Adapter, contractVersion } from './contract.js';
import { inMemoryAdapter } from './in-memory/in-memory.adapter.js';
import { modbusTcpAdapter } from './modbus-tcp/modbus-tcp.adapter.js';
import { fieldFaultsOf } from './parse-or-misconfigured.js';
import { meetsRange } from './semver-range.js';

/**
 * Adapters by id.
 *
 * @throws adapter.misconfigured naming the plug-in that is there twice or was written for another contract
 */
export function registerAdapters(adapters: readonly Adapter[]): ReadonlyMap<string, Adapter> {
  const byId = new Map<string, Adapter>();
  for (const adapter of adapters) {
    const { id, contract } = adapter.manifest;
    if (byId.has(id)) {
      throw new DomainError('adapter.misconfigured', `Two adapters have the id "${id}": remove one.`);
    }
    if (!meetsRange(contractVersion, contract)) {
      throw new DomainError(
        'adapter.misconfigured',
        `Adapter "${id}" was written for contract ${contract}, this is ${contractVersion}: install a matching one.`,
      );
    }
    byId.set(id, adapter);
  }
  return byId;
}

export const installedAdapters: ReadonlyMap<string, Adapter> = registerAdapters([
  modbusTcpAdapter,
  inMemoryAdapter,
]);

/** @throws adapter.unknown with the ids that are installed */
export function findAdapter(id: string): Adapter {
  const adapter = installedAdapters.get(id);
  if (adapter) return adapter;
  const known = [...installedAdapters.keys()].join(', ');
  throw new DomainError('adapter.unknown', `No adapter "${id}" is installed: use one of ${known}.`, [
    { field: 'adapter', message: `Use one of ${known}.` },
  ]);
}

/**
 * Faults of a connection, by field below `root`: an adapter that is not installed, or a
 * configuration that its schema does not take.
 *
 * @example
 * checkConnection({ adapter: 'modbus-tcp', configuration: {} }, 'connections[0]') // one fault, at connections[0].configuration.host
 */
export function checkConnection(
  connection: { adapter: string; configuration: unknown },
  root = '',
): FieldFault[] {
  return check(connection.adapter, 'configurationSchema', connection.configuration, root, 'configuration');
}

/** Faults of a channel address for an adapter, by field below `root`. */
export function checkAddress(adapterId: string, address: unknown, root = ''): FieldFault[] {
  return check(adapterId, 'addressSchema', address, root, 'address');
}

function check(
  adapterId: string,
  schema: 'configurationSchema' | 'addressSchema',
  value: unknown,
  root: string,
  field: string,
): FieldFault[] {
  const prefix = root === '' ? '' : `${root}.`;
  const adapter = installedAdapters.get(adapterId);
  if (!adapter) {
    const known = [...installedAdapters.keys()].join(', ');
    return [
      { field: `${prefix}adapter`, message: `No adapter "${adapterId}" is installed: use one of ${known}.` },
    ];
  }
  return fieldFaultsOf(adapter.manifest[schema], value, `${prefix}${field}`);
}

/** An adapter as screens and scripts see it; the schemas are JSON Schema of what may be given. */
export interface AdapterSummary {
  id: string;
  title: string;
  configurationSchema: Record<string, unknown>;
  addressSchema: Record<string, unknown>;
}

export function adapterSummaries(): AdapterSummary[] {
  return [...installedAdapters.values()].map(({ manifest }) => ({
    id: manifest.id,
    title: manifest.title,
    configurationSchema: z.toJSONSchema(manifest.configurationSchema, { io: 'input' }),
    addressSchema: z.toJSONSchema(manifest.addressSchema, { io: 'input' }),
  }));
}
