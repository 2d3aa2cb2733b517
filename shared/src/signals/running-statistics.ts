/**
 * Mean and variance in one pass without the cancellation of the sum of squares.
 *
 * @source B. P. Welford (1962), "Note on a method for calculating corrected sums of squares and products",
 * Technometrics 4:419–420
 */
export class RunningStatistics {
  private n = 0;
  private average = 0;
  private squares = 0;

  add(value: number): void {
    this.n += 1;
    const delta = value - this.average;
    this.average += delta / this.n;
    this.squares += delta * (value - this.average);
  }

  clear(): void {
    this.n = 0;
    this.average = 0;
    this.squares = 0;
  }

  get count(): number {
    return this.n;
  }

  /** NaN while empty. */
  get mean(): number {
    return this.n === 0 ? NaN : this.average;
  }

  /** Standard deviation with divisor n − 1; NaN below two values. */
  get standardDeviation(): number {
    return this.n < 2 ? NaN : Math.sqrt(this.squares / (this.n - 1));
  }

  /** Standard error of the mean for independent values; NaN below two values. */
  get standardError(): number {
    return this.standardDeviation / Math.sqrt(this.n);
  }
}
