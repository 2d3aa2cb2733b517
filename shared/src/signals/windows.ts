import { checkSettings } from './check-settings.js';

/**
 * Windows for spectra. *hann* for noise, *flat-top* for reading amplitudes, *rectangular* where a whole number of
 * periods fits.
 */
export const windowKinds = ['rectangular', 'hann', 'hamming', 'blackman', 'flat-top'] as const;
export type WindowKind = (typeof windowKinds)[number];

/**
 * Coefficients a of Σ(−1)^k·a_k·cos(2πkx), 0 ≤ x < 1.
 *
 * @source F. J. Harris (1978), "On the use of windows for harmonic analysis with the discrete Fourier
 * transform", Proceedings of the IEEE 66:51–83; flat-top: G. D'Antona and A. Ferrero (2006), "Digital Signal
 * Processing for Measurement Systems", p. 70
 */
const cosineTerms: Record<WindowKind, readonly number[]> = {
  rectangular: [1],
  hann: [0.5, 0.5],
  hamming: [0.54, 0.46],
  blackman: [0.42, 0.5, 0.08],
  'flat-top': [0.21557895, 0.41663158, 0.277263158, 0.083578947, 0.006947368],
};

/**
 * @param length number of weights, 1 or more
 * @param symmetry *periodic* (period = length: for spectra) or *symmetric* (first weight = last: for filters)
 * @returns weights between about −0.1 and 1
 * @throws analysis.invalid-input
 */
export function windowWeights(
  kind: WindowKind,
  length: number,
  symmetry: 'periodic' | 'symmetric' = 'periodic',
): Float64Array {
  checkSettings([Number.isInteger(length) && length >= 1, 'length', 'must be a whole number from 1.']);
  if (length === 1) return Float64Array.of(1);
  const period = symmetry === 'periodic' ? length : length - 1;
  return Float64Array.from({ length }, (_, i) => cosineSum(cosineTerms[kind], i / period));
}

function cosineSum(terms: readonly number[], x: number): number {
  return terms.reduce((sum, a, k) => sum + (k % 2 === 0 ? a : -a) * Math.cos(2 * Math.PI * k * x), 0);
}

/** Mean weight: what is left of the amplitude of a sine that falls on a bin; 0 to 1. */
export function coherentGain(weights: ArrayLike<number>): number {
  return total(weights, 1) / weights.length;
}

/** Equivalent noise bandwidth n·Σw²/(Σw)², bins; 1 for the rectangle. @source Harris (1978), eq. 15 */
export function noiseBandwidthBins(weights: ArrayLike<number>): number {
  return (weights.length * total(weights, 2)) / total(weights, 1) ** 2;
}

/**
 * Share of the amplitude of a sine half-way between two bins that its bin still shows; 0 to 1.
 *
 * @source Harris (1978), eq. 18
 */
export function scallopFactor(weights: ArrayLike<number>): number {
  let re = 0;
  let im = 0;
  for (let i = 0; i < weights.length; i += 1) {
    const angle = (Math.PI * i) / weights.length;
    re += weights[i]! * Math.cos(angle);
    im += weights[i]! * Math.sin(angle);
  }
  return Math.hypot(re, im) / total(weights, 1);
}

function total(weights: ArrayLike<number>, power: 1 | 2): number {
  let sum = 0;
  for (let i = 0; i < weights.length; i += 1) sum += weights[i]! ** power;
  return sum;
}
