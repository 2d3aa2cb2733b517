import { describe, expect, it } from 'vitest';
import { compileExpression } from './compile-expression.js';
import { expressionFunctions } from './expression-functions.js';
import { expressionHelp } from './expression-help.js';
import { expressionOperators } from './expression-operators.js';
import { SymbolSet } from './symbol-set.js';
import { exampleTrace, traceFunctions } from './trace-functions.js';

const entries = [...expressionOperators, ...expressionFunctions, ...traceFunctions];
const { from, step } = exampleTrace;
const symbols = new SymbolSet(['t'], new Map([['t', { title: 'Time', unit: 's', from, step }]]));
const lookup = Object.assign(() => NaN, { trace: () => exampleTrace });

describe('the help of the expression language', () => {
  it.each(entries.map((entry) => [entry.example, entry] as const))(
    '%s',
    (_, { name, example, help, purpose }) => {
      const [call = '', value = ''] = example.split(' // ');
      for (const part of name.split(' ')) expect(call).toContain(part);
      const outcome = compileExpression(call, symbols);
      expect(outcome).toMatchObject({ isOk: true });
      expect(outcome.isOk && outcome.expression.evaluate(lookup)).toBeCloseTo(Number(value), 12);
      expect(Number.isFinite(Number(value))).toBe(true);
      expect(purpose.length).toBeGreaterThan(2);
      expect(help.length).toBeGreaterThan(10);
    },
  );

  it('covers every operator that compiles, and no other', () => {
    const signs = [
      '+',
      '-',
      '*',
      '/',
      '^',
      '<',
      '<=',
      '>',
      '>=',
      '==',
      '!=',
      'and',
      'or',
      'xor',
      'mod',
      '|',
      '&',
      '.*',
    ];
    const compiling = signs.filter((sign) => compileExpression(`2 ${sign} 1`, new Set()).isOk);
    expect(
      expressionOperators
        .map(({ name }) => name)
        .filter((name) => name !== 'not' && name !== '? :')
        .sort(),
    ).toEqual(compiling.sort());
  });

  it('stands in one row per operator and function', () => {
    const rows = expressionHelp()
      .split('\n')
      .filter((line) => line.startsWith('| `'));
    expect(rows).toHaveLength(entries.length);
  });
});
