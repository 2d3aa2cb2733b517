import { instructionLength, Operation, type Program } from './operations.js';
import { measured, type BoundTraceCall } from './trace-program.js';

type Text = (a: string, b: string) => string;

/** What each operation is in the source of a function. */
const texts: Readonly<Record<number, Text>> = {
  [Operation.add]: (a, b) => `${a} + ${b}`,
  [Operation.subtract]: (a, b) => `${a} - ${b}`,
  [Operation.multiply]: (a, b) => `${a} * ${b}`,
  [Operation.divide]: (a, b) => `${a} / ${b}`,
  [Operation.negate]: (a) => `-${a}`,
  [Operation.abs]: (a) => `Math.abs(${a})`,
  [Operation.min]: (a, b) => `Math.min(${a}, ${b})`,
  [Operation.max]: (a, b) => `Math.max(${a}, ${b})`,
  [Operation.sqrt]: (a) => `Math.sqrt(${a})`,
  [Operation.copy]: (a) => a,
  [Operation.smaller]: (a, b) => `${a} < ${b} ? 1 : 0`,
  [Operation.smallerEq]: (a, b) => `${a} <= ${b} ? 1 : 0`,
  [Operation.larger]: (a, b) => `${a} > ${b} ? 1 : 0`,
  [Operation.largerEq]: (a, b) => `${a} >= ${b} ? 1 : 0`,
  [Operation.equal]: (a, b) => `${a} === ${b} ? 1 : 0`,
  [Operation.unequal]: (a, b) => `${a} !== ${b} ? 1 : 0`,
  [Operation.and]: (a, b) => `${a} !== 0 && ${b} !== 0 ? 1 : 0`,
  [Operation.or]: (a, b) => `${a} !== 0 || ${b} !== 0 ? 1 : 0`,
  [Operation.not]: (a) => `${a} === 0 ? 1 : 0`,
  [Operation.pow]: (a, b) => `Math.pow(${a}, ${b})`,
  [Operation.exp]: (a) => `Math.exp(${a})`,
  [Operation.log]: (a) => `Math.log(${a})`,
  [Operation.log10]: (a) => `Math.log10(${a})`,
  [Operation.sin]: (a) => `Math.sin(${a})`,
  [Operation.cos]: (a) => `Math.cos(${a})`,
  [Operation.tan]: (a) => `Math.tan(${a})`,
  [Operation.sign]: (a) => `Math.sign(${a})`,
  [Operation.round]: (a) => `Math.sign(${a}) * Math.round(Math.abs(${a}))`,
  [Operation.floor]: (a) => `Math.floor(${a})`,
  [Operation.ceil]: (a) => `Math.ceil(${a})`,
  [Operation.lowerEnd]: (a, b) => `${a} > ${b} ? NaN : ${a}`,
};

export type GeneratedFunction = (
  values: Float64Array,
  qualities: Uint8Array,
  result: Float64Array,
  calls: readonly BoundTraceCall[],
) => void;

/**
 * Writes a program out as a function over the arrays of one scan. Its source is put together from the table
 * above, register numbers and numbers alone: no character of what a person wrote gets into it.
 *
 * @param registers those that hold symbols
 * @param places where each of them stands in the arrays
 * @param tracePlaces where the traces stand that must be good
 * @returns a function that puts out the very numbers of `runProgram`, several times as fast; null where the page
 * that it runs in forbids generated code
 */
export function generateFunction(
  program: Program,
  registers: ArrayLike<number>,
  places: ArrayLike<number>,
  tracePlaces: ArrayLike<number>,
): GeneratedFunction | null {
  try {
    // eslint-disable-next-line @typescript-eslint/no-implied-eval -- made of our own table and numbers only, see docs/decisions
    return new Function(
      'values',
      'qualities',
      'result',
      'calls',
      sourceOf(program, registers, places, tracePlaces),
    ) as GeneratedFunction;
  } catch {
    return null;
  }
}

