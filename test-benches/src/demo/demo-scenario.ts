import { scenarioSchema, type Scenario } from '@cresthold/shared';
import { burnerEntry } from '../burner/scenario/burner-entry.js';

/** Where the burner bench listens. */
export interface BenchAddress {
  benchHost: string;
  benchPort: number;
}

/** The Brackwater Test Station, an invented place: people by role, and a burner that is a bench. */
export function demoScenario(bench: BenchAddress): Scenario {
  return scenarioSchema.parse({
    users: [
      { account: 'administrator', title: 'Administrator', roles: ['administrator'] },
      { account: 'officer', title: 'Safety officer', roles: ['safety-officer'] },
      { account: 'engineer', title: 'Test engineer', roles: ['test-engineer'] },
      { account: 'technician', title: 'Technician', roles: ['technician'] },
      { account: 'reader', title: 'Reader', roles: ['reader'] },
    ],
    rigs: [burnerEntry({ host: bench.benchHost, port: bench.benchPort })],
    start: { rigId: 'burner-1', experimentKey: 'find-air-trim', by: 'engineer' },
  });
}
