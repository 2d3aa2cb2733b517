import type { Trace } from '../signals/trace.types.js';

/** Most points of a trace; a longer one is bad, never cut short. */
export const tracePointsMax = 4096;

/**
 * The points of one trace channel, in memory of its own. They are kept as they are recorded, in single precision:
 * what is judged in a scan is, bit for bit, what its run file says.
 */
export class TraceReading implements Trace {
  points: Float32Array = new Float32Array(0);
  private memory = this.points;

  /**
   * @param from place of the first point, unit of the axis
   * @param step distance of two points, unit of the axis
   */
  constructor(
    readonly from: number,
    readonly step: number,
  ) {}

  /**
   * Copies the points of a scan.
   *
   * @returns false where it has no points, more than `tracePointsMax`, or one that is no finite number in single
   * precision: a trace with a hole is a bad trace. The points are then those of before.
   * @realtime safe: takes memory only where a trace is longer than any before, and a view where its length changes
   */
  take(points: ArrayLike<number>): boolean {
    const { length } = points;
    if (length === 0 || length > tracePointsMax || !areRecordable(points)) return false;
    if (length > this.memory.length) this.memory = new Float32Array(length);
    if (length !== this.points.length) this.points = this.memory.subarray(0, length);
    this.points.set(points);
    return true;
  }
}

function areRecordable(points: ArrayLike<number>): boolean {
  let spoilt = 0;
  for (let i = 0; i < points.length; i += 1) {
    const point = Math.fround(points[i] as number);
    // The difference is 0 for finite numbers only.
    spoilt += point - point;
  }
  return spoilt === 0;
}
