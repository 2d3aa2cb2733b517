import { DomainError, type FieldFault } from '@cresthold/shared';
import { type AdapterListing, brokenListing, listingOf } from './adapter-listing.js';
import type { Adapter } from './contract.js';
import { fieldFaultsOf } from './parse-or-misconfigured.js';
import { requireContract } from './plug-ins/check-adapter.js';
import { loadPlugIn, type LoadedPlugIn } from './plug-ins/load-plug-in.js';
import { productVersion } from './product-version.js';
import { shippedAdapters } from './shipped-adapters.js';

/** The adapters of one process: those that ship, and those of the plug-ins that are in order. */
export class AdapterRegistry {
  readonly adapters: ReadonlyMap<string, Adapter>;
  /** Every adapter, the broken ones too: shipped first, then plug-ins as configured. */
  readonly listings: readonly AdapterListing[];

  /**
   * An id that is taken already makes the later plug-in a broken one.
   *
   * @throws plug-in.duplicate, plug-in.other-contract for shipped adapters, whose faults are the product's own
   */
  constructor(shipped: readonly Adapter[], plugIns: readonly LoadedPlugIn[] = []) {
    const byId = new Map<string, Adapter>();
    const listings = shipped.map((adapter) => {
      requireContract(adapter);
      if (byId.has(adapter.manifest.id)) throw duplicate(adapter.manifest.id);
      byId.set(adapter.manifest.id, adapter);
      return listingOf(adapter, { version: productVersion, origin: 'shipped', reference: null });
    });
    for (const loaded of plugIns) listings.push(takePlugIn(byId, loaded));
    this.adapters = byId;
    this.listings = listings;
  }

  /** @throws adapter.unknown with the ids that are ready, and why a plug-in of this id is not */
  find(id: string): Adapter {
    const adapter = this.adapters.get(id);
    if (adapter) return adapter;
    const message = this.unknownText(id);
    throw new DomainError('adapter.unknown', message, [{ field: 'adapter', message }]);
  }

  /**
   * Faults of a connection, by field below `root`: an adapter that is not there, or a configuration that its
   * schema does not take.
   *
   * @example
   * registry.checkConnection({ adapter: 'modbus-tcp', configuration: {} }, 'connections[0]') // one fault, at connections[0].configuration.host
   */
  checkConnection(connection: { adapter: string; configuration: unknown }, root = ''): FieldFault[] {
    return this.check(
      connection.adapter,
      'configurationSchema',
      connection.configuration,
      root,
      'configuration',
    );
  }

  /** Faults of a channel address for an adapter, by field below `root`. */
  checkAddress(adapterId: string, address: unknown, root = ''): FieldFault[] {
    return this.check(adapterId, 'addressSchema', address, root, 'address');
  }

  private check(
    adapterId: string,
    schema: 'configurationSchema' | 'addressSchema',
    value: unknown,
    root: string,
    field: string,
  ): FieldFault[] {
    const prefix = root === '' ? '' : `${root}.`;
    const adapter = this.adapters.get(adapterId);
    if (!adapter) return [{ field: `${prefix}adapter`, message: this.unknownText(adapterId) }];
    return fieldFaultsOf(adapter.manifest[schema], value, `${prefix}${field}`);
  }

  private unknownText(id: string): string {
    const broken = this.listings.find((listing) => listing.id === id);
    if (broken?.error) return `The plug-in with adapter "${id}" is broken: ${broken.error.message}`;
    return `No adapter "${id}" is installed: use one of ${[...this.adapters.keys()].join(', ')}.`;
  }
}

/** The adapters that ship, without plug-ins. */
export const shippedRegistry = new AdapterRegistry(shippedAdapters);

/**
 * The adapters of this process: those that ship and those of the plug-ins, each imported and checked. A plug-in
 * that is broken is listed with the reason; it stops nothing.
 *
 * @param references folders or files (they begin with `.` or `/`), or names of installed packages
 * @param base folder from which paths and packages are looked for
 */
export async function loadRegistry(
  references: readonly string[],
  base = process.cwd(),
): Promise<AdapterRegistry> {
  if (references.length === 0) return shippedRegistry;
  const loaded = await Promise.all(references.map((reference) => loadPlugIn(reference, base)));
  return new AdapterRegistry(shippedAdapters, loaded.flat());
}

function takePlugIn(byId: Map<string, Adapter>, loaded: LoadedPlugIn): AdapterListing {
  const { reference, version, adapter } = loaded;
  const isTaken = adapter !== null && byId.has(adapter.manifest.id);
  const error = isTaken ? duplicate(adapter.manifest.id) : loaded.error;
  if (error !== null || adapter === null) return brokenListing(loaded, error);
  byId.set(adapter.manifest.id, adapter);
  return listingOf(adapter, { version, origin: 'plug-in', reference });
}

function duplicate(id: string): DomainError {
  return new DomainError('plug-in.duplicate', `Two adapters have the id "${id}": remove one, or rename it.`);
}
