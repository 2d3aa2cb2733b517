import type { RigEntryInput, TcpPlace } from '../../kit/scenario-input.js';
import { mixerEnvelope } from './mixer-envelope.js';
import { wasteExperiment, wasteObjective, yieldExperiment, yieldObjective } from './mixer-experiment.js';
import { mixerRig } from './mixer-rig.js';

const note = 'Sized for the mixer bench at five times its speed.';

/** Mixer 1 with all its documents: the same hills sought as a yield and as a waste. */
export function mixerEntry(place: TcpPlace): RigEntryInput {
  return {
    rig: mixerRig(place),
    envelope: {
      content: mixerEnvelope,
      author: 'engineer',
      approvedBy: 'officer',
      reason: 'First envelope of the mixer bench; the cultures are simulated.',
    },
    objectives: [
      { key: 'yield', content: yieldObjective, author: 'engineer' },
      { key: 'waste', content: wasteObjective, author: 'engineer' },
    ],
    experiments: [
      {
        key: 'find-yield',
        objectiveKey: 'yield',
        content: yieldExperiment,
        author: 'engineer',
        note,
      },
      {
        key: 'find-least-waste',
        objectiveKey: 'waste',
        content: wasteExperiment,
        author: 'engineer',
        note,
      },
    ],
  };
}
