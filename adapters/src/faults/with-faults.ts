import type { Adapter } from '../contract.js';
import type { FaultControl } from './fault-control.js';
import { FaultySession } from './faulty-session.js';

/**
 * The same adapter on a wire that can be made to fail, for tests and rehearsals.
 *
 * @example
 * const control = new FaultControl();
 * const adapter = withFaults(inMemoryAdapter, control);
 * control.fault = { kind: 'freeze' };
 */
export function withFaults<Configuration, Address>(
  adapter: Adapter<Configuration, Address>,
  control: FaultControl,
): Adapter<Configuration, Address> {
  return {
    manifest: adapter.manifest,
    open: async (configuration, signal) =>
      new FaultySession(await adapter.open(configuration, signal), control),
  };
}
