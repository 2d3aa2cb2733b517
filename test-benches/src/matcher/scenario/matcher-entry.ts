import type { RigEntryInput, TcpPlace } from '../../kit/scenario-input.js';
import { matcherEnvelope } from './matcher-envelope.js';
import { matcherExperiment, matcherObjective } from './matcher-experiment.js';
import { matcherRig } from './matcher-rig.js';

/** Matcher 1 with all its documents. */
export function matcherEntry(place: TcpPlace): RigEntryInput {
  return {
    rig: matcherRig(place),
    envelope: {
      content: matcherEnvelope,
      author: 'engineer',
      approvedBy: 'officer',
      reason: 'First envelope of the demonstration bench; generator and load are simulated.',
    },
    objectives: [{ key: 'reflected-share', content: matcherObjective, author: 'engineer' }],
    experiments: [
      {
        key: 'find-match',
        objectiveKey: 'reflected-share',
        content: matcherExperiment,
        author: 'engineer',
        note: 'Sized for the matcher bench at five times its speed.',
      },
    ],
  };
}
