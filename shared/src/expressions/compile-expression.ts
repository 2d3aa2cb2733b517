import { create, parseDependencies, type MathNode } from 'mathjs/number';
import { closestNames } from './closest-names.js';
import { compileNode, constantReader, ExpressionFault, type CompiledNode } from './compile-node.js';
import type { CompileOutcome, Lookup } from './expression.types.js';

/** Longest text of an expression, characters. */
export const expressionLengthMax = 500;
const nodeCountMax = 200;

const { parse } = create(parseDependencies ?? {}, {});

/**
 * Compiles an expression over named numbers: arithmetic (`+ - * / ^`), comparisons (exact, and chains such
 * as `2 < o2 <= 4`), `and or not`, `a ? b : c`, the functions of `expressionFunctions`, `pi`, `e`, `true`
 * and `false`. A dotted name (`survey.best.airTrim`) is one symbol and must be known as a whole.
 *
 * Evaluation is strict: every symbol of the text is read first, and if any of them is not a finite number
 * the result is NaN, even where the symbol stands in the branch of a choice that is not taken, beside an
 * `or` that is true already, or is multiplied by 0. A sub-result that is not finite (division by zero,
 * overflow, root of a negative number) makes the result NaN likewise, through comparisons and `and or not`
 * too; only in the branch that is not taken it is not computed, so that `x == 0 ? 0 : 1 / x` can be written.
 *
 * @param text at most 500 characters
 * @param knownSymbols names that the text may use; they go before `pi` and `e`
 * @returns the compiled expression, whose `evaluate` allocates nothing, or what is wrong and where
 * @example
 * compileExpression('2 * o2', new Set(['o2'])) // { isOk: true, expression }
 */
export function compileExpression(text: string, knownSymbols: ReadonlySet<string>): CompileOutcome {
  const outcome = parseText(text);
  if ('message' in outcome) return { isOk: false, ...outcome };
  const symbols: string[] = [];
  const slots = new Float64Array(nodeCountMax);
  try {
    const root = compileNode(outcome.node, (name) => readerOf(name, knownSymbols, symbols, slots));
    return {
      isOk: true,
      expression: { text, symbols, isCondition: root.isCondition, evaluate: evaluator(root, symbols, slots) },
    };
  } catch (fault) {
    if (!(fault instanceof ExpressionFault)) throw fault;
    return { isOk: false, message: fault.message, at: placeOf(text, fault.culprit) };
  }
}

function evaluator(root: CompiledNode, symbols: readonly string[], slots: Float64Array) {
  return (lookup: Lookup): number => {
    for (let i = 0; i < symbols.length; i += 1) {
      const value = lookup(symbols[i] as string);
      if (!Number.isFinite(value)) return NaN;
      slots[i] = value;
    }
    return root.run();
  };
}

function readerOf(name: string, known: ReadonlySet<string>, symbols: string[], slots: Float64Array) {
  if (!known.has(name)) {
    const constant = constantReader(name);
    if (constant) return constant;
    const meant = closestNames(name, known);
    const hint = meant.length > 0 ? `Did you mean ${meant.join(' or ')}?` : 'Use a name from the list.';
    throw new ExpressionFault(`"${name}" is not known here. ${hint}`, name);
  }
  if (!symbols.includes(name)) symbols.push(name);
  const slot = symbols.indexOf(name);
  return () => slots[slot] as number;
}

type ParseOutcome = { node: MathNode } | { message: string; at: number | null };

function parseText(text: string): ParseOutcome {
  if (text.length > expressionLengthMax) {
    return { message: `The expression is too long: at most ${expressionLengthMax} characters.`, at: null };
  }
  const foreign = foreignSigns.find(({ sign }) => sign.test(text));
  if (foreign) return { message: foreign.message, at: text.search(foreign.sign) };
  let node: MathNode;
  try {
    node = parse(text);
  } catch (error) {
    const { message, char } = error as Error & { char?: number };
    const said = message.replace(/ \(char \d+\)$/, '');
    return { message: `${said}.`, at: char === undefined ? null : char - 1 };
  }
  let count = 0;
  node.traverse(() => (count += 1));
  if (count > nodeCountMax)
    return { message: 'The expression has too many parts: make it shorter.', at: null };
  return { node };
}

/** Signs that would be understood otherwise than they were meant. */
const foreignSigns = [
  { sign: /&&/, message: 'Write "and" instead of "&&".' },
  { sign: /\|\|/, message: 'Write "or" instead of "||".' },
  { sign: /!(?!=)/, message: 'Write "not" instead of "!".' },
  { sign: /%/, message: '"%" cannot be used: values are in the unit of their channel.' },
  { sign: /#/, message: 'Comments cannot be used here.' },
  { sign: /["'`]/, message: 'Texts cannot be used here.' },
];

/** Where a name or operator stands in the text; a name is found as a whole only. */
function placeOf(text: string, culprit: string | null): number | null {
  if (culprit === null || culprit === '') return null;
  for (const match of text.matchAll(/(?<![\w.])[\p{L}_$][\p{L}\w$]*(?:\s*\.\s*[\p{L}_$][\p{L}\w$]*)*/gu)) {
    if (match[0].replace(/\s/g, '') === culprit) return match.index;
  }
  const at = text.indexOf(culprit);
  return at === -1 ? null : at;
}
