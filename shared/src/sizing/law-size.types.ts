import type { z } from 'zod';
import type { AmplitudeBound } from '../dither/dither-amplitude.js';
import type { SeekingLawId, seekingLaws } from '../seeking/seeking-laws.js';

/** Parameters of a law by its id, complete. */
export type LawParameters<Id extends SeekingLawId> = z.output<(typeof seekingLaws)[Id]['parametersSchema']>;

/** What a sized law will do; null where there is no closed form, for the reason in `unpredicted`. */
export interface LawPrediction {
  /** Time until a tenth of the first distance of three dither amplitudes is left, the settling included, s. */
  convergenceS: number | null;
  /** Mean loss by the dithers at the best point, objective unit. */
  rippleLoss: number;
  /** Mean loss by the scatter that noise gives the estimate, objective unit. */
  noiseLoss: number | null;
  /** How far each estimate trails a best point that drifts, actuator unit, and what that costs together. */
  driftLag: number[] | null;
  driftLoss: number | null;
  /** Standard deviation of the slope by noise, per actuator, objective unit / actuator unit. */
  gradientNoise: number[] | null;
}

/** How far the time scales lie apart, the closest actuator counting; every one should be well above 1. */
export interface LawMargins {
  /** Corner of the plant over the dither: 1/(ω·τ), with all lags in τ; for laws that try points, dwell over settling. */
  plantOverDither: number;
  /** Dither over adaptation, ω/κ; for laws that try points, trials to a tenth of the distance. */
  ditherOverAdaptation: number | null;
  /** Low-pass over the rate at which the loop begins to swing, ωl/(4κ); null without a low-pass. */
  lowPassOverSwing: number | null;
  /** Distance of the dithers' lines over adaptation; null for one dither and for laws that try points. */
  linesOverAdaptation: number | null;
  /** π/2 over κ·delay, where the delayed loop would become unstable; null for laws that try points. */
  delayMargin: number | null;
  /** Scans per dither period, or per point that is tried. */
  scansPerPeriod: number;
}

export interface LawSize<Id extends SeekingLawId = SeekingLawId> {
  lawId: Id;
  parameters: LawParameters<Id>;
  /** One for each actuator, s; for laws that try points, how long a trial of all takes. */
  ditherPeriodsS: number[];
  amplitudes: number[];
  amplitudesLimitedBy: (AmplitudeBound | 'ripple')[];
  /** Rate of convergence along the fastest direction, 1/s; null for perturb-and-observe, which has none. */
  ratePerS: number | null;
  rateLimitedBy: 'time-scales' | 'noise' | 'distance' | null;
  predicted: LawPrediction;
  /** Why a prediction is null, by its name. */
  unpredicted: Partial<Record<keyof LawPrediction, string>>;
  margins: LawMargins;
  /** What cannot be kept or is badly known, with what to do. */
  remarks: string[];
}
