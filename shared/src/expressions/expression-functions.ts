/** One function that an expression may call. */
export interface ExpressionFunction {
  readonly name: string;
  /** How it is called, for completion. */
  readonly signature: string;
  readonly purpose: string;
  readonly minArguments: number;
  readonly maxArguments: number;
  readonly apply: (...values: number[]) => number;
}

const one = (name: string, purpose: string, apply: (x: number) => number): ExpressionFunction => ({
  name,
  signature: `${name}(x)`,
  purpose,
  minArguments: 1,
  maxArguments: 1,
  apply,
});

const several = (name: string, purpose: string, apply: (...values: number[]) => number) => ({
  name,
  signature: `${name}(a, b, …)`,
  purpose,
  minArguments: 1,
  maxArguments: 20,
  apply,
});

/** Halves go away from zero, so that rounding treats both signs alike. */
const roundAwayFromZero = (x: number) => Math.sign(x) * Math.round(Math.abs(x));

/** Every function of the expression language; what is not here cannot be called. */
export const expressionFunctions: readonly ExpressionFunction[] = [
  one('abs', 'size without sign', Math.abs),
  several('min', 'least of the values', Math.min),
  several('max', 'greatest of the values', Math.max),
  one('sqrt', 'square root', Math.sqrt),
  one('exp', 'e to the power of x', Math.exp),
  one('log', 'natural logarithm', Math.log),
  one('log10', 'logarithm to base 10', Math.log10),
  one('sin', 'sine of an angle in radians', Math.sin),
  one('cos', 'cosine of an angle in radians', Math.cos),
  one('tan', 'tangent of an angle in radians', Math.tan),
  {
    name: 'pow',
    signature: 'pow(x, y)',
    purpose: 'x to the power of y',
    minArguments: 2,
    maxArguments: 2,
    apply: (x = NaN, y = NaN) => Math.pow(x, y),
  },
  one('sign', '−1, 0 or 1', Math.sign),
  one('round', 'nearest whole number, halves away from zero', roundAwayFromZero),
  one('floor', 'greatest whole number not above x', Math.floor),
  one('ceil', 'least whole number not below x', Math.ceil),
  {
    name: 'clamp',
    signature: 'clamp(x, low, high)',
    purpose: 'x held between low and high',
    minArguments: 3,
    maxArguments: 3,
    apply: (x = NaN, low = NaN, high = NaN) => (low > high ? NaN : Math.min(Math.max(x, low), high)),
  },
];

/** Constants that an expression may name; a known symbol of the same name goes first. */
export const expressionConstants: ReadonlyMap<string, number> = new Map([
  ['pi', Math.PI],
  ['e', Math.E],
]);

/** Words that the language keeps for itself: nothing that expressions are to name may be called so. */
export const reservedWords: ReadonlySet<string> = new Set(['not', 'true', 'false', 'null', 'undefined']);
