import { Logger, type Provider } from '@nestjs/common';
import { AdapterRegistry, loadRegistry } from '@cresthold/adapters';
import { CONFIG } from '../config/config.module.js';
import type { Config } from '../config/config.schema.js';

/** The adapters of this server, with the plug-ins that its configuration names; broken ones are logged. */
export const adapterRegistryProvider: Provider = {
  provide: AdapterRegistry,
  inject: [CONFIG],
  useFactory: async ({ plugIns }: Config): Promise<AdapterRegistry> => {
    const registry = await loadRegistry(plugIns);
    const logger = new Logger('Adapters');
    for (const { origin, state, reference, id, error } of registry.listings) {
      if (origin !== 'plug-in') continue;
      if (state === 'ready') logger.log(`Plug-in ${reference}: adapter "${id}" is ready.`);
      else logger.warn(`Plug-in ${reference} is broken and left out: ${error?.message} (${error?.code})`);
    }
    return registry;
  },
};
