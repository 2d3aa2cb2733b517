import { MomentReadings } from './moment-readings.js';
import { clearMoments, joinMoments, momentStride, setSingleMoment } from './moments.js';

/**
 * Statistics of all values since the start in one pass, without the cancellation of the sum of squares. Values
 * that are no finite number are left out, so that none can spoil the rest.
 *
 * @source B. P. Welford (1962), "Note on a method for calculating corrected sums of squares and products",
 * Technometrics 4:419–420, carried on to the fourth moment by Pébay (2008)
 * @realtime `add` is safe: it allocates nothing
 */
export class RunningStatistics extends MomentReadings {
  private readonly single = new Float64Array(momentStride);

  constructor() {
    super(new Float64Array(momentStride));
  }

  /** @returns false where the value is no finite number and was left out */
  add(value: number): boolean {
    if (!Number.isFinite(value)) return false;
    setSingleMoment(this.single, 0, value);
    joinMoments(this.group, 0, this.single, 0, this.group, 0);
    return true;
  }

  /** Takes in all values of another, as if they had been added after its own. */
  join(later: RunningStatistics): void {
    joinMoments(this.group, 0, later.group, 0, this.group, 0);
  }

  clear(): void {
    clearMoments(this.group);
  }
}
