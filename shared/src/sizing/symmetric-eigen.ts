/** Eigenvalues of a symmetric matrix, falling, and the eigenvector of each as a row. */
export interface SymmetricEigen {
  values: number[];
  vectors: number[][];
}

const sweepsMax = 50;

/**
 * Eigenvalues and eigenvectors of a small symmetric matrix by Jacobi's rotations.
 *
 * @param matrix row by row; its lower triangle counts
 * @source C. G. J. Jacobi (1846), J. reine angew. Math. 30:51–94; as in G. H. Golub and C. F. Van Loan, "Matrix
 * Computations", section 8.5 (from memory)
 * @example symmetricEigen([[100, 30], [30, 20]]).values // [110, 10]
 */
export function symmetricEigen(matrix: readonly (readonly number[])[]): SymmetricEigen {
  const n = matrix.length;
  const a = matrix.map((_, i) => matrix.map((__, j) => matrix[Math.max(i, j)]![Math.min(i, j)]!));
  const vectors = a.map((_, i) => a.map((__, j) => (i === j ? 1 : 0)));
  const scale = Math.max(...a.flat().map(Math.abs));
  for (let sweep = 0; sweep < sweepsMax && offDiagonal(a) > 1e-15 * scale; sweep += 1) {
    for (let p = 0; p < n; p += 1) for (let q = p + 1; q < n; q += 1) rotate(a, vectors, p, q);
  }
  const order = a.map((_, i) => i).sort((i, j) => a[j]![j]! - a[i]![i]!);
  return { values: order.map((i) => a[i]![i]!), vectors: order.map((i) => vectors[i]!) };
}

function offDiagonal(a: readonly (readonly number[])[]): number {
  return Math.max(0, ...a.flatMap((row, i) => row.slice(0, i).map(Math.abs)));
}

/** Turns the plane of two axes so that they no longer mix. */
function rotate(a: number[][], vectors: number[][], p: number, q: number): void {
  const mixed = a[p]![q]!;
  if (mixed === 0) return;
  const half = (a[q]![q]! - a[p]![p]!) / (2 * mixed);
  const t = (half >= 0 ? 1 : -1) / (Math.abs(half) + Math.hypot(half, 1));
  const c = 1 / Math.hypot(t, 1);
  const s = t * c;
  for (const row of a) turn(row, p, q, c, s);
  turnRows(a, p, q, c, s);
  turnRows(vectors, p, q, c, s);
}

function turn(row: number[], p: number, q: number, c: number, s: number): void {
  const [x, y] = [row[p]!, row[q]!];
  row[p] = c * x - s * y;
  row[q] = s * x + c * y;
}

function turnRows(rows: number[][], p: number, q: number, c: number, s: number): void {
  const [x, y] = [[...rows[p]!], [...rows[q]!]];
  rows[p] = x.map((value, i) => c * value - s * y[i]!);
  rows[q] = x.map((value, i) => s * value + c * y[i]!);
}
