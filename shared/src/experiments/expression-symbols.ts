import type { SymbolSet } from '../expressions/symbol-set.js';
import { channelSymbols } from '../expressions/channel-symbols.js';
import type { Rig } from '../rigs/rig.schema.js';
import type { ExperimentGraph } from './experiment.schema.js';
import { orderSteps } from './step-order.js';

/** The symbol that stands for the experiment's objective in its expressions. */
export const objectiveSymbol = 'objective';

/**
 * What the expressions of a step may name: the rig's channels, `objective`, and the results of steps that
 * come before it on every way.
 *
 * @returns channels and the objective only, where the step is unknown or cannot be reached
 */
export function expressionSymbols(rig: Rig, graph: ExperimentGraph, stepId: string): SymbolSet {
  return channelSymbols(rig).with([objectiveSymbol, ...orderSteps(graph).resultsBefore(stepId)]);
}
