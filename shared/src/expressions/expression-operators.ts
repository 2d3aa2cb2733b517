/** One operator of the expression language, for help and documentation. */
export interface ExpressionOperator {
  readonly name: string;
  readonly signature: string;
  readonly purpose: string;
  readonly help: string;
  /** A call and its value. */
  readonly example: string;
}

const row = (
  name: string,
  signature: string,
  purpose: string,
  help: string,
  example: string,
): ExpressionOperator => ({ name, signature, purpose, help, example });

const compared = 'Both sides in one unit. Exact: nothing is rounded. The result is 1 (true) or 0 (false).';

/** Every operator, those that bind most closely first. */
export const expressionOperators: readonly ExpressionOperator[] = [
  row(
    '^',
    'x ^ y',
    'power',
    'Binds from the right; before the sign: -2 ^ 2 is -4. The power is a pure number.',
    '2 ^ 3 ^ 2 // 512',
  ),
  row(
    '-',
    '-x',
    'negative',
    'Also between two values: difference, in one unit. °C less °C is K.',
    '-2 ^ 2 // -4',
  ),
  row('not', 'not a', 'negation', 'True where a is 0.', 'not (2 < 1) // 1'),
  row('*', 'x * y', 'product', 'Multiplies the units. Always written: 2 * x, not 2 x.', '2 * 3 ^ 2 // 18'),
  row('/', 'x / y', 'quotient', 'Divides the units. No number where y is zero.', '3 / 4 // 0.75'),
  row(
    '+',
    'x + y',
    'sum',
    'Terms in one unit; a plain number takes the unit of the other.',
    '1 + 2 * 3 // 7',
  ),
  row('<', 'x < y', 'is smaller', `${compared} Chains are judged pair by pair.`, '1 < 2 < 2 // 0'),
  row('<=', 'x <= y', 'is smaller or equal', compared, '1 < 2 <= 2 // 1'),
  row('>', 'x > y', 'is larger', compared, '3 > 2 // 1'),
  row('>=', 'x >= y', 'is larger or equal', compared, '2 >= 2 // 1'),
  row('==', 'x == y', 'is equal', compared, '2 == 3 // 0'),
  row('!=', 'x != y', 'is not equal', compared, '2 != 3 // 1'),
  row(
    'and',
    'a and b',
    'both are true',
    'Needs both sides: a bad reading on either makes the result bad.',
    '1 < 2 and 3 < 2 // 0',
  ),
  row(
    'or',
    'a or b',
    'one of both is true',
    'Needs both sides: a bad reading on either makes the result bad.',
    '1 < 2 or 3 < 2 // 1',
  ),
  row(
    '? :',
    'a ? x : y',
    'choice',
    'x where a is true, else y; both in one unit. Only the side that is taken is computed, but every reading of both must be good.',
    '1 > 2 ? 5 : 6 // 6',
  ),
];
