import { compileExpression } from '../../expressions/compile-expression.js';
import type { CompiledExpression } from '../../expressions/expression.types.js';
import type { SymbolSet } from '../../expressions/symbol-set.js';
import { channelSymbols } from '../../expressions/channel-symbols.js';
import { objectiveSymbol } from '../expression-symbols.js';
import type { Step } from '../experiment.schema.js';
import { resultNames } from '../step-kinds.js';
import { conditionFields, constantOf, numericFields, valueFields } from '../step-parameters.js';
import type { PreflightCase } from './fault-list.js';

/** Expressions of parameters and criteria. */
export function checkExpressions(c: PreflightCase): void {
  const channels = channelSymbols(c.rig);
  const everywhere = channels.with([objectiveSymbol, ...[...c.order.steps.values()].flatMap(resultNames)]);
  for (const step of c.graph.steps) {
    const here = availableTo(c, step, channels);
    for (const { field, parameter } of numericFields(step)) {
      if (typeof parameter === 'number') continue;
      const expression = compileAt(c, step, field, parameter.expression, here, everywhere);
      if (expression && Number.isNaN(constantOf(parameter) ?? 0)) {
        c.faults.error('not-finite', step.id, field, 'This expression gives no number: mend it.');
      }
    }
    for (const { field, text } of valueFields(step)) {
      const expression = compileAt(c, step, field, text, here, everywhere);
      if (expression?.isCondition) {
        const message = 'This is a condition: give the quantity itself, and its bound beside it.';
        c.faults.error('no-quantity', step.id, field, message);
      }
    }
    for (const { field, text } of conditionFields(step)) {
      const expression = compileAt(c, step, field, text, here, everywhere);
      if (expression && !expression.isCondition) {
        const message = 'This is no condition: compare with something, e.g. "objective > 90".';
        c.faults.error('no-condition', step.id, field, message);
      }
    }
  }
}

/** Names whose values are there when the step begins. */
function availableTo(c: PreflightCase, step: Step, channels: SymbolSet): SymbolSet {
  const results = [...c.order.resultsBefore(step.id)];
  if (c.objective) return channels.with([objectiveSymbol, ...results]);
  // Without an objective a Hold has no mean of it to leave behind.
  return channels.with(results.filter((name) => !name.endsWith('.objective')));
}

function compileAt(
  c: PreflightCase,
  step: Step,
  field: string,
  text: string,
  here: SymbolSet,
  everywhere: SymbolSet,
): CompiledExpression | null {
  const outcome = compileExpression(text, here.with(everywhere));
  if (!outcome.isOk) {
    // Names that exist but are not there yet are no suggestion: say only what may be used.
    const narrow = compileExpression(text, here);
    c.faults.error('expression', step.id, field, narrow.isOk ? outcome.message : narrow.message);
    return null;
  }
  const early = outcome.expression.symbols.filter((symbol) => !here.has(symbol));
  for (const symbol of early) {
    if (!c.objective && (symbol === objectiveSymbol || symbol.endsWith('.objective'))) {
      const message = `"${symbol}" needs an objective: choose one for the experiment.`;
      c.faults.error('no-objective', step.id, field, message);
    } else {
      const message = `"${symbol}" is not there on every way to this step: name a step that always comes before it.`;
      c.faults.error('not-available', step.id, field, message);
    }
  }
  return early.length === 0 ? outcome.expression : null;
}
