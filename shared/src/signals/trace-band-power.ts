import { FourierPlan } from './fourier-plan.js';
import type { Trace } from './trace.types.js';
import { windowWeights } from './windows.js';

/** Tables and working memory for traces of one length. */
interface Workshop {
  readonly plan: FourierPlan;
  readonly weights: Float64Array;
  readonly re: Float64Array;
  readonly im: Float64Array;
  /** What the square of each bin is divided by. */
  readonly divisor: number;
}

/**
 * Power of a trace in a band of frequencies, scan after scan: what `bandPower` says of the whole trace with the
 * Hann window and the mean taken out. Memory is taken again only where the length changes.
 */
export class TraceBandPower {
  private workshop: Workshop | null = null;

  /**
   * @param low lower edge, in 1 over the axis' unit: Hz where the axis is in s
   * @param high upper edge
   * @returns (unit of the values)²; NaN below two points, and where the band is upside down or below zero
   * @realtime safe: a transform, no memory while the length stays
   */
  measure({ points, step }: Trace, low: number, high: number): number {
    const { length } = points;
    if (length < 2 || !(low >= 0 && high >= low)) return NaN;
    if (this.workshop?.plan.length !== length) this.workshop = workshopFor(length);
    const { re, im, divisor } = this.workshop;
    transformed(this.workshop, points);
    let sum = 0;
    for (let k = 0; k * 2 <= length; k += 1) {
      const share = shareInside(k, length, low * step, high * step);
      const pairs = k === 0 || k * 2 === length ? 1 : 2;
      if (share > 0) sum += share * pairs * (re[k]! * re[k]! + im[k]! * im[k]!);
    }
    return sum / divisor;
  }
}

function workshopFor(length: number): Workshop {
  const weights = windowWeights('hann', length);
  const squares = weights.reduce((sum, weight) => sum + weight * weight, 0);
  const [re, im] = [new Float64Array(length), new Float64Array(length)];
  return { plan: new FourierPlan(length), weights, re, im, divisor: length * squares };
}

function transformed({ plan, weights, re, im }: Workshop, points: ArrayLike<number>): void {
  let mean = 0;
  for (let i = 0; i < points.length; i += 1) mean += points[i]! / points.length;
  for (let i = 0; i < points.length; i += 1) re[i] = weights[i]! * (points[i]! - mean);
  im.fill(0);
  plan.transform(re, im);
}

/** Share of a bin that a band takes in; edges in cycles per point, a bin reaches half a bin width to both sides. */
function shareInside(bin: number, length: number, low: number, high: number): number {
  const bottom = Math.max(bin - 0.5, 0) / length;
  const top = Math.min((bin + 0.5) / length, 0.5);
  return (Math.min(high, top) - Math.max(low, bottom)) / (top - bottom);
}
