import { DomainError } from '../../errors/domain-error.js';
import { compileExpression } from '../../expressions/compile-expression.js';
import type { CompiledExpression, Lookup } from '../../expressions/expression.types.js';
import type { NumericParameter } from '../experiment.schema.js';

/** Compiles an expression of a step. */
export type CompileStepExpression = (stepId: string, field: string, text: string) => CompiledExpression;

/** @returns a compiler for one graph, which throws expression.invalid naming step and field */
export function stepCompiler(knownSymbols: ReadonlySet<string>): CompileStepExpression {
  return (stepId, field, text) => {
    const outcome = compileExpression(text, knownSymbols);
    if (outcome.isOk) return outcome.expression;
    const place = `steps.${stepId}.${field}`;
    throw new DomainError('expression.invalid', undefined, [{ field: place, message: outcome.message }]);
  };
}

/** A numeric parameter made ready: its value is taken when a step starts. */
export type NumericValue = (lookup: Lookup) => number;

export function numericValue(
  compile: CompileStepExpression,
  stepId: string,
  field: string,
  parameter: NumericParameter,
): NumericValue {
  if (typeof parameter === 'number') return () => parameter;
  const expression = compile(stepId, field, parameter.expression);
  return (lookup) => expression.evaluate(lookup);
}
