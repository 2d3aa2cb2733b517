import type { LinePlace, RigEntryInput } from '../../kit/scenario-input.js';
import { stringEnvelope } from './string-envelope.js';
import { powerObjective, shadeExperiment, trackExperiment } from './string-experiment.js';
import { stringRig } from './string-rig.js';

/** String 1 with all its documents. */
export function stringEntry(place: LinePlace): RigEntryInput {
  return {
    rig: stringRig(place),
    envelope: {
      content: stringEnvelope,
      author: 'engineer',
      approvedBy: 'officer',
      reason: 'First envelope of the string bench; modules and converter are simulated.',
    },
    objectives: [{ key: 'power', content: powerObjective, author: 'engineer' }],
    experiments: [
      {
        key: 'hold-by-ripple',
        objectiveKey: 'power',
        content: trackExperiment,
        author: 'engineer',
        note: 'For the string bench with the profiles cloud, ramps and steady.',
      },
      {
        key: 'find-highest-peak',
        objectiveKey: 'power',
        content: shadeExperiment,
        author: 'engineer',
        note: 'For the string bench with the profile shade.',
      },
    ],
  };
}
