import { DomainError, type RigPhase } from '@cresthold/shared';
import type { RigHostsPort } from './rig-hosts.port.js';

const restingPhases: readonly RigPhase[] = ['idle', 'offline', 'tripped'];

/**
 * @param purpose what is to be done then, e.g. `change its wiring`
 * @throws rig.busy unless the rig is idle, offline or tripped, and no run is open
 */
export function requireResting(hosts: RigHostsPort, rigId: string, purpose: string): void {
  const { phase = 'offline', runId = null } = hosts.status(rigId) ?? {};
  if (!restingPhases.includes(phase)) {
    throw new DomainError('rig.busy', `The rig is ${phase}: disarm it or end its run, then ${purpose}.`);
  }
  if (runId !== null) {
    throw new DomainError('rig.busy', `A run still records how the rig is stopped: then ${purpose}.`);
  }
}
