import { Moment } from './moments.js';

/**
 * What can be read from the moments of a group of values; every reading is NaN while there are too few values
 * for it. Base of the running and of the sliding statistics.
 */
export class MomentReadings {
  /** @param group one group, see `Moment` */
  protected constructor(protected readonly group: Float64Array) {}

  get count(): number {
    return this.group[Moment.count]!;
  }

  /** Unit of the values; NaN while empty. */
  get mean(): number {
    return this.count === 0 ? NaN : this.group[Moment.mean]!;
  }

  get min(): number {
    return this.count === 0 ? NaN : this.group[Moment.min]!;
  }

  get max(): number {
    return this.count === 0 ? NaN : this.group[Moment.max]!;
  }

  /** Divisor n − 1; NaN below two values. */
  get variance(): number {
    return this.count < 2 ? NaN : this.group[Moment.second]! / (this.count - 1);
  }

  /** Standard deviation with divisor n − 1; NaN below two values. */
  get standardDeviation(): number {
    return Math.sqrt(this.variance);
  }

  /** Standard error of the mean for independent values; NaN below two values. */
  get standardError(): number {
    return this.standardDeviation / Math.sqrt(this.count);
  }

  /** Root of the mean square, the mean included. */
  get rms(): number {
    if (this.count === 0) return NaN;
    return Math.hypot(this.mean, Math.sqrt(this.group[Moment.second]! / this.count));
  }

  /** Greatest distance from zero. */
  get peak(): number {
    return Math.max(Math.abs(this.min), Math.abs(this.max));
  }

  /** Peak over rms, the mean included in both; √2 for a sine; NaN where all values are zero. */
  get crestFactor(): number {
    return this.peak / this.rms;
  }

  /**
   * Skewness g₁ = m₃/m₂^(3/2) with the divisor n in both moments, not corrected for bias; NaN without spread.
   *
   * @source D. N. Joanes and C. A. Gill (1998), "Comparing measures of sample skewness and kurtosis", The
   * Statistician 47:183–189
   */
  get skewness(): number {
    const second = this.group[Moment.second]!;
    return (Math.sqrt(this.count) * this.group[Moment.third]!) / (second * Math.sqrt(second));
  }

  /**
   * Kurtosis by Pearson's b₂ = m₄/m₂² with the divisor n in both moments: 3 for a normal distribution, 1.5 for a
   * sine. The excess is 3 less. NaN without spread.
   *
   * @source K. Pearson (1905), Biometrika 4:169–212; name b₂ as in Joanes and Gill (1998)
   */
  get kurtosis(): number {
    const second = this.group[Moment.second]!;
    return (this.count * this.group[Moment.fourth]!) / (second * second);
  }

  /**
   * Excess kurtosis G₂ = (n − 1)/((n − 2)(n − 3)) · ((n + 1)(b₂ − 3) + 6), without bias for normal values; NaN
   * below four.
   *
   * @source Joanes and Gill (1998)
   */
  get unbiasedExcessKurtosis(): number {
    const n = this.count;
    if (n < 4) return NaN;
    return ((n - 1) / ((n - 2) * (n - 3))) * ((n + 1) * (this.kurtosis - 3) + 6);
  }

  /**
   * Lag-1 autocorrelation Σ(xᵢ − m)(xᵢ₊₁ − m)/Σ(xᵢ − m)²; −1 to 1; NaN without spread.
   *
   * @source NIST/SEMATECH e-Handbook of Statistical Methods, 1.3.5.12
   */
  get lag1Autocorrelation(): number {
    return this.group[Moment.lag]! / this.group[Moment.second]!;
  }
}
