/** Numbers that lead each row of a batch: scan number, time since the run began (s), wall time (ms), label index. */
export const rowLead = 4;

/** Consecutive rows of one run, row-major: `rowLead` numbers, then one per run column; NaN is NULL. */
export interface ScanBatch {
  data: Float64Array;
  rows: number;
  /** Active steps by label index; −1 in a row means none. */
  labels: readonly string[];
}
