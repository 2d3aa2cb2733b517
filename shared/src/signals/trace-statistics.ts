import { MomentReadings } from './moment-readings.js';
import { Moment, momentStride } from './moments.js';

/** Statistics of one trace after the other, in one place: where a scan measures again and again. */
export class TraceStatistics extends MomentReadings {
  constructor() {
    super(new Float64Array(momentStride));
  }

  /**
   * From now on the readings are those of `values`.
   *
   * @realtime safe: allocates nothing
   */
  measure(values: ArrayLike<number>): this {
    fillMoments(this.group, values);
    return this;
  }
}

/**
 * Statistics of a trace (an array of one scan) or of any finished series, by two passes: first the mean, then the
 * moments about it, with the correction for the rounding of the mean.
 *
 * @param values in any unit. A value that is no finite number makes every reading NaN: a trace with a hole
 * is a bad trace.
 * @source T. F. Chan, G. H. Golub and R. J. LeVeque (1983), "Algorithms for computing the sample variance",
 * The American Statistician 37:242–247, eq. 1.7
 * @realtime safe in time (two passes); allocates one small object
 * @example
 * traceStatistics([1, 2, 3, 4]).mean // 2.5
 */
export function traceStatistics(values: ArrayLike<number>): MomentReadings {
  return new TraceStatistics().measure(values);
}

function fillMoments(group: Float64Array, values: ArrayLike<number>): void {
  const n = values.length;
  group.fill(0);
  if (n === 0) return;
  const mean = meanOfTrace(values);
  if (!Number.isFinite(mean)) return void group.fill(NaN);
  let [min, max] = [Infinity, -Infinity];
  let [residue, second, third, fourth, lag, before] = [0, 0, 0, 0, 0, 0];
  for (let i = 0; i < n; i += 1) {
    const value = values[i]!;
    const deviation = value - mean;
    const square = deviation * deviation;
    residue += deviation;
    second += square;
    third += square * deviation;
    fourth += square * square;
    lag += before * deviation;
    before = deviation;
    min = Math.min(min, value);
    max = Math.max(max, value);
  }
  group[Moment.count] = n;
  group[Moment.mean] = mean + residue / n;
  group[Moment.second] = second - (residue * residue) / n;
  group[Moment.third] = third - (3 * residue * second) / n;
  group[Moment.fourth] = fourth - (4 * residue * third) / n;
  group[Moment.lag] = lag;
  group[Moment.first] = values[0]!;
  group[Moment.last] = values[n - 1]!;
  group[Moment.min] = min;
  group[Moment.max] = max;
}

function meanOfTrace(values: ArrayLike<number>): number {
  let sum = 0;
  for (let i = 0; i < values.length; i += 1) sum += values[i]!;
  return sum / values.length;
}
