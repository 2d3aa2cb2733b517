import { scenarioSchema, type Scenario } from '@cresthold/shared';
import { burnerEnvelope } from './burner-envelope.js';
import { burnerExperiment, burnerObjective } from './burner-experiment.js';
import { burnerRig, type BenchAddress } from './burner-rig.js';

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
    rigs: [
      {
        rig: burnerRig(bench),
        envelope: {
          content: burnerEnvelope,
          author: 'engineer',
          approvedBy: 'officer',
          reason: 'First envelope of the demonstration bench; the burner is simulated.',
        },
        objectives: [{ key: 'efficiency', content: burnerObjective, author: 'engineer' }],
        experiments: [
          {
            key: 'find-air-trim',
            objectiveKey: 'efficiency',
            content: burnerExperiment,
            author: 'engineer',
            note: 'Sized for the burner bench at five times its speed.',
          },
        ],
      },
    ],
    start: { rigId: 'burner-1', experimentKey: 'find-air-trim', by: 'engineer' },
  });
}
