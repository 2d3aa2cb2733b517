/** Numbers that lead each trace of a batch: scan number, index among the run's trace channels, number of points. */
export const traceLead = 3;

/** Traces of consecutive scans of one run, one after the other. */
export interface TraceBatch {
  /** `traceLead` numbers per trace. */
  heads: Float64Array<ArrayBuffer>;
  /** Their points in the same order, without gaps. */
  points: Float32Array<ArrayBuffer>;
  count: number;
}
