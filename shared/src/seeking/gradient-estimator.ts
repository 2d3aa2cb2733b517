import type { AxisDither } from './axis-dither.js';
import { createFilterBank, resetFilterBank, stepFilterBank, type FilterBank } from './filter-bank.js';

/** Washout, demodulation and low-pass of one quantity for each dither. */
export interface GradientEstimator {
  /** The quantity of this step, a usable number; the caller writes it. */
  readonly told: Float64Array;
  /** One washout and one low-pass for each dither. */
  readonly washouts: FilterBank;
  readonly lowPasses: FilterBank;
  /** Quantity less its slow part, its unit. */
  readonly washed: Float64Array;
  readonly demodulated: Float64Array;
  /** Slope of the quantity, quantity unit / actuator unit; never NaN. */
  readonly gradient: Float64Array;
}

/** @param washoutRatio, lowPassRatio corners as fractions of each dither frequency */
export function createGradientEstimator(
  dithers: readonly AxisDither[],
  washoutRatio: number,
  lowPassRatio: number,
): GradientEstimator {
  const bank = (ratio: number) => createFilterBank(Float64Array.from(dithers, ({ omega }) => ratio * omega));
  const lowPasses = bank(lowPassRatio);
  return {
    told: new Float64Array(1),
    washouts: bank(washoutRatio),
    lowPasses,
    washed: new Float64Array(dithers.length),
    demodulated: lowPasses.input,
    gradient: lowPasses.output,
  };
}

export function resetGradientEstimator({ washouts, lowPasses, gradient }: GradientEstimator): void {
  resetFilterBank(washouts);
  resetFilterBank(lowPasses);
  gradient.fill(0);
}

/**
 * The mean of `gradient` is the slope times Re[e^{jφ}F(jω)H(jω)] for a plant F and the washout H.
 *
 * @param demodulators what the quantity is multiplied with, 1 / actuator unit
 * @realtime safe: allocates nothing
 */
export function stepGradientEstimator(
  estimator: GradientEstimator,
  demodulators: Float64Array,
  dtS: number,
): void {
  const { told, washouts, lowPasses, washed, demodulated } = estimator;
  const value = told[0] as number;
  for (let i = 0; i < demodulators.length; i += 1) washouts.input[i] = value;
  stepFilterBank(washouts, dtS);
  for (let i = 0; i < demodulators.length; i += 1) {
    washed[i] = value - (washouts.output[i] as number);
    demodulated[i] = (demodulators[i] as number) * (washed[i] as number);
  }
  stepFilterBank(lowPasses, dtS);
}

export const gradientSignals = ['estimate', 'washout', 'demodulated', 'gradient'] as const;

/** Writes the signals of `gradientSignals`, `stride` entries per actuator. */
export function writeGradientSignals(
  { washed, demodulated, gradient }: GradientEstimator,
  signals: Float64Array,
  stride: number = gradientSignals.length,
): void {
  for (let i = 0; i < gradient.length; i += 1) {
    signals[i * stride + 1] = washed[i] as number;
    signals[i * stride + 2] = demodulated[i] as number;
    signals[i * stride + 3] = gradient[i] as number;
  }
}

/** Writes the estimates, which come first among the signals of each actuator. */
export function writeEstimates(
  estimate: Float64Array,
  signals: Float64Array,
  stride: number = gradientSignals.length,
): void {
  for (let i = 0; i < estimate.length; i += 1) signals[i * stride] = estimate[i] as number;
}
