import type { LinePlace, RigEntryInput } from '../../kit/scenario-input.js';
import { couplingEnvelope } from './coupling-envelope.js';
import { couplingExperiment, couplingObjective } from './coupling-experiment.js';
import { couplingRig } from './coupling-rig.js';

/** Coupling 1 with all its documents. */
export function couplingEntry(place: LinePlace): RigEntryInput {
  return {
    rig: couplingRig(place),
    envelope: {
      content: couplingEnvelope,
      author: 'engineer',
      approvedBy: 'officer',
      reason: 'First envelope of the coupling bench; stage and light are simulated.',
    },
    objectives: [{ key: 'coupled-power', content: couplingObjective, author: 'engineer' }],
    experiments: [
      {
        key: 'find-and-hold-peak',
        objectiveKey: 'coupled-power',
        content: couplingExperiment,
        author: 'engineer',
        note: 'Sized for the coupling bench at its own speed.',
      },
    ],
  };
}
