import type { FieldFault } from '../errors/domain-error.js';
import type { ObjectiveSample } from '../experiments/sequencer.types.js';
import { channelSymbols } from '../expressions/channel-symbols.js';
import { compileExpression } from '../expressions/compile-expression.js';
import type { CompiledExpression } from '../expressions/expression.types.js';
import type { Rig } from '../rigs/rig.schema.js';
import type { Readings } from '../scan/readings.js';
import type { ObjectiveContent } from './objective.schema.js';

/** An objective made ready for the scan. */
export interface ObjectiveEvaluator {
  readonly content: ObjectiveContent;
  /** Channels that the objective and its validity conditions read, each once. */
  readonly channels: readonly string[];
  /**
   * The objective in one scan, with the sign that its expression gives it: the direction is not applied.
   *
   * @returns the same object each time, overwritten by the next call
   * @realtime safe: allocates nothing
   */
  evaluate(readings: Readings): Readonly<ObjectiveSample>;
}

export type ObjectiveOutcome =
  | { isOk: true; objective: ObjectiveEvaluator }
  /** Fields as in ObjectiveContent: `expression`, `validity[0].condition`. */
  | { isOk: false; faults: FieldFault[] };

/** Compiles an objective for a rig, or says which fields are at fault and what to do. */
export function compileObjective(content: ObjectiveContent, rig: Rig): ObjectiveOutcome {
  const known = channelSymbols(rig);
  const faults: FieldFault[] = [];
  const compile = (text: string, field: string): CompiledExpression | null => {
    const outcome = compileExpression(text, known);
    if (outcome.isOk) return outcome.expression;
    faults.push({ field, message: outcome.message });
    return null;
  };
  const value = compile(content.expression, 'expression');
  const conditions = content.validity.map(({ condition, message }, index) => {
    const field = `validity[${index}].condition`;
    const expression = compile(condition, field);
    if (expression && !expression.isCondition) {
      faults.push({ field, message: 'This is no condition: compare with something, e.g. "co < 400".' });
    }
    return { expression, message };
  });
  if (faults.length > 0 || !value) return { isOk: false, faults };
  return { isOk: true, objective: evaluatorOf(content, value, conditions) };
}

interface Condition {
  expression: CompiledExpression | null;
  message: string;
}

/** An objective whose symbols have their places in one set of readings. */
interface BoundObjective {
  readonly readings: Readings;
  readonly evaluate: () => void;
  readonly conditions: readonly { isTrue: () => boolean; message: string }[];
}

function bindTo(
  readings: Readings,
  result: Float64Array,
  value: CompiledExpression,
  conditions: readonly Condition[],
): BoundObjective {
  return {
    readings,
    evaluate: value.bind(readings, result),
    conditions: conditions.map(({ expression, message }) => {
      const truth = new Float64Array(1);
      const evaluate = expression?.bind(readings, truth);
      const isTrue = () => {
        evaluate?.();
        // A condition over a bad reading is NaN: not known to be true is not valid.
        return truth[0] === 1;
      };
      return { isTrue, message };
    }),
  };
}

/**
 * A class, though it does nothing: the engine keeps numbers in place in objects of a shape of their own, whereas a
 * literal shares its shape with every literal that begins with a `value`, whatever that is, and then each number
 * written goes on the heap.
 */
class OwnSample implements ObjectiveSample {
  value = NaN;
  isGood = false;
  isValid = false;
  whyInvalid: string | null = null;
}

function evaluatorOf(
  content: ObjectiveContent,
  value: CompiledExpression,
  conditions: readonly Condition[],
): ObjectiveEvaluator {
  const result = new Float64Array(1);
  const sample = new OwnSample();
  let bound: BoundObjective | null = null;
  const symbols = [value, ...conditions.flatMap(({ expression }) => expression ?? [])].flatMap(
    (e) => e.symbols,
  );
  return {
    content,
    channels: [...new Set(symbols)],
    evaluate(readings) {
      // The readings of a rig are one object from scan to scan.
      if (bound?.readings !== readings) bound = bindTo(readings, result, value, conditions);
      bound.evaluate();
      sample.value = result[0] as number;
      sample.isGood = Number.isFinite(result[0]);
      sample.whyInvalid = sample.isGood
        ? firstViolated(bound)
        : 'A reading that the objective needs is not good.';
      sample.isValid = sample.whyInvalid === null;
      return sample;
    },
  };
}

function firstViolated({ conditions }: BoundObjective): string | null {
  for (let i = 0; i < conditions.length; i += 1) {
    const condition = conditions[i] as BoundObjective['conditions'][number];
    if (!condition.isTrue()) return condition.message;
  }
  return null;
}
