import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { symmetricEigen } from './symmetric-eigen.js';

describe('eigenvalues of a symmetric matrix', () => {
  // Trace 120 and determinant 1100: 110 and 10.
  it('are those of a matrix known by hand, with its axes', () => {
    const { values, vectors } = symmetricEigen([
      [100, 30],
      [30, 20],
    ]);
    expect(values).toEqual([expect.closeTo(110, 10), expect.closeTo(10, 10)]);
    expect(Math.abs(vectors[0]![1]! / vectors[0]![0]!)).toBeCloseTo(1 / 3, 10);
  });

  it('make the matrix again, and have its trace', () => {
    const entry = fc.double({ min: -100, max: 100, noNaN: true });
    const matrices = fc
      .integer({ min: 1, max: 8 })
      .chain((n) =>
        fc.array(fc.array(entry, { minLength: n, maxLength: n }), { minLength: n, maxLength: n }),
      );
    fc.assert(
      fc.property(matrices, (matrix) => {
        const at = (i: number, j: number) => matrix[Math.max(i, j)]![Math.min(i, j)]!;
        const { values, vectors } = symmetricEigen(matrix);
        for (let i = 0; i < matrix.length; i += 1) {
          for (let j = 0; j < matrix.length; j += 1) {
            const again = values.reduce(
              (sum, value, m) => sum + value * vectors[m]![i]! * vectors[m]![j]!,
              0,
            );
            expect(Math.abs(again - at(i, j))).toBeLessThan(1e-9 * Math.max(1, Math.abs(values[0]!)) * 100);
          }
        }
      }),
      { numRuns: 100 },
    );
  });
});
