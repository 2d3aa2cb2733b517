import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { Readings } from '../scan/readings.js';
import { parseUnit } from '../units/parse-unit.js';
import { randomText } from './against-mathjs.fixture.js';
import { tracePassesMax } from './compile-trace-call.js';
import { SymbolSet } from './symbol-set.js';
import { compileExpression, expressionOperationsMax } from './compile-expression.js';

const ids = ['a', 'b', 'c'];
const axis = { title: 'Time', unit: 's', from: 0, step: 0.5 };
const known = new SymbolSet(
  [...ids, 't', 'u'],
  new Map([
    ['t', axis],
    ['u', axis],
  ]),
);
const lookup = Object.assign(() => 1, { trace: () => ({ points: [1, 4, 2], from: 0, step: 0.5 }) });
const units = ['', '%', 'ppm', '°C', 'K', 'kW', 'm³/h', 'counts', 'not / a // unit'];
const piece = fc.constantFrom(
  ...[
    'a',
    'b',
    'survey.best',
    '(',
    ')',
    '+',
    '-',
    '*',
    '/',
    '^',
    '<',
    '<=',
    '==',
    '?',
    ':',
    ',',
    ' ',
    '1',
    '2.5',
    '1e308',
  ],
  ...[
    'min(',
    'clamp(',
    'weight(',
    'mean(',
    'area(t',
    'rmsDifference(',
    't',
    'u',
    'sqrt(',
    'not ',
    ' and ',
    ' or ',
    '=',
    '[',
    ']',
    ';',
    '\n',
    '.',
    '"',
    '{',
    '}',
    'e',
    "'",
  ],
);
const anyText = fc.oneof(
  fc.string({ maxLength: 60, unit: 'grapheme' }),
  fc.array(piece, { maxLength: 60 }).map((parts) => parts.join('')),
  randomText,
);
const reading = fc.oneof(
  fc.double(),
  fc.double({ min: -5, max: 5, noNaN: true }),
  fc.constantFrom(0, 1, 1e308),
);

/** Holds the compiler to its typed outcome and its budget on any text whatever. */
export function describeExpressionFuzz(numRuns: number): void {
  describe('any text', () => {
    it('compiles or says what is wrong, never throws, and stays within its budget of operations', () => {
      let compiled = 0;
      fc.assert(
        fc.property(
          anyText,
          fc.array(fc.constantFrom(...units), { minLength: 3, maxLength: 3 }),
          (text, of) => {
            const unitOf = (name: string) => parseUnit(of[ids.indexOf(name)] ?? '');
            for (const outcome of [compileExpression(text, known), compileExpression(text, known, unitOf)]) {
              if (!outcome.isOk) {
                expect(outcome.message.length).toBeGreaterThan(8);
                continue;
              }
              compiled += 1;
              expect(outcome.expression.operations).toBeLessThanOrEqual(expressionOperationsMax);
              expect(outcome.expression.tracePasses).toBeLessThanOrEqual(tracePassesMax);
              const value = outcome.expression.evaluate(lookup);
              expect(Number.isFinite(value) || Number.isNaN(value)).toBe(true);
            }
          },
        ),
        { numRuns },
      );
      expect(compiled).toBeGreaterThan(numRuns / 8);
    }, 1_200_000);

    it('gives the same number bound to readings as looked up by name', () => {
      fc.assert(
        fc.property(randomText, reading, reading, reading, (text, a, b, c) => {
          const outcome = compileExpression(text, known);
          if (!outcome.isOk) return;
          const readings = new Readings(ids);
          [a, b, c].forEach((value, i) => readings.set(i, value, 0));
          const lookup = (name: string) => readings.goodValue(readings.indexOf(name));
          const { expression } = outcome;
          const result = new Float64Array(1);
          expression.bind(readings, result)();
          expect(result[0]).toBe(expression.evaluate(lookup));
        }),
        { numRuns },
      );
    }, 1_200_000);
  });
}
