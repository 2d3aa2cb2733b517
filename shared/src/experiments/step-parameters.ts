import { compileExpression } from '../expressions/compile-expression.js';
import type { NumericField, NumericParameter, Step } from './experiment.schema.js';
import { seekNumericFields } from './seek/seek-expressions.js';

/** A parameter that is a text to be compiled. */
export interface TextField {
  field: string;
  text: string;
}

export function numericFields(step: Step): NumericField[] {
  switch (step.kind) {
    case 'move':
      return step.parameters.targets.map(({ value }, index) => ({
        field: `parameters.targets[${index}].value`,
        parameter: value,
      }));
    case 'survey':
      return step.parameters.actuators.flatMap(({ from, to }, i) => [
        { field: `parameters.actuators[${i}].from`, parameter: from },
        { field: `parameters.actuators[${i}].to`, parameter: to },
      ]);
    case 'seek':
      return seekNumericFields(step.parameters);
    case 'start':
    case 'settle':
    case 'hold':
    case 'check':
    case 'finish':
      return [];
  }
}

/** Parameters that must be conditions. */
export function conditionFields(step: Step): TextField[] {
  if (step.kind === 'check') return [{ field: 'parameters.criterion', text: step.parameters.criterion }];
  if (step.kind === 'seek' && step.parameters.end.when !== null) {
    return [{ field: 'parameters.end.when', text: step.parameters.end.when }];
  }
  return [];
}

/** Parameters that are followed scan by scan and must be a quantity. */
export function valueFields(step: Step): TextField[] {
  if (step.kind !== 'seek' || step.parameters.constraint === null) return [];
  return [{ field: 'parameters.constraint.expression', text: step.parameters.constraint.expression }];
}

/** Actuators that a step commands, with the field that names each. */
export function commandedActuators(step: Step): { field: string; channel: string }[] {
  if (step.kind === 'move') {
    return step.parameters.targets.map(({ channel }, index) => ({
      field: `parameters.targets[${index}].channel`,
      channel,
    }));
  }
  if (step.kind === 'survey' || step.kind === 'seek') {
    return step.parameters.actuators.map(({ channel }, index) => ({
      field: `parameters.actuators[${index}].channel`,
      channel,
    }));
  }
  return [];
}

const noSymbols: ReadonlySet<string> = new Set();

/** The number that a parameter is known to be before the run; null where that depends on the run. */
export function constantOf(parameter: NumericParameter): number | null {
  if (typeof parameter === 'number') return parameter;
  const outcome = compileExpression(parameter.expression, noSymbols);
  return outcome.isOk ? outcome.expression.evaluate(() => NaN) : null;
}
