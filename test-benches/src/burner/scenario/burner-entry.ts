import type { RigEntryInput, TcpPlace } from '../../kit/scenario-input.js';
import { burnerEnvelope } from './burner-envelope.js';
import { burnerExperiment, burnerObjective } from './burner-experiment.js';
import { burnerRig } from './burner-rig.js';

/** Burner 1 with all its documents. */
export function burnerEntry(place: TcpPlace): RigEntryInput {
  return {
    rig: burnerRig(place),
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
  };
}
