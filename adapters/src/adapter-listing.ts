import type { DomainError, ErrorRecord } from '@cresthold/shared';
import type { Adapter } from './contract.js';
import { formSchemaOf, type JsonSchema } from './plug-ins/check-adapter.js';
import type { LoadedPlugIn } from './plug-ins/load-plug-in.js';

/** An adapter as screens and scripts see it. */
export interface AdapterListing {
  /** Null where a broken plug-in does not tell. */
  id: string | null;
  title: string;
  /** Of its package; null where that has none. */
  version: string | null;
  /** Semver range of the contract that it was written for; null where it does not tell. */
  contract: string | null;
  origin: 'shipped' | 'plug-in';
  /** What the configuration calls the plug-in; null for a shipped adapter. */
  reference: string | null;
  state: 'ready' | 'broken';
  /** Why it is broken; null where it is not. */
  error: ErrorRecord | null;
  /** JSON Schema of what may be given; null where it is broken. */
  configurationSchema: JsonSchema | null;
  addressSchema: JsonSchema | null;
}

/** @param from where the adapter comes from */
export function listingOf(
  { manifest }: Adapter,
  from: Pick<AdapterListing, 'version' | 'origin' | 'reference'>,
): AdapterListing {
  return {
    id: manifest.id,
    title: manifest.title,
    contract: manifest.contract,
    ...from,
    state: 'ready',
    error: null,
    configurationSchema: formSchemaOf(manifest.configurationSchema),
    addressSchema: formSchemaOf(manifest.addressSchema),
  };
}

export function brokenListing(
  { reference, version, id, title, contract }: LoadedPlugIn,
  error: DomainError | null,
): AdapterListing {
  return {
    id,
    title: title ?? reference,
    contract,
    version,
    origin: 'plug-in',
    reference,
    state: 'broken',
    error: error?.toRecord() ?? null,
    configurationSchema: null,
    addressSchema: null,
  };
}
