/** Averages the objective at one point that is tried, once the plant has settled there. */
export interface Dwell {
  elapsedS: number;
  sum: number;
  count: number;
}

export function createDwell(): Dwell {
  return { elapsedS: 0, sum: 0, count: 0 };
}

export function restartDwell(dwell: Dwell): void {
  dwell.elapsedS = 0;
  dwell.sum = 0;
  dwell.count = 0;
}

/**
 * @returns true in the step that ends the dwell; then `sum / count` is the mean
 * @realtime safe: allocates nothing
 */
export function stepDwell(
  dwell: Dwell,
  dwellS: number,
  settleS: number,
  objective: number,
  dtS: number,
): boolean {
  dwell.elapsedS += dtS;
  const isOver = dwell.elapsedS + dtS / 2 >= dwellS;
  // The last sample counts in any case: a dwell shorter than a scan has no other.
  if (isOver || dwell.elapsedS > settleS) {
    dwell.sum += objective;
    dwell.count += 1;
  }
  return isOver;
}
