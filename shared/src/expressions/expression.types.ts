/** Looks a symbol up in one scan: its value where good, NaN where not. */
export type Lookup = (symbol: string) => number;

/**
 * A compiled expression. Booleans are numbers: 1 true, 0 false. A bad input makes the result NaN;
 * the result is never a number that rests on a bad input.
 */
export interface CompiledExpression {
  readonly text: string;
  /** The symbols it reads, each once. */
  readonly symbols: readonly string[];
  /** Its result is a truth value: a comparison, `and or not`, or a choice between such. */
  readonly isCondition: boolean;
  evaluate(lookup: Lookup): number;
}

export type CompileOutcome =
  | { isOk: true; expression: CompiledExpression }
  | {
      isOk: false;
      message: string;
      /** Character where the fault is, from 0; null where unknown. */ at: number | null;
    };