function sourceOf(
  program: Program,
  registers: ArrayLike<number>,
  places: ArrayLike<number>,
  tracePlaces: ArrayLike<number>,
): string {
  const symbols = new Set(Array.from(registers));
  const written = writtenRegisters(program);
  const named = (register: number) =>
    symbols.has(register) || written.has(register)
      ? `v${register}`
      : `(${numberText(program.registers[register] ?? NaN)})`;
  const loads = Array.from(registers).flatMap((register, i) => [
    `const v${register} = values[${places[i]}];`,
    // The difference is 0 for finite numbers only; a quality of 0 is good.
    `if (qualities[${places[i]}] !== 0 || v${register} - v${register} !== 0) { result[0] = NaN; return; }`,
  ]);
  const traces = Array.from(
    tracePlaces,
    (place) => `if (qualities[${place}] !== 0) { result[0] = NaN; return; }`,
  );
  const declared = [...written].map((register) => `v${register} = 0`);
  return [
    '"use strict";',
    ...traces,
    ...loads,
    `let ${[...declared, 'spoilt = 0'].join(', ')};`,
    ...statementsOf(program, named),
    `result[0] = ${named(program.result)} + spoilt;`,
  ].join('\n');
}

/** A number as it is read back exactly. */
const numberText = (value: number) => (Object.is(value, -0) ? '-0' : String(value));

function writtenRegisters({ code }: Program): Set<number> {
  const written = new Set<number>();
  for (let at = 0; at < code.length; at += instructionLength) {
    if ((code[at] as Operation) < Operation.jump) written.add(code[at + 1] as number);
  }
  return written;
}

/** A choice is compiled as: choose, one side, jump, other side; so a jump is where its `else` begins. */
function statementsOf(program: Program, named: (register: number) => string): string[] {
  const { code } = program;
  const statements: string[] = [];
  const ends = new Map<number, number>();
  for (let at = 0; at <= code.length; at += instructionLength) {
    for (let closing = ends.get(at) ?? 0; closing > 0; closing -= 1) statements.push('}');
    if (at === code.length) break;
    const [operation, target, left, right] = code.subarray(at, at + instructionLength) as unknown as Quad;
    if (operation === Operation.choose) {
      statements.push(`if (${named(left)} !== 0) {`);
    } else if (operation === Operation.jump) {
      statements.push('} else {');
      ends.set(target, (ends.get(target) ?? 0) + 1);
    } else {
      if (operation === Operation.measure) statements.push(...measuring(program, named, left));
      const value =
        operation === Operation.sum
          ? sumText(program, named, left, right)
          : operation === Operation.measure
            ? `calls[${left}].numbers[${measured}]`
            : texts[operation]?.(named(left), named(right));
      statements.push(`v${target} = ${value};`, `spoilt += v${target} - v${target};`);
    }
  }
  return statements;
}

/** Puts the numbers of a call over traces in, and runs it. */
function measuring({ traceCalls }: Program, named: (register: number) => string, at: number): string[] {
  const numbers = [traceCalls[at]?.x ?? null, traceCalls[at]?.y ?? null];
  const put = numbers.map((register, i) =>
    register === null ? '' : `calls[${at}].numbers[${i}] = ${named(register)};`,
  );
  return [...put, `calls[${at}].run();`];
}

type Quad = [Operation, number, number, number];

/** From left to right as the loop does it; to multiply by one changes nothing and is left out. */
function sumText(
  { terms }: Program,
  named: (register: number) => string,
  from: number,
  count: number,
): string {
  return Array.from({ length: count }, (_, i) => {
    const factors = [
      `(${numberText(terms.factors[from + i] as number)})`,
      named(terms.first[from + i] as number),
      named(terms.second[from + i] as number),
    ];
    return factors.filter((factor, at) => at === 0 || factor !== '(1)').join(' * ');
  }).join(' + ');
}
