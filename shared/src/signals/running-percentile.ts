import { checkSettings } from './check-settings.js';
import { sortedPercentile } from './percentile.js';

const markers = 5;

/**
 * Percentile of all values since the start in constant time and memory, estimated by five markers whose heights
 * follow a parabola. Exact up to five values, an estimate after that: use `SlidingPercentile` where
 * the window is short enough to be kept. Values that are no finite number are left out.
 *
 * @source R. Jain and I. Chlamtac (1985), "The P² algorithm for dynamic calculation of quantiles and histograms
 * without storing observations", Communications of the ACM 28:1076–1085
 * @realtime safe: constant time, allocates nothing
 */
export class RunningPercentile {
  private readonly heights = new Float64Array(markers);
  private readonly positions = new Float64Array(markers);
  private readonly share: number;
  private total = 0;

  /**
   * @param percent above 0, below 100
   * @throws analysis.invalid-input
   */
  constructor(percent: number) {
    checkSettings([percent > 0 && percent < 100, 'percent', 'must be above 0 and below 100.']);
    this.share = percent / 100;
  }

  get count(): number {
    return this.total;
  }

  /** NaN while empty; the exact percentile (definition 7 of Hyndman and Fan) up to five values. */
  get value(): number {
    if (this.total > markers) return this.heights[2]!;
    return sortedPercentile(this.heights, this.total, this.share * 100);
  }

  /** @returns false where the value is no finite number and was left out */
  add(value: number): boolean {
    if (!Number.isFinite(value)) return false;
    if (this.total < markers) this.addFirst(value);
    else this.addLater(value);
    this.total += 1;
    return true;
  }

  clear(): void {
    this.total = 0;
  }

  private addFirst(value: number): void {
    let at = this.total;
    while (at > 0 && this.heights[at - 1]! > value) {
      this.heights[at] = this.heights[at - 1]!;
      at -= 1;
    }
    this.heights[at] = value;
    this.positions[this.total] = this.total;
  }

  private addLater(value: number): void {
    const heights = this.heights;
    heights[0] = Math.min(heights[0]!, value);
    heights[markers - 1] = Math.max(heights[markers - 1]!, value);
    for (let i = 1; i < markers; i += 1) {
      if (i === markers - 1 || value < heights[i]!) this.positions[i] = this.positions[i]! + 1;
    }
    for (let i = 1; i < markers - 1; i += 1) this.adjust(i);
  }

  /** Moves an inner marker by one place where it is a place or more from where it should be. */
  private adjust(i: number): void {
    // The wanted positions are 0, p/2, p, (1+p)/2 and 1 of the way to the last.
    const wanted = i === 2 ? this.share : (this.share + (i === 1 ? 0 : 1)) / 2;
    const position = this.positions[i]!;
    const gap = wanted * this.total - position;
    const above = this.positions[i + 1]! - position;
    const below = this.positions[i - 1]! - position;
    if (!((gap >= 1 && above > 1) || (gap <= -1 && below < -1))) return;
    const step = gap >= 1 ? 1 : -1;
    const height = this.parabola(i, step, above, below);
    const fits = this.heights[i - 1]! < height && height < this.heights[i + 1]!;
    this.heights[i] = fits ? height : this.chord(i, step, step > 0 ? above : below);
    this.positions[i] = position + step;
  }

  private parabola(i: number, step: number, above: number, below: number): number {
    const height = this.heights[i]!;
    const up = ((step - below) * (this.heights[i + 1]! - height)) / above;
    const down = ((above - step) * (height - this.heights[i - 1]!)) / -below;
    return height + (step / (above - below)) * (up + down);
  }

  private chord(i: number, step: number, distance: number): number {
    const height = this.heights[i]!;
    return height + (step * (this.heights[i + step]! - height)) / distance;
  }
}
