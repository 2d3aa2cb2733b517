import { checkSeries, checkSettings } from '../signals/check-settings.js';
import { solveByReflections } from './solve-by-reflections.js';

/** Parameters that make a model fit data best, with their uncertainty. */
export interface LeastSquaresFit {
  parameters: number[];
  standardErrors: number[];
  /** Of the parameters, as rows. */
  covariance: number[][];
  /** Data less model, in the order of the data. */
  residuals: Float64Array;
  /** Sum of the squared residuals, each over its standard error where those are known. */
  sumOfSquares: number;
  /** Degrees of freedom: data less parameters. */
  freedom: number;
  /**
   * Standard deviation of the residuals √(sumOfSquares/freedom); about 1 where standard errors are known. NaN
   * with freedom 0.
   */
  sigma: number;
}

/**
 * Linear least squares: y ≈ Σ parameter_j · row_j.
 *
 * @param rows one row of factors per datum
 * @param y data
 * @param standardErrors of the data, all above 0; where given they weight the data and set the uncertainty,
 * otherwise all data are taken for equally exact and the scatter of the residuals sets it
 * @throws analysis.invalid-input, analysis.too-little-data; analysis.no-fit where the data do not tell the
 * parameters apart
 * @source Å. Björck (1996), "Numerical Methods for Least Squares Problems", section 2.4 (Householder), 1.3
 * (covariance)
 */
export function fitLinear(
  rows: readonly (readonly number[])[],
  y: ArrayLike<number>,
  standardErrors?: ArrayLike<number>,
): LeastSquaresFit {
  const width = rows[0]?.length ?? 0;
  checkSeries(y, 'y', Math.max(width, 1));
  checkSettings([rows.length === y.length, 'rows', 'must be as many as the data.']);
  const weights = weightsOf(y.length, standardErrors);
  const solution = solveByReflections(
    rows.map((row, i) => row.map((factor) => factor * weights[i]!)),
    Array.from(y, (value, i) => value * weights[i]!),
  );
  const residuals = Float64Array.from(
    y,
    (value, i) => value - rows[i]!.reduce((sum, factor, j) => sum + factor * solution.x[j]!, 0),
  );
  return describeFit(solution.x, solution.inverse, residuals, weights, standardErrors !== undefined);
}

/** One over the standard error of each datum; 1 throughout where none are known. @throws analysis.invalid-input */
export function weightsOf(count: number, standardErrors?: ArrayLike<number>): Float64Array {
  if (!standardErrors) return new Float64Array(count).fill(1);
  checkSettings([standardErrors.length === count, 'standardErrors', 'must be as many as the data.']);
  return Float64Array.from(standardErrors, (error, i) => {
    checkSettings([error > 0 && Number.isFinite(error), `standardErrors[${i}]`, 'must be above 0.']);
    return 1 / error;
  });
}

/** @param inverse inverse of the normal matrix of the weighted rows */
export function describeFit(
  parameters: number[],
  inverse: readonly (readonly number[])[],
  residuals: Float64Array,
  weights: Float64Array,
  isErrorKnown: boolean,
): LeastSquaresFit {
  const sumOfSquares = residuals.reduce((sum, value, i) => sum + (value * weights[i]!) ** 2, 0);
  const freedom = residuals.length - parameters.length;
  const sigma = freedom > 0 ? Math.sqrt(sumOfSquares / freedom) : NaN;
  const scale = isErrorKnown ? 1 : sigma * sigma;
  const covariance = inverse.map((row) => row.map((value) => value * scale));
  return {
    parameters,
    standardErrors: covariance.map((row, i) => Math.sqrt(row[i]!)),
    covariance,
    residuals,
    sumOfSquares,
    freedom,
    sigma,
  };
}
