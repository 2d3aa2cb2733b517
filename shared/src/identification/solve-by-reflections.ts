import { DomainError } from '../errors/domain-error.js';

/** Share of a column that must be left over when all columns before it have been taken out. */
const dependenceShare = 1e-13;

/**
 * Least-squares solution of rows·x ≈ y by Householder reflections, and the inverse of the normal matrix.
 *
 * @param rows overwritten
 * @param y overwritten
 * @throws analysis.no-fit where columns depend on each other
 * @source A. S. Householder (1958), "Unitary triangularization of a nonsymmetric matrix", Journal of the ACM
 * 5:339–342
 */
export function solveByReflections(rows: number[][], y: number[]): { x: number[]; inverse: number[][] } {
  const width = rows[0]?.length ?? 0;
  const diagonal = new Array<number>(width).fill(0);
  for (let j = 0; j < width; j += 1) diagonal[j] = reflectColumn(rows, y, j);
  const triangle = invertTriangle(rows, diagonal);
  return {
    x: triangle.map((row) => row.reduce((sum, value, j) => sum + value * y[j]!, 0)),
    inverse: triangle.map((a) => triangle.map((b) => a.reduce((sum, value, k) => sum + value * b[k]!, 0))),
  };
}

/** Turns column j to have nothing below its diagonal; @returns the diagonal element. */
function reflectColumn(rows: number[][], y: number[], j: number): number {
  const whole = lengthOf(rows, j, 0);
  const below = lengthOf(rows, j, j);
  if (!(below > dependenceShare * whole)) throw new DomainError('analysis.no-fit');
  const sign = rows[j]![j]! > 0 ? -1 : 1;
  rows[j]![j]! -= sign * below;
  const mirror = rows.slice(j).map((row) => row[j]!);
  const square = mirror.reduce((sum, value) => sum + value * value, 0);
  for (let k = j + 1; k < rows[j]!.length; k += 1) {
    const share = (2 * mirror.reduce((sum, value, i) => sum + value * rows[j + i]![k]!, 0)) / square;
    mirror.forEach((value, i) => (rows[j + i]![k]! -= share * value));
  }
  const share = (2 * mirror.reduce((sum, value, i) => sum + value * y[j + i]!, 0)) / square;
  mirror.forEach((value, i) => (y[j + i]! -= share * value));
  return sign * below;
}

/** Inverse of the upper triangle, as full rows. */
function invertTriangle(rows: readonly number[][], diagonal: readonly number[]): number[][] {
  const width = diagonal.length;
  const inverse = diagonal.map(() => new Array<number>(width).fill(0));
  for (let k = 0; k < width; k += 1) {
    for (let i = k; i >= 0; i -= 1) {
      let sum = i === k ? 1 : 0;
      for (let j = i + 1; j <= k; j += 1) sum -= rows[i]![j]! * inverse[j]![k]!;
      inverse[i]![k] = sum / diagonal[i]!;
    }
  }
  return inverse;
}

/** Length of a column from a row on. */
function lengthOf(rows: readonly number[][], column: number, from: number): number {
  let square = 0;
  for (let i = from; i < rows.length; i += 1) square += rows[i]![column]! ** 2;
  return Math.sqrt(square);
}
