import { checkSettings } from './check-settings.js';
import { averagedPeriodogram, type PeriodogramSettings, type Spectrum } from './periodogram.js';

/**
 * Power of a trace in a frequency band: the part of its mean square that lies there. Bands that share no
 * frequency and cover everything sum up to the whole mean square (Parseval).
 *
 * @param lowHz lower edge, taken in
 * @param highHz upper edge, left out, except where it is half the sample rate or above
 * @returns (unit of the values)²
 * @throws analysis.invalid-input, analysis.too-little-data
 * @example
 * bandPower([1, -1, 1, -1], 4, 1, 2, { window: 'rectangular' }) // 1
 */
export function bandPower(
  values: ArrayLike<number>,
  sampleRateHz: number,
  lowHz: number,
  highHz: number,
  settings: PeriodogramSettings = {},
): number {
  return spectrumBandPower(averagedPeriodogram(values, sampleRateHz, settings), lowHz, highHz);
}

/**
 * The same of a spectrum. A bin that reaches over an edge counts by the share that is inside; the bin at
 * zero reaches from 0 to half a bin width, the last one up to half the sample rate.
 *
 * @throws analysis.invalid-input
 */
export function spectrumBandPower(spectrum: Spectrum, lowHz: number, highHz: number): number {
  checkSettings([lowHz >= 0 && highHz >= lowHz, 'lowHz', 'must be from 0 to highHz.']);
  const { density, binWidthHz, sampleRateHz } = spectrum;
  return density.reduce((sum, value, k) => {
    const centreHz = k * binWidthHz;
    const bottomHz = k === 0 ? 0 : centreHz - binWidthHz / 2;
    const topHz = Math.min(centreHz + binWidthHz / 2, sampleRateHz / 2);
    const inside = Math.min(highHz, topHz) - Math.max(lowHz, bottomHz);
    return inside <= 0 ? sum : sum + (value * binWidthHz * inside) / (topHz - bottomHz);
  }, 0);
}
