import type { FunctionNode, MathNode } from 'mathjs';
import type { TraceAxis } from '../rigs/rig.schema.js';
import { ExpressionFault } from './expression-fault.js';
import { contentOf, dottedName } from './parsed-nodes.js';
import type { ProgramBuilder } from './program-builder.js';
import type { TraceFunction } from './trace-functions.js';

/** Most passes over traces that one expression takes: some milliseconds for the longest traces. */
export const tracePassesMax = 200;

/** The traces that an expression may name, and those that it does. */
export class TraceSlots {
  /** Slot of each trace that is read, in the order of their first mention. */
  readonly slots = new Map<string, number>();
  /** Passes over traces so far. */
  passes = 0;

  constructor(readonly axes: ReadonlyMap<string, TraceAxis>) {}

  slotOf(name: string): number {
    const slot = this.slots.get(name) ?? this.slots.size;
    this.slots.set(name, slot);
    return slot;
  }

  /** @throws ExpressionFault where it becomes too much for a scan */
  add(passes: number, culprit: string): void {
    this.passes += passes;
    if (this.passes <= tracePassesMax) return;
    const message =
      'The expression measures traces too often for one scan: put a part into a derived channel.';
    throw new ExpressionFault(message, culprit);
  }
}

/**
 * Compiles a call of a function over traces.
 *
 * @param compile for the numbers that go with them
 * @returns the register of the result
 * @throws ExpressionFault where a number stands for a trace, or the number of values is wrong
 */
export function compileTraceCall(
  node: FunctionNode,
  known: TraceFunction,
  traces: TraceSlots,
  builder: ProgramBuilder,
  compile: (node: MathNode) => number,
): number {
  const { name, signature, create, passes } = known;
  const numbers = node.args.slice(known.traces);
  const isLeftOut = known.areNumbersOptional && numbers.length === 0;
  if (node.args.length < known.traces || (numbers.length !== known.numbers.length && !isLeftOut)) {
    throw new ExpressionFault(
      `"${name}" is called with the wrong number of values: write ${signature}.`,
      name,
    );
  }
  const names = node.args.slice(0, known.traces).map((part) => traceNameOf(part, known, traces.axes));
  checkAxes(names, name, traces.axes);
  traces.add(passes, name);
  const [first = 0, second = first] = names.map((trace) => traces.slotOf(trace));
  const [x = null, y = null] = numbers.map(compile);
  return builder.measure({ create, first, second, x, y });
}

/** The name of the trace that stands here. */
function traceNameOf(node: MathNode, known: TraceFunction, axes: ReadonlyMap<string, TraceAxis>): string {
  if (node.type === 'ParenthesisNode') return traceNameOf(contentOf(node), known, axes);
  const { name, signature } = known;
  const symbol = dottedName(node);
  if (symbol !== null && axes.has(symbol)) return symbol;
  const what = symbol === null ? 'a number' : `"${symbol}", which is none`;
  const have = [...axes.keys()];
  const hint = have.length === 0 ? 'There is no trace here.' : `Traces are: ${have.join(', ')}.`;
  throw new ExpressionFault(
    `"${name}" takes a trace by its name, not ${what}: write ${signature}. ${hint}`,
    name,
  );
}

/** Two traces can be held against each other only where their points stand at the same places. */
function checkAxes(names: readonly string[], culprit: string, axes: ReadonlyMap<string, TraceAxis>): void {
  const [first, second] = names.map((name) => axes.get(name));
  if (!first || !second) return;
  if (first.from === second.from && first.step === second.step && first.unit === second.unit) return;
  throw new ExpressionFault(
    `"${names.join('" and "')}" stand on different axes: only traces on the same axis can be held against each other.`,
    culprit,
  );
}
