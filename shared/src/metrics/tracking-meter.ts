import type { Direction } from '../objectives/objective.schema.js';

/**
 * How well the best point is held, over time: efficiency and regret against a best objective that is known, or was
 * surveyed. Samples in which either number is not finite are left out, and their time is counted apart.
 *
 * @realtime `add` is safe: constant time, allocates nothing
 */
export class TrackingMeter {
  private timeS = 0;
  private lostTimeS = 0;
  private objectiveMean = 0;
  private bestMean = 0;
  private shortfallMean = 0;

  constructor(private readonly direction: Direction) {}

  /**
   * @param objective as measured
   * @param best what was to be had at that time, same unit
   * @param dtS time that the sample stands for, s; above 0
   */
  add(objective: number, best: number, dtS: number): void {
    if (!(dtS > 0)) return;
    if (!Number.isFinite(objective) || !Number.isFinite(best)) {
      this.lostTimeS += dtS;
      return;
    }
    this.timeS += dtS;
    // Means are moved, not sums kept: a long run loses no digits.
    const share = dtS / this.timeS;
    const shortfall = this.direction === 'maximise' ? best - objective : objective - best;
    this.objectiveMean += share * (objective - this.objectiveMean);
    this.bestMean += share * (best - this.bestMean);
    this.shortfallMean += share * (shortfall - this.shortfallMean);
  }

  /** Time of the samples that count, s. */
  get countedS(): number {
    return this.timeS;
  }

  /** Time of those left out, s. */
  get leftOutS(): number {
    return this.lostTimeS;
  }

  /**
   * Share of what was to be had: ∫objective/∫best where it is to be made large, ∫best/∫objective where small. 1
   * is perfect; above 1 the best was not the best. NaN while empty, and where the objective can be 0 or below:
   * use the regret there.
   */
  get efficiency(): number {
    if (this.timeS === 0 || !(this.objectiveMean > 0 && this.bestMean > 0)) return NaN;
    const share = this.objectiveMean / this.bestMean;
    return this.direction === 'maximise' ? share : 1 / share;
  }

  /** Mean shortfall behind the best, objective unit; 0 is perfect. NaN while empty. */
  get meanRegret(): number {
    return this.timeS === 0 ? NaN : this.shortfallMean;
  }

  /** Shortfall summed up over time, objective unit times s. */
  get regret(): number {
    return this.shortfallMean * this.timeS;
  }
}
