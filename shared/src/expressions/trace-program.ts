import type { Trace } from '../signals/trace.types.js';

/**
 * Measures a trace, or two.
 *
 * @param numbers what else the function was given, at 0 and 1 (NaN where left out); its result goes to 2
 */
export type TraceMeasure = (numbers: Float64Array, first: Trace, second: Trace) => void;

/** Where the result stands in the numbers of a measure. */
export const measured = 2;

/** One call of a function over traces in a program. */
export interface TraceCall {
  /** Makes the measure with working memory of its own. */
  readonly create: () => TraceMeasure;
  /** Slots of the traces; the second is the first again where the function takes one only. */
  readonly first: number;
  readonly second: number;
  /** Registers of the numbers; null where left out. */
  readonly x: number | null;
  readonly y: number | null;
}

/** One call made ready: its numbers are put in, it is run, its result is taken out. */
export interface BoundTraceCall {
  readonly numbers: Float64Array;
  readonly run: () => void;
}

const nothing: Trace = { points: [], from: 0, step: 1 };

/** The traces that a program reads in this evaluation, and its calls over them. */
export class TraceMeter {
  /** One per trace symbol; to be set before the calls are run. */
  readonly slots: Trace[];
  readonly calls: readonly BoundTraceCall[];

  constructor(slotCount: number, calls: readonly TraceCall[]) {
    this.slots = Array.from({ length: slotCount }, () => nothing);
    this.calls = calls.map((call) => this.bind(call));
  }

  private bind({ create, first, second }: TraceCall): BoundTraceCall {
    const { slots } = this;
    const numbers = new Float64Array(measured + 1).fill(NaN);
    const measure = create();
    return { numbers, run: () => measure(numbers, slots[first] ?? nothing, slots[second] ?? nothing) };
  }
}
