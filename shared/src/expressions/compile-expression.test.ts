import fc from 'fast-check';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { Readings } from '../scan/readings.js';
import { compileExpression } from './compile-expression.js';
import { reservedWords } from './expression-functions.js';
import type { CompiledExpression } from './expression.types.js';

const known = new Set(['a', 'b', 'c', 'airTrim', 'survey.best.airTrim']);

const compiled = (text: string): CompiledExpression => {
  const outcome = compileExpression(text, known);
  if (!outcome.isOk) throw new Error(outcome.message);
  return outcome.expression;
};
const value = (text: string, inputs: Record<string, number> = {}) =>
  compiled(text).evaluate((symbol) => inputs[symbol] ?? NaN);
const fault = (text: string) => {
  const outcome = compileExpression(text, known);
  if (outcome.isOk) throw new Error(`"${text}" compiles`);
  return outcome;
};

describe('an expression', () => {
  it.each([
    ['1 + 2 * 3 ^ 2', 19],
    ['-2 ^ 2', -4],
    ['2 ^ 3 ^ 2', 512],
    ['(1 + 2) * 3 / 4', 2.25],
    ['1 < 2 and not (2 < 1)', 1],
    ['1 < 2 < 2', 0],
    ['1 < 2 <= 2', 1],
    ['1 > 2 ? 5 : 6', 6],
    ['max(1, 4, 2, 3) - min(3, 1, 2)', 3],
    ['clamp(7, 0, 5) + clamp(-1, 0, 5)', 5],
    ['round(2.5) + round(-2.5) + floor(-0.5) + ceil(0.5)', 0],
    ['sin(pi / 2) + log(e) + log10(1000) + sqrt(16) + pow(2, 3)', 17],
    ['true or false', 1],
  ])('%s = %d', (text, expected) => expect(value(text)).toBeCloseTo(expected, 12));

  it('takes a dotted name as one symbol', () => {
    expect(value('survey.best.airTrim + airTrim', { 'survey.best.airTrim': 3, airTrim: 1 })).toBe(4);
    expect(compiled('airTrim * airTrim + a').symbols).toEqual(['airTrim', 'a']);
  });

  it('says whether it is a condition', () => {
    expect(compiled('a < b and not c').isCondition).toBe(true);
    expect(compiled('a < b ? a > 1 : true').isCondition).toBe(true);
    expect(compiled('a < b ? 1 : true').isCondition).toBe(false);
    expect(compiled('a + (b < c)').isCondition).toBe(false);
  });

  it('lets a known symbol hide a constant', () => {
    const outcome = compileExpression('e + 1', new Set(['e']));
    expect(outcome.isOk && outcome.expression.evaluate(() => 4)).toBe(5);
  });

  it.each([
    'a / 0',
    'a / 0 > 1',
    'not (0 / 0)',
    'sqrt(-a) < 5',
    'a > 0 or log(0) > 1',
    '10 ^ 999 > 0',
    '(0 / 0) ^ 0',
  ])('%s is no number', (text) => expect(value(text, { a: 1 })).toBeNaN());

  it('does not compute the branch that is not taken', () => {
    expect(value('a == 0 ? 0 : 1 / a', { a: 0 })).toBe(0);
  });

  it.each(['a ? b : c', 'a or b', 'a and b', 'b * 0', 'max(a, b)', 'b == b', 'b ^ 0', 'not b'])(
    '%s rests on every input',
    (text) => {
      expect(value(text, { a: 0, b: NaN, c: 1 })).toBeNaN();
      expect(value(text, { a: 1, b: Infinity, c: 1 })).toBeNaN();
    },
  );
});

