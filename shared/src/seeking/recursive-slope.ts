/**
 * Recursive least squares with exponential forgetting of y = c + Σ g_i·x_i: constant and slopes at once.
 *
 * @source e.g. K. J. Åström and B. Wittenmark, "Adaptive Control" (1995), section 2.2 (from memory)
 */
export interface RecursiveSlope {
  /** Number of unknowns: the constant and one slope per regressor. */
  readonly size: number;
  /** Measurement, and the share of the past's weight that is kept, e^{−dt/memory}; the caller writes both. */
  readonly told: Float64Array;
  /** Constant, then slopes; units of y per regressor. */
  readonly weights: Float64Array;
  /** Covariance for measurements of unit variance, row by row. */
  readonly covariance: Float64Array;
  /** Regressors, the first 1; the caller writes the others. */
  readonly regressors: Float64Array;
  readonly gains: Float64Array;
}

/** Variance of what is not known yet, in units of one measurement's. */
const ignorance = 1e6;
/** Least share that is kept from one step to the next. */
const keptMin = 0.5;

export function createRecursiveSlope(regressors: number): RecursiveSlope {
  const size = regressors + 1;
  const slope: RecursiveSlope = {
    size,
    told: Float64Array.of(0, 1),
    weights: new Float64Array(size),
    covariance: new Float64Array(size * size),
    regressors: new Float64Array(size),
    gains: new Float64Array(size),
  };
  resetRecursiveSlope(slope);
  return slope;
}

export function resetRecursiveSlope({ size, weights, covariance, regressors }: RecursiveSlope): void {
  weights.fill(0);
  regressors.fill(0);
  regressors[0] = 1;
  covariance.fill(0);
  for (let i = 0; i < size; i += 1) covariance[i * size + i] = ignorance;
}

/**
 * One measurement, with all that the caller wrote.
 *
 * @realtime safe: allocates nothing
 */
export function stepRecursiveSlope(slope: RecursiveSlope): void {
  const { size, told, weights, covariance, regressors, gains } = slope;
  const share = Math.max(told[1] as number, keptMin);
  let scatter = share;
  let error = told[0] as number;
  for (let i = 0; i < size; i += 1) {
    let sum = 0;
    for (let k = 0; k < size; k += 1) {
      sum += (covariance[i * size + k] as number) * (regressors[k] as number);
    }
    gains[i] = sum;
    scatter += (regressors[i] as number) * sum;
    error -= (regressors[i] as number) * (weights[i] as number);
  }
  // Rounding has the last word only if the covariance has grown without excitation: begin anew.
  if (!(scatter >= share && scatter < 1e12)) return resetRecursiveSlope(slope);
  for (let i = 0; i < size; i += 1) {
    const gain = (gains[i] as number) / scatter;
    weights[i] = (weights[i] as number) + gain * error;
    for (let k = 0; k <= i; k += 1) {
      const next = ((covariance[i * size + k] as number) - gain * (gains[k] as number)) / share;
      covariance[i * size + k] = next;
      covariance[k * size + i] = next;
    }
  }
}
