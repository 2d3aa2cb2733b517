import { create, parseDependencies, type MathNode } from 'mathjs/number';
import { Quality } from '../rigs/quality.js';
import type { Unit } from '../units/unit.js';
import { closestNames } from './closest-names.js';
import { compileNode, type CompiledNode } from './compile-node.js';
import { TraceSlots } from './compile-trace-call.js';
import { ExpressionFault } from './expression-fault.js';
import { expressionConstants } from './expression-functions.js';
import type { CompiledExpression, CompileOutcome, Lookup, ValueSource } from './expression.types.js';
import { generateFunction } from './generate-function.js';
import { runProgram, type Program } from './operations.js';
import { ProgramBuilder } from './program-builder.js';
import { tracesAmong } from './symbol-set.js';
import { TraceMeter } from './trace-program.js';
import { unitOfExpression } from './unit-of-expression.js';

/** Longest text of an expression, characters. */
export const expressionLengthMax = 500;
const nodeCountMax = 200;
/** Most operations that any expression takes: a node is compiled into four at most. */
export const expressionOperationsMax = 4 * nodeCountMax;

/** The unit of a symbol; null where it fits any (what is not known is not judged). */
export type UnitLookup = (symbol: string) => Unit | null;

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
 * With `unitOf` the units are checked as well: sums, comparisons, choices and functions must be of quantities
 * that go together (`unitOfExpression` has the rules); otherwise the outcome is a fault that names both units.
 *
 * A trace is no number: it is named as the first value of the functions of `traceFunctions` only, which make numbers
 * of it. A trace that is not good makes the result NaN just as a number that is not.
 *
 * @param text at most 500 characters
 * @param knownSymbols names that the text may use; they go before `pi` and `e`. A `SymbolSet` says which are traces.
 * @param unitOf unit of each symbol; without it units are not judged
 * @returns the compiled expression, whose `evaluate` allocates nothing, or what is wrong and where; never throws
 * @example
 * compileExpression('2 * o2', new Set(['o2'])) // { isOk: true, expression }
 */
export function compileExpression(
  text: string,
  knownSymbols: ReadonlySet<string>,
  unitOf?: UnitLookup,
): CompileOutcome {
  const outcome = parseText(text);
  if ('message' in outcome) return { isOk: false, ...outcome };
  const { node } = outcome;
  const builder = new ProgramBuilder();
  const slots = new Map<string, number>();
  const traces = new TraceSlots(tracesAmong(knownSymbols));
  try {
    const symbolRegister = (name: string) => registerOf(name, knownSymbols, traces, builder, slots);
    const root = compileNode(node, { builder, symbolRegister, traces });
    const { operations } = builder;
    const program = builder.finish(root.register);
    const isSymbol = (name: string) => slots.has(name) || traces.slots.has(name);
    const judged = unitOf ? judgeUnits(text, node, isSymbol, unitOf, traces.axes) : { unit: null };
    if ('message' in judged) return { isOk: false, ...judged, isUnitFault: true };
    const parts = { text, program, root, slots, traces, operations };
    return { isOk: true, expression: expressionOf(parts, judged.unit) };
  } catch (fault) {
    if (!(fault instanceof ExpressionFault)) throw fault;
    return { isOk: false, message: fault.message, at: placeOf(text, fault.culprit) };
  }
}

type Judgement = { unit: Unit | null } | { message: string; at: number | null };

function judgeUnits(
  text: string,
  node: MathNode,
  isSymbol: (name: string) => boolean,
  unitOf: UnitLookup,
  axes: TraceSlots['axes'],
): Judgement {
  try {
    return { unit: unitOfExpression(node, (name) => (isSymbol(name) ? unitOf(name) : 'plain'), axes) };
  } catch (fault) {
    if (!(fault instanceof ExpressionFault)) throw fault;
    return { message: fault.message, at: placeOf(text, fault.culprit) };
  }
}

