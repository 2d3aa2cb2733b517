import type { ScenarioInput } from '@cresthold/shared';

/** The parts of a scenario as they are written down, before the schemas fill in what may be left out. */
type RigEntry = ScenarioInput['rigs'][number];
export type RigInput = RigEntry['rig'];
export type EnvelopeInput = RigEntry['envelope']['content'];
export type ObjectiveInput = RigEntry['objectives'][number]['content'];
export type ExperimentInput = RigEntry['experiments'][number]['content'];
