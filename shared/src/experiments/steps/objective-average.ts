import { RunningStatistics } from '../../signals/running-statistics.js';
import type { ObjectiveSample } from '../sequencer.types.js';

/** An average counts only where at least this share of its scans had a valid objective. */
export const validShareMin = 0.9;

/** Mean of the objective over a time, with what it is worth. */
export class ObjectiveAverage {
  private readonly valid = new RunningStatistics();
  private readonly good = new RunningStatistics();
  private total = 0;

  clear(): void {
    this.valid.clear();
    this.good.clear();
    this.total = 0;
  }

  add(sample: Readonly<ObjectiveSample>): void {
    this.total += 1;
    if (!sample.isGood || !Number.isFinite(sample.value)) return;
    this.good.add(sample.value);
    if (sample.isValid) this.valid.add(sample.value);
  }

  /** Enough of its scans were valid for the mean to be used. */
  get isValid(): boolean {
    return this.total > 0 && this.valid.count >= validShareMin * this.total;
  }

  /** Mean of the valid values where they are enough, else of the good ones, for the record; NaN without any. */
  get mean(): number {
    return this.isValid ? this.valid.mean : this.good.mean;
  }

  /** Standard error of that mean, taking the values for independent; NaN below two. */
  get standardError(): number {
    return this.isValid ? this.valid.standardError : this.good.standardError;
  }

  /** Squared deviations of the valid values from their mean, and how many are free to deviate. */
  get scatter(): { squares: number; freedom: number } {
    const freedom = Math.max(0, this.valid.count - 1);
    return { squares: freedom > 0 ? this.valid.variance * freedom : 0, freedom };
  }
}
