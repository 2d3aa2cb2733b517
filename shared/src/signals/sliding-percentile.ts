import { checkSettings } from './check-settings.js';
import { checkPercent, sortedPercentile, type PercentileType } from './percentile.js';

/**
 * Percentiles of the last `length` values, exact. The values are kept in order; a step finds the places
 * by bisection and moves the stretch between them, which for windows of some thousand values costs less than a
 * balanced tree. Values that are no finite number are left out.
 *
 * @realtime safe up to some thousand values: allocates nothing; a step moves at most `length` numbers in memory
 */
export class SlidingPercentile {
  private readonly ring: Float64Array;
  private readonly sorted: Float64Array;
  private next = 0;
  private filled = 0;

  /**
   * @param length values in the window, 1 or more
   * @param type definition of Hyndman and Fan (1996); 7 where not said
   * @throws analysis.invalid-input
   */
  constructor(
    readonly length: number,
    private readonly type: PercentileType = 7,
  ) {
    checkSettings([Number.isInteger(length) && length >= 1, 'length', 'must be a whole number from 1.']);
    this.ring = new Float64Array(length);
    this.sorted = new Float64Array(length);
  }

  get count(): number {
    return this.filled;
  }

  /** @returns false where the value is no finite number and was left out */
  add(value: number): boolean {
    if (!Number.isFinite(value)) return false;
    const to = lowerBound(this.sorted, this.filled, value);
    if (this.filled < this.length) {
      this.sorted.copyWithin(to + 1, to, this.filled);
      this.sorted[to] = value;
      this.filled += 1;
    } else {
      this.exchange(lowerBound(this.sorted, this.filled, this.ring[this.next]!), to, value);
    }
    this.ring[this.next] = value;
    this.next = (this.next + 1) % this.length;
    return true;
  }

  /**
   * @param percent 0 to 100
   * @returns NaN while empty
   * @throws analysis.invalid-input
   */
  percentile(percent: number): number {
    checkPercent(percent);
    return sortedPercentile(this.sorted, this.filled, percent, this.type);
  }

  clear(): void {
    this.next = 0;
    this.filled = 0;
  }

  /** Takes the value at `from` out and puts one in whose place among the others was `to` before that. */
  private exchange(from: number, to: number, value: number): void {
    if (to > from) {
      this.sorted.copyWithin(from, from + 1, to);
      this.sorted[to - 1] = value;
    } else {
      this.sorted.copyWithin(to + 1, to, from);
      this.sorted[to] = value;
    }
  }
}

/** Number of values below the given one. */
function lowerBound(sorted: Float64Array, count: number, value: number): number {
  let low = 0;
  let high = count;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (sorted[middle]! < value) low = middle + 1;
    else high = middle;
  }
  return low;
}
