import { compileExpression } from '../expressions/compile-expression.js';
import type { NumericParameter, Step } from './experiment.schema.js';

/** A parameter that may be a number or an expression, with its place in the step. */
export interface NumericField {
  /** E.g. `parameters.targets[0].value`. */
  field: string;
  parameter: NumericParameter;
}

/** A parameter that must be a condition. */
export interface ConditionField {
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
      return [
        { field: 'parameters.from', parameter: step.parameters.from },
        { field: 'parameters.to', parameter: step.parameters.to },
      ];
    case 'seek':
      return [
        { field: 'parameters.ditherAmplitude', parameter: step.parameters.ditherAmplitude },
        { field: 'parameters.ditherPeriodS', parameter: step.parameters.ditherPeriodS },
        { field: 'parameters.gain', parameter: step.parameters.gain },
      ];
    case 'start':
    case 'settle':
    case 'hold':
    case 'check':
    case 'finish':
      return [];
  }
}

export function conditionFields(step: Step): ConditionField[] {
  if (step.kind === 'check') return [{ field: 'parameters.criterion', text: step.parameters.criterion }];
  if (step.kind === 'seek' && step.parameters.end.when !== null) {
    return [{ field: 'parameters.end.when', text: step.parameters.end.when }];
  }
  return [];
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
    return [{ field: 'parameters.actuator', channel: step.parameters.actuator }];
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
