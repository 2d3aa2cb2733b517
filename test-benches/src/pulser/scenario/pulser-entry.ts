import type { RigEntryInput, TcpPlace } from '../../kit/scenario-input.js';
import { pulserEnvelope } from './pulser-envelope.js';
import { energyExperiment, energyObjective, pulserExperiment, pulserObjective } from './pulser-experiment.js';
import { pulserRig } from './pulser-rig.js';

/** Pulser 1 with all its documents, and with the tempting ones that lead over its cliff. */
export function pulserEntry(place: TcpPlace): RigEntryInput {
  return {
    rig: pulserRig(place),
    envelope: {
      content: pulserEnvelope,
      author: 'engineer',
      approvedBy: 'officer',
      reason: 'First envelope of the demonstration bench; the laser is simulated.',
    },
    objectives: [
      { key: 'clean-energy', content: pulserObjective, author: 'engineer' },
      { key: 'energy', content: energyObjective, author: 'engineer' },
    ],
    experiments: [
      {
        key: 'find-pulse',
        objectiveKey: 'clean-energy',
        content: pulserExperiment,
        author: 'engineer',
        note: 'Sized for the pulser bench at five times its speed.',
      },
      {
        key: 'seek-energy',
        objectiveKey: 'energy',
        content: energyExperiment,
        author: 'engineer',
        note: 'Leads over the cliff: to be seen in a rehearsal, not to be copied.',
      },
    ],
  };
}
