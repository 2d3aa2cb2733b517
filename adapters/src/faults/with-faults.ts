import { DomainError } from '@cresthold/shared';
import type { Adapter } from '../contract.js';
import type { FaultControl } from './fault-control.js';
import { FaultySession } from './faulty-session.js';

/**
 * The same adapter on a wire that can be made to fail, for tests, rehearsals and benches. What each fault does is
 * said in `wireFaultSchema`.
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
  const estimate = adapter.estimate?.bind(adapter);
  return {
    manifest: adapter.manifest,
    open: async (configuration, signal) => {
      const { fault, isActive } = control;
      if (isActive && fault?.kind === 'disconnect' && !fault.canReconnect) {
        throw new DomainError('adapter.disconnected', 'Injected fault: the connection cannot be made.');
      }
      return new FaultySession(await adapter.open(configuration, signal), control);
    },
    ...(estimate ? { estimate } : {}),
  };
}
