import { checkSettings } from '../signals/check-settings.js';
import type { Estimate } from '../signals/estimate.js';
import { averagedPeriodogram, type Spectrum } from '../signals/periodogram.js';
import { digamma, trigamma } from './digamma.js';
import { solveByReflections } from './solve-by-reflections.js';

/** *white*: the same at all frequencies; *flicker*: 1/f; *random-walk*: 1/f²; *other*: none of them. */
export type NoiseColour = 'white' | 'flicker' | 'random-walk' | 'other';

export interface NoiseSpectrum {
  /** Exponent α of density ~ 1/f^α in the band. */
  slope: Estimate;
  /** Density at `referenceHz`, unit²/Hz. */
  density: Estimate;
  /** Geometric middle of the bins used, where slope and density are independent, Hz. */
  referenceHz: number;
  /** Density in the upper half of the band, unit²/Hz: the floor, where the noise is white there. */
  floor: Estimate;
  colour: NoiseColour;
}

export interface NoiseSettings {
  /** Values per segment; an eighth of the series where not given. */
  segmentLength?: number;
  /** Band in which the line is laid, Hz; from the second bin to half the sample rate where not given. */
  lowHz?: number;
  highHz?: number;
}

/** Correlation of the power in bins one and two apart under the Hann window: (2/3)² and (1/6)². */
const binCorrelations = [1, 4 / 9, 1 / 36] as const;
const binsMin = 5;
/** A slope within this of a named colour has its name. */
const slopeTolerance = 0.25;

/**
 * Noise of a channel at rest: its level and how it falls with frequency, by a straight line through the
 * logarithms of an averaged periodogram (Hann, half overlap). The logarithm's bias and variance are those of a
 * χ² average, and neighbouring bins are taken as correlated as the Hann window makes them.
 *
 * @param values channel with everything at rest, evenly spaced
 * @param sampleRateHz above zero
 * @throws analysis.invalid-input, analysis.too-little-data; analysis.no-fit below five bins in the band
 * @source D. B. Percival and A. T. Walden (1993), "Spectral Analysis for Physical Applications", section 6.3
 * (log of the estimate) and 6.17 (overlap); least squares with a known covariance
 */
export function noiseSpectrum(
  values: ArrayLike<number>,
  sampleRateHz: number,
  settings: NoiseSettings = {},
): NoiseSpectrum {
  const segmentLength = settings.segmentLength ?? Math.max(16, Math.floor(values.length / 8));
  const spectrum = averagedPeriodogram(values, sampleRateHz, { segmentLength });
  const lowHz = settings.lowHz ?? 1.5 * spectrum.binWidthHz;
  const highHz = settings.highHz ?? sampleRateHz / 2;
  // The last bin of an even length stands for itself alone and scatters more.
  const bins = Array.from(spectrum.frequencyHz, (_, k) => k).filter((k) => {
    const frequencyHz = spectrum.frequencyHz[k]!;
    return frequencyHz >= lowHz && frequencyHz <= highHz && k > 0 && 2 * k < segmentLength;
  });
  checkSettings([
    bins.length >= binsMin,
    'lowHz',
    `to highHz must hold ${binsMin} bins of ${spectrum.binWidthHz} Hz.`,
  ]);
  return layLine(spectrum, bins);
}

function layLine(spectrum: Spectrum, bins: readonly number[]): NoiseSpectrum {
  const freedom = 1 / spectrum.relativeStandardError ** 2;
  const logs = bins.map((k) => Math.log(spectrum.density[k]!) - digamma(freedom) + Math.log(freedom));
  const x = bins.map((k) => Math.log(spectrum.frequencyHz[k]!));
  const middle = x.reduce((sum, value) => sum + value, 0) / x.length;
  const rows = x.map((value) => [1, value - middle]);
  const { x: line, inverse } = solveByReflections(
    rows.map((row) => [...row]),
    [...logs],
  );
  const errors = [0, 1].map((j) => {
    const shares = rows.map((row) => row.reduce((sum, factor, k) => sum + factor * inverse[j]![k]!, 0));
    return Math.sqrt(trigamma(freedom) * correlatedSquare(shares));
  });
  const slope = { value: -line[1]!, standardError: errors[1]! };
  const density = Math.exp(line[0]!);
  return {
    slope,
    density: { value: density, standardError: density * errors[0]! },
    referenceHz: Math.exp(middle),
    floor: floorOf(spectrum, bins.slice(Math.floor(bins.length / 2))),
    colour: colourOf(slope),
  };
}

/** Variance of a weighted sum of neighbouring bins, for a variance 1 of each. */
function correlatedSquare(shares: readonly number[]): number {
  return binCorrelations.reduce((sum, correlation, lag) => {
    const products = shares.slice(lag).reduce((inner, share, i) => inner + share * shares[i]!, 0);
    return sum + (lag === 0 ? 1 : 2) * correlation * products;
  }, 0);
}

function floorOf(spectrum: Spectrum, bins: readonly number[]): Estimate {
  const value = bins.reduce((sum, k) => sum + spectrum.density[k]!, 0) / bins.length;
  const spread = correlatedSquare(bins.map(() => 1 / bins.length));
  return { value, standardError: value * spectrum.relativeStandardError * Math.sqrt(spread) };
}

function colourOf(slope: Estimate): NoiseColour {
  const names: NoiseColour[] = ['white', 'flicker', 'random-walk'];
  const nearest = Math.min(Math.max(Math.round(slope.value), 0), 2);
  const isNear = Math.abs(slope.value - nearest) <= Math.max(slopeTolerance, 2 * slope.standardError);
  return isNear ? names[nearest]! : 'other';
}
