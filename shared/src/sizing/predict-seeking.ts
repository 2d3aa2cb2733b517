import { recoveredSlope, slowRate, washoutAtDither, type AveragedLoop } from './averaged-loop.js';

export interface PredictionInput {
  loop: AveragedLoop;
  amplitude: number;
  gain: number;
  /** Standard deviation of the objective from scan to scan, objective unit. */
  noise: number;
  curvature: number;
  driftPerS: number;
}

/** What a sized law will do. */
export interface SeekingPrediction {
  /** Time until a tenth of the first distance is left, the settling of the filters included, s. */
  convergenceS: number;
  /** Mean loss by the dither, f''a²/4, objective unit. */
  rippleLoss: number;
  /** Mean loss by the scatter that noise gives the estimate, objective unit. */
  noiseLoss: number;
  /** How far the estimate trails a best point that drifts, actuator unit, and what that costs. */
  driftLag: number;
  driftLoss: number;
  /** Standard deviation of the low-passed slope by noise, objective unit / actuator unit. */
  gradientNoise: number;
  /** Standard deviation of the estimate by noise, actuator unit. */
  estimateNoise: number;
}

/** The distance that counts as converged, of that at the start. */
export const convergedShare = 0.1;

/**
 * Predicts the gradient law on a quadratic.
 *
 * - Convergence: one dither period in which the filters settle, then the averaged loop of second order. Its low-pass
 *   holds the share 1 − e^{−ωl·T} of the slope by then; the slow root takes the lags into account.
 * - Noise: white noise σ becomes a slope of density 2σ²·dt·|H|²/a², which the low-pass cuts to a variance of
 *   σ²·dt·|H|²·ωl/a², and the loop turns into a variance of k·σ²·dt·|H|²/(a²·f''·ρ) of the estimate.
 * - Drift: a ramp v is followed v/κ behind.
 *
 * @source averaging: M. Krstić and H.-H. Wang (2000), Automatica 36:595–601 (from memory); variances: integrals of
 * first- and second-order filters of white noise
 */
export function predictSeeking(input: PredictionInput): SeekingPrediction {
  const { loop, amplitude, gain, noise, curvature, driftPerS } = input;
  const { lowPassRadPerS, scanS } = loop;
  const share = recoveredSlope(loop);
  const rate = gain * curvature * share;
  const passed = (noise * washoutAtDither(loop)) ** 2 * scanS;
  const variance = (gain * passed) / (amplitude ** 2 * curvature * share);
  const driftLag = driftPerS / rate;
  return {
    convergenceS: convergenceTime(loop, rate),
    rippleLoss: (curvature * amplitude ** 2) / 4,
    noiseLoss: (curvature * variance) / 2,
    driftLag,
    driftLoss: (curvature * driftLag ** 2) / 2,
    gradientNoise: Math.sqrt(passed * lowPassRadPerS) / amplitude,
    estimateNoise: Math.sqrt(variance),
  };
}

/**
 * Time until a tenth of the distance is left: the filters settle for a period, then the averaged loop of second
 * order, whose low-pass holds a share of the slope by then.
 *
 * @param rate with which the error would decay without low-pass, 1/s
 */
export function convergenceTime(loop: AveragedLoop, rate: number): number {
  const settleS = (2 * Math.PI) / loop.omegaRadPerS;
  const slow = slowRate(loop);
  const fast = loop.lowPassRadPerS - slow;
  const charged = 1 - Math.exp(-loop.lowPassRadPerS * settleS);
  const weight = (fast - rate * charged) / (fast - slow);
  return settleS + Math.log(weight / convergedShare) / slow;
}
