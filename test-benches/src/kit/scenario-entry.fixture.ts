import {
  scenarioRigSchema,
  type EnvelopeContent,
  type ExperimentContent,
  type ObjectiveContent,
  type Rig,
} from '@cresthold/shared';
import type { RigEntryInput } from './scenario-input.js';

/** The documents of one rig with one experiment, checked and filled in. */
export interface ShippedDocuments {
  readonly rig: Rig;
  readonly envelope: EnvelopeContent;
  readonly objective: ObjectiveContent | null;
  readonly experiment: ExperimentContent;
}

/** @param experimentKey the first experiment where left out */
export function shippedDocuments(input: RigEntryInput, experimentKey?: string): ShippedDocuments {
  const { rig, envelope, objectives, experiments } = scenarioRigSchema.parse(input);
  const experiment = experiments.find(({ key }) => experimentKey === undefined || key === experimentKey);
  if (!experiment) throw new Error(`The entry has no experiment "${experimentKey ?? ''}".`);
  const objective = objectives.find(({ key }) => key === experiment.objectiveKey);
  return {
    rig,
    envelope: envelope.content,
    objective: objective?.content ?? null,
    experiment: experiment.content,
  };
}
