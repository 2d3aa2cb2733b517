import { checkSeries, checkSettings } from './check-settings.js';

/**
 * Covariance of series measured together, divisor n − 1.
 *
 * @param series one per quantity, all of the same length, 2 or more
 * @returns rows; the diagonal holds the variances
 * @throws analysis.invalid-input, analysis.too-little-data
 * @source JCGM 100:2008 (GUM), clause 5.2.3, times n
 */
export function covarianceMatrix(series: readonly ArrayLike<number>[]): number[][] {
  const count = series[0]?.length ?? 0;
  series.forEach((values, i) => {
    checkSeries(values, `series[${i}]`, 2);
    checkSettings([values.length === count, `series[${i}]`, 'must be as long as the first.']);
  });
  const deviations = series.map((values) => {
    const copy = Float64Array.from(values);
    const mean = copy.reduce((sum, value) => sum + value, 0) / count;
    return copy.map((value) => value - mean);
  });
  return deviations.map((a) =>
    deviations.map((b) => a.reduce((sum, value, i) => sum + value * b[i]!, 0) / (count - 1)),
  );
}

/** The same of the means of the series: 1/n of it. Its square roots are the standard errors of the means. */
export function covarianceOfMeans(series: readonly ArrayLike<number>[]): number[][] {
  const count = series[0]?.length ?? 0;
  return covarianceMatrix(series).map((row) => row.map((value) => value / count));
}

/** @param covariance rows @returns correlations, −1 to 1, as rows; NaN beside a quantity that does not vary */
export function correlationMatrix(covariance: readonly (readonly number[])[]): number[][] {
  return covariance.map((row, i) =>
    row.map((value, j) => value / Math.sqrt(covariance[i]![i]! * covariance[j]![j]!)),
  );
}
