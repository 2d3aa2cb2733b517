import {
  createFirstOrderFilter,
  resetFirstOrderFilter,
  stepLowPass,
  stepWashout,
  type FirstOrderFilterState,
} from '../signals/first-order-filter.js';
import { demodulator, type AxisDither } from './axis-dither.js';

/** Washout, demodulation and low-pass of one quantity for each dither. */
export interface GradientEstimator {
  readonly washouts: readonly FirstOrderFilterState[];
  readonly lowPasses: readonly FirstOrderFilterState[];
  /** Quantity less its slow part, its unit. */
  readonly washed: Float64Array;
  readonly demodulated: Float64Array;
  /** Slope of the quantity, quantity unit / actuator unit; never NaN. */
  readonly gradient: Float64Array;
}

export function createGradientEstimator(actuators: number): GradientEstimator {
  const filters = () => Array.from({ length: actuators }, createFirstOrderFilter);
  const values = () => new Float64Array(actuators);
  return {
    washouts: filters(),
    lowPasses: filters(),
    washed: values(),
    demodulated: values(),
    gradient: values(),
  };
}

export function resetGradientEstimator(estimator: GradientEstimator): void {
  for (let i = 0; i < estimator.washouts.length; i += 1) {
    resetFirstOrderFilter(estimator.washouts[i] as FirstOrderFilterState);
    resetFirstOrderFilter(estimator.lowPasses[i] as FirstOrderFilterState);
  }
  estimator.gradient.fill(0);
}

/**
 * The mean of `gradient` is the slope times Re[e^{jφ}F(jω)H(jω)] for a plant F and the washout H.
 *
 * @param value a usable number
 * @param washoutRatio, lowPassRatio corners as fractions of each dither frequency
 * @realtime safe: allocates nothing
 */
export function stepGradientEstimator(
  estimator: GradientEstimator,
  dithers: readonly AxisDither[],
  value: number,
  washoutRatio: number,
  lowPassRatio: number,
  dtS: number,
): void {
  for (let i = 0; i < dithers.length; i += 1) {
    const dither = dithers[i] as AxisDither;
    const washout = estimator.washouts[i] as FirstOrderFilterState;
    const washed = stepWashout(washout, value, washoutRatio * dither.omega, dtS);
    const demodulated = demodulator(dither) * washed;
    const lowPass = estimator.lowPasses[i] as FirstOrderFilterState;
    estimator.washed[i] = washed;
    estimator.demodulated[i] = demodulated;
    estimator.gradient[i] = stepLowPass(lowPass, demodulated, lowPassRatio * dither.omega, dtS);
  }
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
