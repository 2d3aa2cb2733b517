import { describe, expect, it } from 'vitest';
import { bandPower } from './band-power.js';
import { fourierTransform } from './fourier.js';
import { averagedPeriodogram } from './periodogram.js';
import { SeededNoise } from './seeded-noise.fixture.js';

describe('Fourier transform', () => {
  it('of 1, 2, 3, 4 is 10, −2+2i, −2, −2−2i (by hand)', () => {
    const [re, im] = [Float64Array.of(1, 2, 3, 4), new Float64Array(4)];
    fourierTransform(re, im);
    [10, -2, -2, -2].forEach((value, k) => expect(re[k]).toBeCloseTo(value, 13));
    [0, 2, 0, -2].forEach((value, k) => expect(im[k]).toBeCloseTo(value, 13));
  });

  it('agrees with the sum that defines it, at every length', () => {
    const noise = new SeededNoise(4);
    for (const n of [1, 2, 3, 5, 8, 12, 17, 60, 97, 128]) {
      const values = noise.normals(n);
      const [re, im] = [Float64Array.from(values), new Float64Array(n)];
      fourierTransform(re, im);
      for (let k = 0; k < n; k += 1) {
        const at = (part: (angle: number) => number) =>
          values.reduce((sum, value, i) => sum + value * part((-2 * Math.PI * k * i) / n), 0);
        expect(re[k]).toBeCloseTo(at(Math.cos), 10);
        expect(im[k]).toBeCloseTo(at(Math.sin), 10);
      }
    }
  });
});

describe('averaged periodogram', () => {
  const series = Array.from({ length: 24 }, (_, i) => Math.sin((i * i) / 7) + ((0.3 * i) % 1.1));

  // SciPy 1.17.1 signal.welch(series, fs=4, nperseg=8, noverlap=4, window='hann', detrend='constant') and with
  // nperseg=10, noverlap=5, window='hamming', detrend=False.
  it('agrees with an independent implementation', () => {
    const hann = averagedPeriodogram(series, 4, { segmentLength: 8 });
    const expected = [0.0429458, 0.1922501, 0.36772059, 0.2794272, 0.14366943];
    expected.forEach((value, k) => expect(hann.density[k]).toBeCloseTo(value, 7));
    const hamming = averagedPeriodogram(series, 4, {
      segmentLength: 10,
      window: 'hamming',
      isMeanRemoved: false,
    });
    [0.71747496, 0.22288801, 0.38190095, 0.43459402, 0.38857258, 0.21327249].forEach((value, k) =>
      expect(hamming.density[k]).toBeCloseTo(value, 7),
    );
    expect([hann.segments, hamming.segments]).toEqual([5, 3]);
    expect(hann.frequencyHz).toEqual(Float64Array.of(0, 0.5, 1, 1.5, 2));
  });

  // Welch (1967): Hann, half overlap: variance of the mean of K is (1 + 2·(1/6)²·(K − 1)/K)/K of one.
  it('says its own scatter, Hann with half overlap', () => {
    const { relativeStandardError } = averagedPeriodogram(new SeededNoise(1).normals(1024), 1, {
      segmentLength: 128,
    });
    expect(relativeStandardError).toBeCloseTo(Math.sqrt((1 + (2 / 36) * (14 / 15)) / 15), 6);
  });

  it('scatters as it says (3000 seeded spectra of white noise)', () => {
    const noise = new SeededNoise(7);
    const seen: number[] = [];
    let said = 0;
    for (let i = 0; i < 3000; i += 1) {
      const spectrum = averagedPeriodogram(noise.normals(160), 1, { segmentLength: 32 });
      seen.push(spectrum.density[8]!);
      said = spectrum.relativeStandardError;
    }
    const mean = seen.reduce((a, b) => a + b) / seen.length;
    const scatter = Math.sqrt(seen.reduce((sum, value) => sum + (value - mean) ** 2, 0) / seen.length);
    // White noise of variance 1 at 1 Hz has the one-sided density 2.
    expect(Math.abs(mean - 2)).toBeLessThan(4 * 2 * (said / Math.sqrt(3000)));
    expect(Math.abs(scatter / mean / said - 1)).toBeLessThan(0.06);
  });
});

describe('band power', () => {
  it('of a sine lies at its frequency and is half the square of its amplitude', () => {
    const sine = Array.from({ length: 200 }, (_, i) => 3 * Math.sin((2 * Math.PI * 20 * i) / 200) + 7);
    expect(bandPower(sine, 200, 19.5, 20.5, { window: 'rectangular' })).toBeCloseTo(4.5, 10);
    expect(bandPower(sine, 200, 17, 23, { window: 'hann' })).toBeCloseTo(4.5, 10);
    expect(bandPower(sine, 200, 40, 100, { window: 'rectangular' })).toBeCloseTo(0, 10);
  });

  it('refuses what has no spectrum', () => {
    expect(() => bandPower([1, NaN, 2], 1, 0, 1)).toThrow(/values\[1\]/);
    expect(() => bandPower([1], 1, 0, 1)).toThrow(/segmentLength/);
    expect(() => averagedPeriodogram([1, 2, 3], 1, { segmentLength: 4 })).toThrow(/at least 4/);
  });
});
