import type { Trace } from '../signals/trace.types.js';
import type { Unit } from '../units/unit.js';

/** Looks a symbol up in one scan: its value where good, NaN where not. */
export interface Lookup {
  (symbol: string): number;
  /** The same for symbols that are traces, null where not good; without it no trace is. */
  readonly trace?: (symbol: string) => Trace | null;
}

/** Where a bound expression reads its symbols, by index: `Readings` is one. */
export interface ValueSource {
  /** Place of a symbol, or −1; must stay the same. */
  indexOf(symbol: string): number;
  readonly values: Float64Array;
  /** A `Quality` for each value. */
  readonly qualities: Uint8Array;
  /** The traces, null where the value is a number; without it there are none. */
  readonly traces?: readonly (Trace | null)[];
}

/**
 * A compiled expression. Booleans are numbers: 1 true, 0 false. A bad input makes the result NaN;
 * the result is never a number that rests on a bad input.
 */
export interface CompiledExpression {
  readonly text: string;
  /** The symbols it reads, each once; traces among them. */
  readonly symbols: readonly string[];
  /** Those of them that are traces. */
  readonly traceSymbols: readonly string[];
  /** Its result is a truth value: a comparison, `and or not`, or a choice between such. */
  readonly isCondition: boolean;
  /** The unit of its result; null where units were not given, or where it fits any unit. */
  readonly unit: Unit | null;
  /** Most operations that an evaluation takes; at most `expressionOperationsMax`. */
  readonly operations: number;
  /** Most passes over traces that an evaluation takes; at most `tracePassesMax`. */
  readonly tracePasses: number;
  evaluate(lookup: Lookup): number;
  /**
   * Looks the places of the symbols up once.
   *
   * @param result where each evaluation puts its value, at index 0: a number that is handed back by a function is
   * put on the heap, one in an array is not
   * @returns evaluates with what stands there at the time of the call; allocates nothing
   */
  bind(source: ValueSource, result: Float64Array): () => void;
}

export type CompileOutcome =
  | { isOk: true; expression: CompiledExpression }
  | {
      isOk: false;
      message: string;
      /** Character where the fault is, from 0; null where unknown. */ at: number | null;
      /** Set where the expression is sound but for its units. */ isUnitFault?: true;
    };
