import { DomainError } from '@cresthold/shared';
import type { Adapter } from '../contract.js';
import { parseOrMisconfigured } from '../parse-or-misconfigured.js';
import {
  type InMemoryAddress,
  inMemoryAddressSchema,
  type InMemoryConfiguration,
  inMemoryConfigurationSchema,
} from './in-memory.schema.js';
import { InMemorySession } from './in-memory-session.js';
import { memoryStore } from './memory-store.js';

/**
 * Values in this process, for tests and rehearsals. A store must have a value before it is read; one that shows a
 * model (`memoryStore(name).useModel(model)`) has the model's.
 */
export const inMemoryAdapter: Adapter<InMemoryConfiguration, InMemoryAddress> = {
  manifest: {
    id: 'in-memory',
    title: 'In memory (tests and rehearsals)',
    contract: '^1.1.0',
    configurationSchema: inMemoryConfigurationSchema,
    addressSchema: inMemoryAddressSchema,
  },

  async open(configuration, signal) {
    const { store: name, timeoutMs } = parseOrMisconfigured(inMemoryConfigurationSchema, configuration);
    const store = memoryStore(name);
    // A turn of the loop, as with any wire: an abort right after the call still cancels.
    await new Promise((resolve) => setImmediate(resolve));
    if (signal.aborted) throw new DomainError('adapter.cancelled', 'Opening was cancelled.');
    if (store.mood === 'gone') throw new DomainError('adapter.disconnected', `Store "${name}" is gone.`);
    return new InMemorySession(store, name, timeoutMs);
  },

  estimate(configuration, addresses) {
    parseOrMisconfigured(inMemoryConfigurationSchema, configuration);
    addresses.forEach((address, index) =>
      parseOrMisconfigured(inMemoryAddressSchema, address, `addresses[${index}]`),
    );
    return { requests: addresses.length > 0 ? 1 : 0, wireS: 0 };
  },
};
