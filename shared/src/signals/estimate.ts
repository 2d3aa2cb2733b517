/** A number found from data, with how far it may be off. */
export interface Estimate {
  value: number;
  /** Standard deviation that the value would have if all were measured again; same unit; NaN where unknown. */
  standardError: number;
}

/** @returns what says that nothing could be found */
export function noEstimate(): Estimate {
  return { value: NaN, standardError: NaN };
}

/** Share of a standard error that a value is moved by to see how a function answers. */
const probeShare = 1e-3;

/**
 * Carries uncertainty through functions of several numbers to first order: covariance of the results J·C·Jᵀ, with
 * the sensitivities J by central differences.
 *
 * @param functionOf results from the numbers; must be smooth within a standard error
 * @param values the numbers
 * @param covariance of the numbers, as rows
 * @returns results and their covariance, as rows
 * @source JCGM 100:2008 (GUM), clause 5.2 and its extension to several results, Annex H.2
 */
export function propagateUncertainty(
  functionOf: (values: readonly number[]) => readonly number[],
  values: readonly number[],
  covariance: readonly (readonly number[])[],
): { results: number[]; covariance: number[][]; standardErrors: number[] } {
  const results = [...functionOf(values)];
  const sensitivities = values.map((value, i) => {
    const spread = Math.sqrt(covariance[i]![i]!);
    const step = spread > 0 ? spread * probeShare : Math.max(Math.abs(value), 1) * 1e-6;
    const moved = (by: number) => functionOf(values.map((other, j) => (j === i ? other + by : other)));
    const [up, down] = [moved(step), moved(-step)];
    return results.map((_, k) => (up[k]! - down[k]!) / (2 * step));
  });
  const spread = results.map((_, k) =>
    results.map((_result, l) =>
      bilinear(
        covariance,
        (i) => sensitivities[i]![k]!,
        (j) => sensitivities[j]![l]!,
      ),
    ),
  );
  return { results, covariance: spread, standardErrors: spread.map((row, k) => Math.sqrt(row[k]!)) };
}

function bilinear(
  matrix: readonly (readonly number[])[],
  left: (i: number) => number,
  right: (j: number) => number,
): number {
  return matrix.reduce(
    (sum, row, i) => sum + left(i) * row.reduce((inner, value, j) => inner + value * right(j), 0),
    0,
  );
}
