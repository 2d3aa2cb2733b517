import {
  compileObjective,
  DerivedChannels,
  DomainError,
  objectiveContentSchema,
  Quality,
  Readings,
  rigSchema,
} from '@cresthold/shared';
import type { BenchModel } from '../kit/bench-model.js';
import type { ObjectiveInput, RigInput } from '../kit/scenario-input.js';

/**
 * The objective that a bench is shipped with, by the code that evaluates it in a run: derived channels, traces and
 * validity conditions included.
 *
 * @returns the objective's value, NaN where it is not valid
 * @throws expression.invalid where objective or rig do not compile
 */
export function shippedObjective(rigInput: RigInput, content: ObjectiveInput): (model: BenchModel) => number {
  const rig = rigSchema.parse(rigInput);
  const outcome = compileObjective(objectiveContentSchema.parse(content), rig);
  if (!outcome.isOk) throw new DomainError('expression.invalid', undefined, outcome.faults);
  const { objective } = outcome;
  const readings = Readings.of(rig);
  const derived = new DerivedChannels(rig, readings);
  return (model) => {
    rig.channels.forEach(({ id, kind }, i) => {
      if (kind === 'trace') readings.setTrace(i, model.readTrace(id));
      else if (kind !== 'derived') readings.set(i, model.read(id), Quality.good);
    });
    derived.fill();
    const { isValid, value } = objective.evaluate(readings);
    return isValid ? value : NaN;
  };
}
