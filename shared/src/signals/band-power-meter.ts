import { checkSettings } from './check-settings.js';
import {
  createSecondOrderFilter,
  resetSecondOrderFilter,
  stepSecondOrderFilter,
  type SecondOrderFilterState,
} from './second-order-filter.js';
import { SlidingStatistics } from './sliding-statistics.js';

export interface BandPowerMeterSettings {
  /** Middle of the band, Hz; above 0, below half the step rate. */
  centreHz: number;
  /** Distance of its −3 dB points, Hz; above 0. */
  widthHz: number;
  /** Time of a step, s. */
  periodS: number;
  /** Values over which the square is averaged. */
  windowLength: number;
}

/**
 * Power of a scalar channel in a band, over time: mean square behind a second-order band-pass, over a sliding
 * window. A sine of amplitude a at the centre reads a²/2; white noise of density S reads S·(π/2)·widthHz, for
 * bands that are narrow beside the step rate.
 *
 * @source noise bandwidth of a resonator, e.g. P. Horowitz and W. Hill (1989), "The Art of Electronics",
 * section 7.21
 * @realtime `add` is safe: constant time, allocates nothing
 */
export class BandPowerMeter {
  private readonly filter: SecondOrderFilterState;
  private readonly window: SlidingStatistics;

  /** @throws analysis.invalid-input */
  constructor(settings: BandPowerMeterSettings) {
    const { centreHz, widthHz, periodS, windowLength } = settings;
    checkSettings([widthHz > 0, 'widthHz', 'must be above 0.']);
    const quality = centreHz / widthHz;
    this.filter = createSecondOrderFilter({ kind: 'band-pass', frequencyHz: centreHz, quality, periodS });
    this.window = new SlidingStatistics(windowLength);
  }

  /** @returns false where the value is no finite number and was left out */
  add(value: number): boolean {
    return this.window.add(stepSecondOrderFilter(this.filter, value));
  }

  /** (unit of the values)²; NaN while empty. */
  get power(): number {
    return this.window.rms ** 2;
  }

  get isFull(): boolean {
    return this.window.isFull;
  }

  clear(): void {
    this.window.clear();
    resetSecondOrderFilter(this.filter);
  }
}
