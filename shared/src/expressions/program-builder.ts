import { applyOperation, instructionLength, Operation, type Program } from './operations.js';
import type { TraceCall } from './trace-program.js';

/** One term of a sum: a plain factor times one or two registers. */
export interface Term {
  factor: number;
  first: number;
  /** Null where there is one register only. */
  second: number | null;
}

/** Puts a program together, instruction by instruction; what rests on constants alone is computed at once. */
export class ProgramBuilder {
  private readonly code: number[] = [];
  private readonly terms: Required<Term>[] = [];
  private readonly traceCalls: TraceCall[] = [];
  /** What each register holds before the program runs. */
  private readonly initial: number[] = [];
  private readonly constants = new Map<number, number>();
  private readonly constantValues = new Map<number, number>();

  /** @returns a register that nothing else writes */
  register(): number {
    return this.initial.push(NaN) - 1;
  }

  constant(value: number): number {
    const known = this.constants.get(value);
    if (known !== undefined) return known;
    const register = this.initial.push(value) - 1;
    this.constants.set(value, register);
    this.constantValues.set(register, value);
    return register;
  }

  /** The number that a register holds whatever is read; null where that depends. */
  constantOf(register: number): number | null {
    return this.constantValues.get(register) ?? null;
  }

  /** @returns the register of the result */
  emit(operation: Operation, a: number, b: number = a): number {
    const [first, second] = [this.constantOf(a), this.constantOf(b)];
    if (first !== null && second !== null) {
      const value = applyOperation(operation, first, second);
      // What is no number has to be met when the program runs, and only if it comes that way.
      if (Number.isFinite(value)) return this.constant(value);
    }
    const target = this.register();
    this.code.push(operation, target, a, b);
    return target;
  }

  /** The sum of terms, from left to right. */
  sum(terms: readonly Term[]): number {
    const target = this.register();
    this.code.push(Operation.sum, target, this.terms.length, terms.length);
    this.terms.push(...terms);
    return target;
  }

  /** A call over traces. */
  measure(call: TraceCall): number {
    const target = this.register();
    this.code.push(Operation.measure, target, this.traceCalls.push(call) - 1, 0);
    return target;
  }

  /** A choice; only the side that is taken is computed. */
  choose(condition: number, yes: () => number, no: () => number): number {
    const target = this.register();
    const choose = this.code.push(Operation.choose, 0, condition, condition) - instructionLength;
    this.copyTo(target, yes());
    const jump = this.code.push(Operation.jump, 0, target, target) - instructionLength;
    this.code[choose + 1] = this.code.length;
    this.copyTo(target, no());
    this.code[jump + 1] = this.code.length;
    return target;
  }

  private copyTo(target: number, source: number): void {
    this.code.push(Operation.copy, target, source, source);
  }

  /** Operations at most: an instruction or a term each. */
  get operations(): number {
    return this.code.length / instructionLength + this.terms.length;
  }

  finish(result: number): Program {
    const one = this.constant(1);
    return {
      code: Int32Array.from(this.code),
      registers: Float64Array.from(this.initial),
      terms: {
        factors: Float64Array.from(this.terms, ({ factor }) => factor),
        first: Int32Array.from(this.terms, ({ first }) => first),
        second: Int32Array.from(this.terms, ({ second }) => second ?? one),
      },
      traceCalls: this.traceCalls,
      result,
    };
  }
}