describe('an expression bound to readings', () => {
  afterEach(() => vi.unstubAllGlobals());
  const bound = () => {
    const readings = new Readings(['a', 'b', 'c']);
    const result = new Float64Array(1);
    const evaluate = compiled('a > 0 ? 2 * a + b * c - b / 4 : b').bind(readings, result);
    const at = (values: number[], qualities = [0, 0, 0]) => {
      values.forEach((value, i) => readings.set(i, value, (qualities[i] ?? 0) as 0 | 1));
      evaluate();
      return result[0];
    };
    return [at([1, 4, 3]), at([-1, 4, 3]), at([1, 4, 3], [0, 1, 0]), at([1, Infinity, 3]), at([1, 0, 0])];
  };

  it('reads what stands there at the time', () => expect(bound()).toEqual([13, 4, NaN, NaN, 2]));

  it('does so where generated code is forbidden', () => {
    const forbidden = vi.fn(function () {
      throw new EvalError('refused by the policy of the page');
    });
    vi.stubGlobal('Function', forbidden);
    expect(bound()).toEqual([13, 4, NaN, NaN, 2]);
    expect(forbidden).toHaveBeenCalled();
  });

  it('is no number where a symbol has no place', () => {
    const result = new Float64Array(1);
    compiled('a + airTrim').bind(new Readings(['a']), result)();
    expect(result[0]).toBeNaN();
  });
});

describe('a faulty expression', () => {
  it('names the unknown symbol, its place and what was meant', () => {
    expect(fault('a + airtrim')).toEqual({
      isOk: false,
      message: '"airtrim" is not known here. Did you mean airTrim or survey.best.airTrim?',
      at: 4,
    });
    expect(fault('1 + best.airTrim').message).toContain('survey.best.airTrim');
    expect(fault('survey.best').message).toContain('"survey.best" is not known');
    expect(fault('xyzzyPlugh').message).toContain('Use a name from the list.');
  });

  it.each([
    'a = 1',
    'f(x) = x',
    'a; b',
    'a\nb',
    '[1, 2]',
    'a[1]',
    'a["b"]',
    '{ b: 1 }',
    '"text"',
    "a'",
    'a!',
    'a && b',
    'a || b',
    '!a',
    '5 %',
    '5 cm',
    'a to b',
    '2 a',
    'a b',
    'a | b',
    'a xor b',
    'a mod b',
    '1:3',
    'null',
    'NaN',
    'Infinity',
    '1e999',
    '2 + 3i',
    'a.b(1)',
    '(a + b).c',
    'eval("1")',
    'import(a)',
    'sqrt(1, 2)',
    'clamp(1)',
    'min()',
    'sqrt',
    'a # b',
    '',
    '  ',
    '(',
    'a +',
    '(((((',
    '('.repeat(400),
    `${'('.repeat(249)}a${')'.repeat(249)}`,
    'a+'.repeat(249) + 'a',
    'a'.repeat(501),
  ])('%s is refused with a message', (text) => expect(fault(text).message.length).toBeGreaterThan(8));

  it('points at the character', () => {
    expect(fault('a + ').at).toBe(4);
    expect(fault('a && b').at).toBe(2);
    expect(fault('a + sinus(b)').at).toBe(4);
  });

  it('cannot name what the language keeps for itself', () => {
    for (const word of reservedWords) {
      const outcome = compileExpression(`${word} + 1`, new Set([word]));
      const reads = outcome.isOk && outcome.expression.symbols.includes(word);
      expect(reads, word).toBe(false);
    }
  });

  it('never throws, whatever the text', () => {
    const piece = fc.constantFrom(
      'a',
      'survey',
      '.',
      '(',
      ')',
      '+',
      '^',
      '<',
      '?',
      ':',
      ',',
      ' ',
      '1',
      'min',
      'not',
      '=',
      '[',
      ']',
    );
    const text = fc.oneof(
      fc.string(),
      fc.array(piece, { maxLength: 30 }).map((parts) => parts.join('')),
    );
    fc.assert(
      fc.property(text, (any) => void compileExpression(any, known)),
      { numRuns: 1000 },
    );
  }, 60_000);
});