interface Parts {
  readonly text: string;
  readonly program: Program;
  readonly root: CompiledNode;
  /** Register of each number. */
  readonly slots: ReadonlyMap<string, number>;
  readonly traces: TraceSlots;
  readonly operations: number;
}

function expressionOf(parts: Parts, unit: Unit | null): CompiledExpression {
  const { text, root, slots, traces, operations } = parts;
  const traceSymbols = [...traces.slots.keys()];
  return {
    text,
    symbols: [...slots.keys(), ...traceSymbols],
    traceSymbols,
    isCondition: root.isCondition,
    unit,
    operations,
    tracePasses: traces.passes,
    evaluate: evaluator(parts),
    bind: (source, result) => boundEvaluator(parts, source, result),
  };
}

function meterFor({ program, traces }: Parts): TraceMeter {
  return new TraceMeter(traces.slots.size, program.traceCalls);
}

function evaluator(parts: Parts) {
  const { program, slots, traces } = parts;
  const [symbols, registers] = [[...slots.keys()], Int32Array.from(slots.values())];
  const traceSymbols = [...traces.slots.keys()];
  const meter = meterFor(parts);
  return (lookup: Lookup): number => {
    for (let i = 0; i < symbols.length; i += 1) {
      const value = lookup(symbols[i] as string);
      if (!Number.isFinite(value)) return NaN;
      program.registers[registers[i] as number] = value;
    }
    for (let i = 0; i < traceSymbols.length; i += 1) {
      const trace = lookup.trace?.(traceSymbols[i] as string) ?? null;
      if (trace === null) return NaN;
      meter.slots[i] = trace;
    }
    return runProgram(program, meter);
  };
}

function boundEvaluator(parts: Parts, source: ValueSource, result: Float64Array): () => void {
  const { program, slots, traces } = parts;
  const registers = Int32Array.from(slots.values());
  const places = Int32Array.from(slots.keys(), (symbol) => source.indexOf(symbol));
  const tracePlaces = Int32Array.from(traces.slots.keys(), (symbol) => source.indexOf(symbol));
  const meter = meterFor(parts);
  for (let i = 0; i < tracePlaces.length; i += 1) {
    const trace = source.traces?.[tracePlaces[i] as number];
    if (!trace) return () => void (result[0] = NaN);
    meter.slots[i] = trace;
  }
  if (places.includes(-1)) return () => void (result[0] = NaN);
  const { values, qualities } = source;
  const generated = generateFunction(program, registers, places, tracePlaces);
  if (generated) return () => generated(values, qualities, result, meter.calls);
  const target = program.registers;
  return () => {
    result[0] = NaN;
    for (let i = 0; i < tracePlaces.length; i += 1) {
      if (qualities[tracePlaces[i] as number] !== Quality.good) return;
    }
    for (let i = 0; i < places.length; i += 1) {
      const place = places[i] as number;
      const value = values[place] as number;
      // The difference is 0 for finite numbers only.
      if (qualities[place] !== Quality.good || value - value !== 0) return;
      target[registers[i] as number] = value;
    }
    result[0] = runProgram(program, meter);
  };
}

function registerOf(
  name: string,
  known: ReadonlySet<string>,
  traces: TraceSlots,
  builder: ProgramBuilder,
  slots: Map<string, number>,
): number {
  if (traces.axes.has(name)) {
    throw new ExpressionFault(
      `"${name}" is a trace, not a number: make one of it, as in mean(${name}) or peak(${name}).`,
      name,
    );
  }
  if (!known.has(name)) {
    const constant = expressionConstants.get(name);
    if (constant !== undefined) return builder.constant(constant);
    const meant = closestNames(name, known);
    const hint = meant.length > 0 ? `Did you mean ${meant.join(' or ')}?` : 'Use a name from the list.';
    throw new ExpressionFault(`"${name}" is not known here. ${hint}`, name);
  }
  const register = slots.get(name) ?? builder.register();
  slots.set(name, register);
  return register;
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
