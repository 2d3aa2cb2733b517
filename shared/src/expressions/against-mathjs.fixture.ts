import fc from 'fast-check';
import { all, create } from 'mathjs';
import { describe, expect, it } from 'vitest';
import { compileExpression } from './compile-expression.js';

const known = new Set(['a', 'b', 'c']);

/** Texts of the language over a, b and c. */
export const { text: randomText } = fc.letrec<{ text: string }>((tie) => ({
  text: fc.oneof(
    { maxDepth: 5, depthSize: 'small' },
    fc.constantFrom('a', 'b', 'c', '2', '0.5', 'pi'),
    fc
      .tuple(
        tie('text'),
        fc.constantFrom('+', '-', '*', '/', '^', '<', '<=', '>', '>=', '==', '!=', 'and', 'or'),
        tie('text'),
      )
      .map(([l, op, r]) => `(${l} ${op} ${r})`),
    fc
      .array(fc.tuple(fc.constantFrom('+', '-'), fc.array(tie('text'), { minLength: 1, maxLength: 3 })), {
        minLength: 1,
        maxLength: 3,
      })
      .map(
        (terms) =>
          `(1 ${terms.map(([sign, factors]) => `${sign} ${factors.join(' * ')}`).join(' ')} - a ^ 2)`,
      ),
    tie('text').map((x) => `(-${x})`),
    tie('text').map((x) => `(not ${x})`),
    fc.tuple(tie('text'), tie('text'), tie('text')).map(([x, y, z]) => `(${x} ? ${y} : ${z})`),
    fc.tuple(tie('text'), tie('text'), tie('text')).map(([x, y, z]) => `(${x} < ${y} <= ${z})`),
    fc
      .tuple(
        fc.constantFrom(
          'abs',
          'sqrt',
          'exp',
          'log',
          'log10',
          'sin',
          'cos',
          'tan',
          'sign',
          'round',
          'floor',
          'ceil',
        ),
        tie('text'),
      )
      .map(([f, x]) => `${f}(${x})`),
    fc
      .tuple(fc.constantFrom('min', 'max'), tie('text'), tie('text'), tie('text'))
      .map(([f, x, y, z]) => `${f}(${x}, ${y}, ${z}, 1)`),
  ),
}));
const input = fc.double({ min: -100, max: 100, noNaN: true });

/** Holds the language to the evaluator of mathjs, and to NaN for every bad input, on random expressions. */
export function describeAgainstMathjs(numRuns: number, timeoutMs: number): void {
  describe('against the evaluator of mathjs', () => {
    // Without tolerance in comparisons and without complex numbers, as in this language.
    const math = create(all ?? {}, { relTol: Number.MIN_VALUE, absTol: 0, predictable: true });
    // These do not work without a tolerance; toFixed rounds exactly, halves away from zero (ECMA-262).
    const exact = {
      floor: Math.floor,
      ceil: Math.ceil,
      round: (x: number | boolean) => Number(Number(x).toFixed(0)),
    };
    math.import(exact, { override: true });

    it(
      'gives the same number wherever it gives one',
      () => {
        let compared = 0;
        fc.assert(
          fc.property(randomText, input, input, input, (text, a, b, c) => {
            const outcome = compileExpression(text, known);
            if (!outcome.isOk) return void expect(outcome.message).toMatch(/too (long|many)/);
            const ours = outcome.expression.evaluate((symbol) => ({ a, b, c })[symbol] ?? NaN);
            const theirs: unknown = math.evaluate(text, { a, b, c });
            const expected = typeof theirs === 'boolean' ? Number(theirs) : theirs;
            if (Number.isNaN(ours)) return;
            compared += 1;
            const size = Math.max(1, Math.abs(ours));
            expect(Math.abs((expected as number) - ours) / size).toBeLessThan(1e-9);
          }),
          { numRuns },
        );
        expect(compared).toBeGreaterThan(numRuns / 4);
      },
      timeoutMs,
    );

    it(
      'gives no number where mathjs gives none',
      () => {
        fc.assert(
          fc.property(randomText, input, input, input, (text, a, b, c) => {
            const outcome = compileExpression(text, known);
            if (!outcome.isOk) return;
            const theirs: unknown = math.evaluate(text, { a, b, c });
            if (typeof theirs === 'number' && !Number.isFinite(theirs)) {
              expect(outcome.expression.evaluate((symbol) => ({ a, b, c })[symbol] ?? NaN)).toBeNaN();
            }
          }),
          { numRuns },
        );
      },
      timeoutMs,
    );

    it(
      'is NaN as soon as one of its symbols is bad, wherever it stands',
      () => {
        const bad = fc.constantFrom(NaN, Infinity, -Infinity);
        fc.assert(
          fc.property(
            randomText,
            input,
            input,
            fc.constantFrom('a', 'b', 'c'),
            bad,
            (text, x, y, which, value) => {
              const outcome = compileExpression(text, known);
              if (!outcome.isOk || !outcome.expression.symbols.includes(which)) return;
              const inputs: Record<string, number> = { a: x, b: y, c: x, [which]: value };
              expect(outcome.expression.evaluate((symbol) => inputs[symbol] ?? 0)).toBeNaN();
            },
          ),
          { numRuns },
        );
      },
      timeoutMs,
    );
  });
}
