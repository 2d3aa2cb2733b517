import type { BenchDefinition } from './bench-definition.js';
import type { BenchModel, ModelSettings } from './bench-model.js';
import { FaultedModel } from './faulted-model.js';
import type { PlannedFault } from './faults.js';

/** The bench's model with its faults, as any wire sees it. */
export function makeFaultedModel<M extends BenchModel>(
  definition: BenchDefinition<M>,
  settings: ModelSettings,
  own: Readonly<Record<string, unknown>>,
  planned: readonly PlannedFault[] = [],
): FaultedModel<M> {
  const model = definition.makeModel(settings, own);
  const { wire, ownFaults = [], nanValue } = definition;
  const fields = wire.kind === 'serial-text' ? wire.commands.fields : wire.registers.fields;
  const controllerValues = new Set([
    ...fields.filter(({ isOfController }) => isOfController === true).map(({ name }) => name),
    ...model.values.filter(({ isWritable }) => isWritable).map(({ name }) => name),
  ]);
  return new FaultedModel(model, { planned, ownFaults, nanValue, controllerValues });
}
