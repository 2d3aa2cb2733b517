import type { RigStatus } from '@cresthold/shared';
import type { RigHostsPort } from '../../src/rigs/rig-hosts.port.js';
import { requireResting } from '../../src/rigs/rig-phase.js';

const hosts = (status: Partial<RigStatus> | null) => ({ status: () => status }) as unknown as RigHostsPort;

describe('what needs a rig at rest', () => {
  it.each(['idle', 'offline', 'tripped'] as const)('may be done while it is %s', (phase) => {
    expect(() => requireResting(hosts({ phase, runId: null }), 'r', 'change it')).not.toThrow();
  });

  it('may be done where the rig has no host', () => {
    expect(() => requireResting(hosts(null), 'r', 'change it')).not.toThrow();
  });

  it.each([
    ['armed', null, /is armed/],
    ['running', 'run-1', /is running/],
    ['tripped', 'run-1', /A run still records/],
  ] as const)('is refused while it is %s with run %s', (phase, runId, message) => {
    expect(() => requireResting(hosts({ phase, runId }), 'r', 'change it')).toThrow(message);
  });
});
