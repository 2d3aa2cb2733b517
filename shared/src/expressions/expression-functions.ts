import { Operation } from './operations.js';

/** What a function makes of the units of its arguments. */
export type UnitRule =
  /** All arguments in one unit, which is that of the result. */
  | 'same'
  /** A pure number of a pure number. */
  | 'pure'
  | 'square-root'
  | 'power'
  /** A pure number, whatever the unit. */
  | 'drops'
  /** A plain number that takes the unit which its place needs. */
  | 'fits';

/** One function that an expression may call. */
export interface ExpressionFunction {
  readonly name: string;
  /** How it is called, for completion. */
  readonly signature: string;
  /** A few words for completion. */
  readonly purpose: string;
  /** What to know before using it. */
  readonly help: string;
  /** A call and its value: `max(2, 7) // 7`. */
  readonly example: string;
  readonly minArguments: number;
  readonly maxArguments: number;
  readonly unitRule: UnitRule;
  /** What computes it; several arguments are taken two by two. */
  readonly operation: Operation;
}

type Row = [
  name: string,
  operation: Operation,
  unitRule: UnitRule,
  purpose: string,
  help: string,
  example: string,
];

const argumentsOf =
  (minArguments: number, maxArguments: number, form: string) =>
  ([name, operation, unitRule, purpose, help, example]: Row): ExpressionFunction => ({
    name,
    signature: `${name}(${form})`,
    purpose,
    help,
    example,
    minArguments,
    maxArguments,
    unitRule,
    operation,
  });
const one = argumentsOf(1, 1, 'x');
const several = argumentsOf(1, 20, 'a, b, …');
const two = argumentsOf(2, 2, 'x, y');
const range = argumentsOf(3, 3, 'x, low, high');

const angleHelp = 'Takes radians or a pure number; for degrees write sin(x * pi / 180).';

/** Every function of the expression language; what is not here cannot be called. */
export const expressionFunctions: readonly ExpressionFunction[] = [
  one([
    'abs',
    Operation.abs,
    'same',
    'size without sign',
    'Distance from zero. Keeps the unit.',
    'abs(-3.5) // 3.5',
  ]),
  several([
    'min',
    Operation.min,
    'same',
    'least of the values',
    'Takes up to 20 values in one unit. One bad value makes the result bad, even where it is not the least.',
    'min(4, 2, 9) // 2',
  ]),
  several([
    'max',
    Operation.max,
    'same',
    'greatest of the values',
    'Takes up to 20 values in one unit. max(0, x - limit) is a penalty that begins at the limit.',
    'max(0, 130 - 100) // 30',
  ]),
  one([
    'sqrt',
    Operation.sqrt,
    'square-root',
    'square root',
    'No number for a negative x. Halves the powers of the unit: the root of m² is m.',
    'sqrt(16) // 4',
  ]),
  one(['exp', Operation.exp, 'pure', 'e to the power of x', 'Takes a pure number.', 'exp(0) // 1']),
  one([
    'log',
    Operation.log,
    'pure',
    'natural logarithm',
    'No number for x of zero or below. Takes a pure number: divide by a reference, log(co / 100).',
    'log(e) // 1',
  ]),
  one([
    'log10',
    Operation.log10,
    'pure',
    'logarithm to base 10',
    'No number for x of zero or below. Takes a pure number: divide by a reference, log10(power / weight(1)).',
    'log10(1000) // 3',
  ]),
  one(['sin', Operation.sin, 'pure', 'sine of an angle in radians', angleHelp, 'sin(pi / 2) // 1']),
  one([
    'cos',
    Operation.cos,
    'pure',
    'cosine of an angle in radians',
    angleHelp.replace('sin(', 'cos('),
    'cos(pi) // -1',
  ]),
  one([
    'tan',
    Operation.tan,
    'pure',
    'tangent of an angle in radians',
    angleHelp.replace('sin(', 'tan('),
    'tan(pi / 4) // 1',
  ]),
  two([
    'pow',
    Operation.pow,
    'power',
    'x to the power of y',
    'The same as x ^ y. The power is a pure number, and a plain one where x has a unit.',
    'pow(2, 10) // 1024',
  ]),
  one(['sign', Operation.sign, 'drops', '−1, 0 or 1', 'Which side of zero x is on.', 'sign(-0.2) // -1']),
  one([
    'round',
    Operation.round,
    'same',
    'nearest whole number, halves away from zero',
    'Rounds both signs alike. Keeps the unit.',
    'round(-2.5) // -3',
  ]),
  one([
    'floor',
    Operation.floor,
    'same',
    'greatest whole number not above x',
    'Rounds down, away from zero for negative x. Keeps the unit.',
    'floor(-0.5) // -1',
  ]),
  one([
    'ceil',
    Operation.ceil,
    'same',
    'least whole number not below x',
    'Rounds up. Keeps the unit.',
    'ceil(0.2) // 1',
  ]),
  range([
    'clamp',
    Operation.max,
    'same',
    'x held between low and high',
    'All three in one unit. No number where low is above high.',
    'clamp(7, 0, 5) // 5',
  ]),
  one([
    'weight',
    Operation.copy,
    'fits',
    'a plain number in the unit that its place needs',
    'Says that a factor has a unit of its own on purpose, so that unlike quantities can be weighed against each other: efficiency - weight(0.2) * flueTemp. The value stays as it is.',
    'weight(0.2) * 30 // 6',
  ]),
];

export const functionByName: ReadonlyMap<string, ExpressionFunction> = new Map(
  expressionFunctions.map((known) => [known.name, known]),
);

/** Constants that an expression may name; a known symbol of the same name goes first. */
export const expressionConstants: ReadonlyMap<string, number> = new Map([
  ['pi', Math.PI],
  ['e', Math.E],
]);

/** Words that the language keeps for itself: nothing that expressions are to name may be called so. */
export const reservedWords: ReadonlySet<string> = new Set(['not', 'true', 'false', 'null', 'undefined']);
