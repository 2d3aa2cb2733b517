import { z } from 'zod';
import { sizeAmplitude, type AmplitudeBound } from '../dither/dither-amplitude.js';
import { lagAtDither, recoveredSlope, washoutAtDither, type AveragedLoop } from './averaged-loop.js';
import { fastestDither, plantLagAt, plantLagRad } from './choose-dithers.js';
import { loopMargins, type TimeScaleMargins } from './loop-margins.js';
import { lowPassRatio, washoutRatio } from './loop-kinds.js';
import { predictSeeking, type SeekingPrediction } from './predict-seeking.js';
import { ditherOverAdaptationMin, lowPassOverAdaptationMin, noiseShare, speedShare } from './size-loops.js';
import { checkedForSizing } from './sizing-plant.schema.js';

const positive = z.number().positive().max(1e12);
const orNone = z.number().min(0).max(1e12).default(0);

export const sizingRequestSchema = z.object({
  /** Time between two scans, s. */
  scanS: positive,
  /** Time constants of the plant, s; empty for one that answers at once. */
  timeConstantsS: z.array(positive).max(5).default([]),
  deadTimeS: orNone,
  /** Standard deviation of the objective from scan to scan, white, objective unit. */
  noise: orNone,
  /** Size of the second derivative at the best point, objective unit / actuator unit². */
  curvature: positive,
  /** Greatest speed of the best point, actuator unit / s. */
  driftPerS: orNone,
  /** Mean loss by the dither that is allowed, objective unit. */
  lossAllowed: positive,
  /** Step of the actuator; limits of the envelope; null for none. */
  resolution: orNone,
  amplitudeMax: positive.nullable().default(null),
  slewPerS: positive.nullable().default(null),
});
export type SizingRequest = z.input<typeof sizingRequestSchema>;

export interface SeekingSize {
  /** What the gradient law takes, in its units. */
  amplitude: number;
  periodS: number;
  washoutRatio: number;
  lowPassRatio: number;
  gain: number;
  phaseRad: number;
  /** Greatest speed of the estimate, actuator unit / s: far from the best point the slope would drive it faster. */
  speedMax: number;
  amplitudeLimitedBy: AmplitudeBound;
  gainLimitedBy: 'time-scales' | 'noise';
  predicted: SeekingPrediction;
  margins: TimeScaleMargins;
  /** What cannot be kept, with what to do. */
  warnings: string[];
}

/**
 * Sizes the gradient law for one actuator behind a map with a rounded best point; `sizeLaw` does so for every law and
 * for many actuators.
 *
 * - Frequency: where the plant lags by 26.6° (ωτ = ½), or 12 scans a period where the scan is too slow for that.
 * - Amplitude: the largest whose loss f''a²/4 is allowed, within envelope and slew.
 * - Phase: that of plant and washout at ω. They leave the share ρ = |F·H| of the slope.
 * - Gain k = κ/(f''·ρ), with κ the least of ω/12, ωl/8 and the rate at which noise costs a quarter of the allowed
 *   loss: the loop turns white noise σ into a scatter of σ²·dt·|H|²·k/(a²·f''·ρ) of the estimate.
 * - Speed: at most a quarter of the dither's, a·ω/4. Averaging holds while the estimate moves little in a period;
 *   beyond, the objective changes by the way itself, which demodulation takes for slope.
 *
 * @throws analysis.invalid-input where the request is at fault or no amplitude will do
 * @source M. Krstić and H.-H. Wang (2000), Automatica 36:595–601; K. B. Ariyur and M. Krstić (2003), "Real-Time
 * Optimization by Extremum-Seeking Control", ch. 1 (from memory); the numbers 12, 8 and ¼ are chosen here
 */
export function sizeSeeking(input: SizingRequest): SeekingSize {
  const request = checkedForSizing(sizingRequestSchema, input);
  const plant = { timeConstantsS: request.timeConstantsS, deadTimeS: request.deadTimeS };
  const omega = fastestDither(plant, request.scanS);
  const periodS = (2 * Math.PI) / omega;
  const { amplitude, limitedBy } = amplitudeOf(request, periodS);
  const open = {
    plant,
    scanS: request.scanS,
    omegaRadPerS: omega,
    washoutRadPerS: washoutRatio * omega,
    lowPassRadPerS: lowPassRatio * omega,
  };
  const loop: AveragedLoop = { ...open, phaseRad: lagAtDither(open), loopRate: 0 };
  const share = recoveredSlope(loop);
  const timeScales = Math.min(
    omega / ditherOverAdaptationMin,
    loop.lowPassRadPerS / lowPassOverAdaptationMin,
  );
  const byNoise = noiseLimitedRate(request, amplitude, share, washoutAtDither(loop));
  const rate = Math.min(timeScales, byNoise);
  loop.loopRate = rate / share;
  const gain = loop.loopRate / request.curvature;
  const predicted = predictSeeking({ ...request, loop, amplitude, gain });
  return {
    amplitude,
    periodS,
    washoutRatio,
    lowPassRatio,
    gain,
    phaseRad: loop.phaseRad,
    speedMax: speedShare * amplitude * omega,
    amplitudeLimitedBy: limitedBy,
    gainLimitedBy: byNoise < timeScales ? 'noise' : 'time-scales',
    predicted,
    margins: loopMargins(loop, rate),
    warnings: warningsOf(request, loop, predicted),
  };
}

type Request = z.output<typeof sizingRequestSchema>;

function amplitudeOf(request: Request, periodS: number) {
  return sizeAmplitude({
    resolution: request.resolution,
    // Noise is paid for by the gain, not by the amplitude.
    noise: 0,
    scansAveraged: 1,
    slopeToSee: 1,
    amplitudeMax: request.amplitudeMax ?? Infinity,
    slewPerS: request.slewPerS ?? Infinity,
    periodS,
    curvature: request.curvature,
    lossAllowed: request.lossAllowed,
  });
}

function noiseLimitedRate(request: Request, amplitude: number, share: number, washout: number): number {
  const { noise, scanS, curvature, lossAllowed } = request;
  const perRate =
    (noise * noise * scanS * washout * washout) / (2 * amplitude * amplitude * curvature * share * share);
  return perRate === 0 ? Infinity : (noiseShare * lossAllowed) / perRate;
}

function warningsOf(request: Request, loop: AveragedLoop, predicted: SeekingPrediction): string[] {
  const warnings: string[] = [];
  const lagRad = plantLagAt(loop.plant, loop.omegaRadPerS);
  if (lagRad < 0.5 * plantLagRad && lagRad > 0) {
    warnings.push('The scan, not the plant, keeps the dither slow: scan faster to converge sooner.');
  }
  if (predicted.driftLoss > request.lossAllowed) {
    warnings.push(
      'The best point drifts faster than the estimate can follow at the allowed loss: allow more, or quieten the objective.',
    );
  }
  return warnings;
}
