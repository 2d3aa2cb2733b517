import { checkSeries, checkSettings } from './check-settings.js';
import { fourierTransform } from './fourier.js';
import { windowWeights, type WindowKind } from './windows.js';

/** One-sided power spectral density. */
export interface Spectrum {
  /** Frequency of each bin, Hz, from 0 to half the sample rate. */
  frequencyHz: Float64Array;
  /** Density at each bin, (unit of the values)² per Hz. */
  density: Float64Array;
  /** Distance of two bins, Hz. */
  binWidthHz: number;
  sampleRateHz: number;
  /** Number of segments that were averaged. */
  segments: number;
  /** Relative standard error of each density (bins 0 and the last excepted: √2 times that), for normal noise. */
  relativeStandardError: number;
}

/** How a spectrum is made. */
export interface PeriodogramSettings {
  /** Values per segment; the whole series where not given. */
  segmentLength?: number;
  /** Hann where not given. */
  window?: WindowKind;
  /** Share of a segment that the next one covers again, 0 to 0.9; a half where not given. */
  overlap?: number;
  /** Take the mean of each segment out first; true where not given. */
  isMeanRemoved?: boolean;
}

/**
 * Spectrum by averaging the periodograms of overlapping, windowed segments. Scaled so that density times
 * bin width, summed over all bins, is the mean square of the windowed values over that of the window
 * (Parseval); with the rectangle it is exactly their mean square.
 *
 * @param values in any unit, evenly spaced
 * @param sampleRateHz above zero
 * @throws analysis.invalid-input, analysis.too-little-data
 * @source P. D. Welch (1967), "The use of fast Fourier transform for the estimation of power spectra", IEEE
 * Transactions on Audio and Electroacoustics 15:70–73, with his variance for overlapping segments
 */
export function averagedPeriodogram(
  values: ArrayLike<number>,
  sampleRateHz: number,
  settings: PeriodogramSettings = {},
): Spectrum {
  const { segmentLength = values.length, window = 'hann', overlap = 0.5, isMeanRemoved = true } = settings;
  checkSettings(
    [sampleRateHz > 0 && Number.isFinite(sampleRateHz), 'sampleRateHz', 'must be above 0.'],
    [
      Number.isInteger(segmentLength) && segmentLength >= 2,
      'segmentLength',
      'must be a whole number from 2.',
    ],
    [overlap >= 0 && overlap <= 0.9, 'overlap', 'must be from 0 to 0.9.'],
  );
  checkSeries(values, 'values', segmentLength);
  const weights = windowWeights(window, segmentLength);
  const hop = Math.max(1, Math.round(segmentLength * (1 - overlap)));
  const density = new Float64Array(Math.floor(segmentLength / 2) + 1);
  let segments = 0;
  for (let from = 0; from + segmentLength <= values.length; from += hop) {
    addPeriodogram(density, values, from, weights, isMeanRemoved);
    segments += 1;
  }
  const binWidthHz = sampleRateHz / segmentLength;
  const scale = 1 / (segments * sampleRateHz * weights.reduce((sum, w) => sum + w * w, 0));
  return {
    frequencyHz: density.map((_, k) => k * binWidthHz),
    density: density.map((power, k) => power * scale * (isPaired(k, segmentLength) ? 2 : 1)),
    binWidthHz,
    sampleRateHz,
    segments,
    relativeStandardError: 1 / Math.sqrt(effectiveSegments(weights, hop, segments)),
  };
}

/** False for the bins that stand for themselves alone: zero, and half the sample rate. */
function isPaired(bin: number, length: number): boolean {
  return bin !== 0 && bin * 2 !== length;
}

function addPeriodogram(
  sums: Float64Array,
  values: ArrayLike<number>,
  from: number,
  weights: Float64Array,
  isMeanRemoved: boolean,
): void {
  let mean = 0;
  if (isMeanRemoved) {
    for (let i = 0; i < weights.length; i += 1) mean += values[from + i]! / weights.length;
  }
  const re = weights.map((weight, i) => weight * (values[from + i]! - mean));
  const im = new Float64Array(re.length);
  fourierTransform(re, im);
  for (let k = 0; k < sums.length; k += 1) sums[k] = sums[k]! + re[k]! * re[k]! + im[k]! * im[k]!;
}

/** Number of independent segments that would leave the same scatter. */
function effectiveSegments(weights: Float64Array, hop: number, segments: number): number {
  const whole = weights.reduce((sum, w) => sum + w * w, 0);
  let inflation = 1;
  for (let j = 1; j < segments && j * hop < weights.length; j += 1) {
    let shared = 0;
    for (let i = j * hop; i < weights.length; i += 1) shared += weights[i]! * weights[i - j * hop]!;
    inflation += 2 * (1 - j / segments) * (shared / whole) ** 2;
  }
  return segments / inflation;
}
