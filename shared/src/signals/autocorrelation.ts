import { checkSeries } from './check-settings.js';

/**
 * Autocorrelation r_k = Σ(xᵢ − m)(xᵢ₊ₖ − m)/Σ(xᵢ − m)² for the lags 0 to `lagMax`.
 *
 * @returns r_0 = 1, r_1, …; NaN throughout where the values do not differ
 * @throws analysis.invalid-input, analysis.too-little-data
 * @source G. E. P. Box and G. M. Jenkins (1976), "Time Series Analysis", eq. 2.1.11
 */
export function autocorrelation(values: ArrayLike<number>, lagMax: number): Float64Array {
  checkSeries(values, 'values', 2);
  const deviations = deviationsOf(values);
  const products = Float64Array.from({ length: Math.min(lagMax, values.length - 1) + 1 }, (_, lag) =>
    lagProduct(deviations, lag),
  );
  return products.map((product) => product / products[0]!);
}

function deviationsOf(values: ArrayLike<number>): Float64Array {
  const copy = Float64Array.from(values);
  const mean = copy.reduce((sum, value) => sum + value, 0) / copy.length;
  return copy.map((value) => value - mean);
}

function lagProduct(deviations: Float64Array, lag: number): number {
  let sum = 0;
  for (let i = lag; i < deviations.length; i += 1) sum += deviations[i]! * deviations[i - lag]!;
  return sum;
}

/** How strongly the values of a series repeat each other. */
export interface AutocorrelationTime {
  /** Integrated autocorrelation time τ = 1 + 2Σρ_k, in samples; 1 for independent values. */
  samples: number;
  /** Its standard error, in samples. */
  standardError: number;
  /** Lag up to which the sum goes. */
  lagMax: number;
}

/** The sum stops at the first lag that is this many times τ: Sokal's window. */
const windowFactor = 5;

/**
 * Integrated autocorrelation time: n values tell as much about their mean as n/τ independent ones.
 *
 * The sum is cut at the first lag that is 5 or more and 5 times the sum so far; cut earlier it would miss
 * correlation, later it would gather noise. Series shorter than about 50 τ give too small a time: use a model
 * of the correlation or means of blocks there.
 *
 * @param values evenly spaced, 2 or more; of values that do not differ the time is 1
 * @throws analysis.invalid-input, analysis.too-little-data
 * @source A. D. Sokal (1997), "Monte Carlo methods in statistical mechanics: foundations and new algorithms",
 * in "Functional Integration", section 3; standard error by N. Madras and A. D. Sokal (1988), J. Statistical
 * Physics 50:109–186
 */
export function integratedAutocorrelationTime(values: ArrayLike<number>): AutocorrelationTime {
  checkSeries(values, 'values', 2);
  const deviations = deviationsOf(values);
  const whole = lagProduct(deviations, 0);
  const n = values.length;
  let samples = 1;
  let lag = 0;
  while (whole > 0 && lag < n - 1) {
    lag += 1;
    samples += (2 * lagProduct(deviations, lag)) / whole;
    if (lag >= windowFactor * Math.max(samples, 1)) break;
  }
  const kept = Math.max(samples, 1 / n);
  return { samples: kept, standardError: kept * Math.sqrt((2 * (2 * lag + 1)) / n), lagMax: lag };
}
