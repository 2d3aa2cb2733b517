import { measured, type TraceCall, type TraceMeter } from './trace-program.js';

/**
 * The operations that an expression is compiled into. Each reads two registers and writes one; those of one
 * operand get it twice.
 */
export const Operation = {
  add: 0,
  subtract: 1,
  multiply: 2,
  divide: 3,
  negate: 4,
  abs: 5,
  min: 6,
  max: 7,
  sqrt: 8,
  copy: 9,
  // What stands above is common, and quick.
  smaller: 10,
  smallerEq: 11,
  larger: 12,
  largerEq: 13,
  equal: 14,
  unequal: 15,
  and: 16,
  or: 17,
  not: 18,
  pow: 19,
  exp: 20,
  log: 21,
  log10: 22,
  sin: 23,
  cos: 24,
  tan: 25,
  sign: 26,
  round: 27,
  floor: 28,
  ceil: 29,
  /** The lower end of a range; no number where the range is empty. */
  lowerEnd: 30,
  /** The sum of the terms from number `a` on, `b` of them. */
  sum: 31,
  /** The result of call number `a` over traces. */
  measure: 32,
  /** Goes to the instruction that stands in the place of the result. */
  jump: 33,
  /** Goes on where `a` is true, else to the instruction that stands in the place of the result. */
  choose: 34,
} as const;
export type Operation = (typeof Operation)[keyof typeof Operation];

/** Numbers of one instruction: operation, register of the result, registers of both operands. */
export const instructionLength = 4;

/** The terms of sums, each the product of a plain factor and two registers: most of what an objective is made of. */
export interface SumTerms {
  readonly factors: Float64Array;
  readonly first: Int32Array;
  readonly second: Int32Array;
}

/** Instructions in order and the registers that they work on; jumps lead forwards only, so each runs once at most. */
export interface Program {
  readonly code: Int32Array;
  readonly registers: Float64Array;
  readonly terms: SumTerms;
  readonly traceCalls: readonly TraceCall[];
  readonly result: number;
}

/**
 * Runs a program. Nothing on the way is judged for being finite; what each result differs by from itself is summed
 * up instead, which is 0 for numbers and NaN as soon as one of them was none. So 1 / ∞, ∞ > 1 or exp(−∞) cannot
 * turn back into a number, and the side of a choice that is not taken does not count.
 *
 * @param meter has the traces of this evaluation
 * @returns the value of the result's register; NaN where any value on the way to it was not finite
 * @realtime safe: allocates nothing, and takes at most as many steps as the program has instructions and terms, and
 * passes over traces
 */
export function runProgram(program: Program, meter: TraceMeter): number {
  const { code, registers, terms, result } = program;
  let spoilt = 0;
  for (let at = 0; at < code.length; at += instructionLength) {
    const operation = code[at] as Operation;
    const target = code[at + 1] as number;
    const left = code[at + 2] as number;
    const right = code[at + 3] as number;
    if (operation < Operation.sum) {
      const a = registers[left] as number;
      const b = registers[right] as number;
      const value = operation < Operation.smaller ? apply(operation, a, b) : applyRarer(operation, a, b);
      spoilt += value - value;
      registers[target] = value;
    } else if (operation === Operation.sum) {
      const value = sumOf(terms, registers, left, left + right);
      spoilt += value - value;
      registers[target] = value;
    } else if (operation === Operation.measure) {
      const value = measure(program, meter, left);
      spoilt += value - value;
      registers[target] = value;
    } else if (operation === Operation.jump || registers[left] === 0) {
      at = target - instructionLength;
    }
  }
  return (registers[result] as number) + spoilt;
}

function measure({ traceCalls, registers }: Program, meter: TraceMeter, at: number): number {
  const { x, y } = traceCalls[at] as TraceCall;
  const { numbers, run } = meter.calls[at] as TraceMeter['calls'][number];
  if (x !== null) numbers[0] = registers[x] as number;
  if (y !== null) numbers[1] = registers[y] as number;
  run();
  return numbers[measured] as number;
}

function sumOf({ factors, first, second }: SumTerms, registers: Float64Array, from: number, to: number) {
  let sum = 0;
  for (let i = from; i < to; i += 1) {
    const a = registers[first[i] as number] as number;
    const b = registers[second[i] as number] as number;
    sum += (factors[i] as number) * a * b;
  }
  return sum;
}

/** What an operation other than a sum or a jump makes of two numbers. */
export function applyOperation(operation: Operation, a: number, b: number): number {
  return operation < Operation.smaller ? apply(operation, a, b) : applyRarer(operation, a, b);
}

/** The commonest operations: small enough to become a part of the loop that runs the program. */
function apply(operation: Operation, a: number, b: number): number {
  switch (operation) {
    case Operation.add:
      return a + b;
    case Operation.subtract:
      return a - b;
    case Operation.multiply:
      return a * b;
    case Operation.divide:
      return a / b;
    case Operation.negate:
      return -a;
    case Operation.abs:
      return Math.abs(a);
    case Operation.min:
      return Math.min(a, b);
    case Operation.max:
      return Math.max(a, b);
    case Operation.sqrt:
      return Math.sqrt(a);
    default:
      return a;
  }
}

function applyRarer(operation: Operation, a: number, b: number): number {
  return operation < Operation.exp ? judge(operation, a, b) : applyFunction(operation, a, b);
}

function judge(operation: Operation, a: number, b: number): number {
  switch (operation) {
    case Operation.smaller:
      return truth(a < b);
    case Operation.smallerEq:
      return truth(a <= b);
    case Operation.larger:
      return truth(a > b);
    case Operation.largerEq:
      return truth(a >= b);
    case Operation.equal:
      return truth(a === b);
    case Operation.unequal:
      return truth(a !== b);
    case Operation.and:
      return truth(a !== 0 && b !== 0);
    case Operation.or:
      return truth(a !== 0 || b !== 0);
    case Operation.not:
      return truth(a === 0);
    default:
      return Math.pow(a, b);
  }
}

const truth = (is: boolean) => (is ? 1 : 0);

function applyFunction(operation: Operation, a: number, b: number): number {
  switch (operation) {
    case Operation.exp:
      return Math.exp(a);
    case Operation.log:
      return Math.log(a);
    case Operation.log10:
      return Math.log10(a);
    case Operation.sin:
      return Math.sin(a);
    case Operation.cos:
      return Math.cos(a);
    case Operation.tan:
      return Math.tan(a);
    case Operation.sign:
      return Math.sign(a);
    case Operation.round:
      // Halves go away from zero, so that rounding treats both signs alike.
      return Math.sign(a) * Math.round(Math.abs(a));
    case Operation.floor:
      return Math.floor(a);
    case Operation.ceil:
      return Math.ceil(a);
    default:
      return a > b ? NaN : a;
  }
}
