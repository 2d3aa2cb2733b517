import { DomainError, type FieldFault } from '../errors/domain-error.js';
import { compileExpression } from '../expressions/compile-expression.js';
import type { CompiledExpression } from '../expressions/expression.types.js';

/** One expression of a document, and where it stands in it. */
export interface ExpressionText {
  field: string;
  text: string;
  /** Whether it must be a condition. */
  isCondition: boolean;
}

/**
 * Compiles expressions of a document and lists all faults at once.
 *
 * @throws expression.invalid with one detail for each faulty expression
 */
export function compileAll(
  texts: readonly ExpressionText[],
  knownSymbols: ReadonlySet<string>,
): CompiledExpression[] {
  const faults: FieldFault[] = [];
  const compiled: CompiledExpression[] = [];
  for (const { field, text, isCondition } of texts) {
    const outcome = compileExpression(text, knownSymbols);
    if (!outcome.isOk) faults.push({ field, message: outcome.message });
    else if (isCondition && !outcome.expression.isCondition) {
      faults.push({ field, message: 'This is no condition: compare with something, e.g. "co < 400".' });
    } else compiled.push(outcome.expression);
  }
  if (faults.length > 0) throw new DomainError('expression.invalid', undefined, faults);
  return compiled;
}
