import { sortedPercentile } from './percentile.js';

/** Percentiles of one trace after the other, sorted in memory of its own. */
export class TracePercentile {
  private sorted: Float32Array = new Float32Array(0);

  /**
   * @param points finite, as they are recorded
   * @param percent 0 to 100
   * @returns as `percentile` of definition 7; NaN outside 0 to 100
   * @realtime safe: sorts, and takes no memory while the length stays
   */
  measure(points: ArrayLike<number>, percent: number): number {
    if (!(percent >= 0 && percent <= 100)) return NaN;
    if (this.sorted.length !== points.length) this.sorted = new Float32Array(points.length);
    this.sorted.set(points);
    this.sorted.sort();
    return sortedPercentile(this.sorted, points.length, percent);
  }
}
