import { describe, expect, it } from 'vitest';
import { judgeErrors } from '../signals/honest-errors.fixture.js';
import { SeededNoise } from '../signals/seeded-noise.fixture.js';
import { digamma, trigamma } from './digamma.js';
import { noiseSpectrum } from './noise-colour.js';

describe('digamma and trigamma', () => {
  // Closed forms: ψ(1) = −γ = −0.5772156649, ψ(½) = −γ − 2·ln 2, ψ'(1) = π²/6, ψ'(½) = π²/2 (Abramowitz and
  // Stegun, chapter 6).
  it('have the closed forms', () => {
    expect(digamma(1)).toBeCloseTo(-0.5772156649015329, 10);
    expect(digamma(0.5)).toBeCloseTo(-0.5772156649015329 - 2 * Math.LN2, 10);
    expect(trigamma(1)).toBeCloseTo(Math.PI ** 2 / 6, 9);
    expect(trigamma(0.5)).toBeCloseTo(Math.PI ** 2 / 2, 9);
  });
});

describe('noise spectrum', () => {
  // White noise of standard deviation s at rate r has the one-sided density 2s²/r.
  it('of white noise is flat, with the density of its variance, and with standard errors that are right', () => {
    const truths = { slope: 0, density: 0.08, floor: 0.08 };
    const records = judgeErrors(250, truths, (noise) => noiseSpectrum(noise.normals(1024, 2), 100));
    for (const { bias, size } of Object.values(records)) {
      expect(Math.abs(bias)).toBeLessThan(0.3);
      expect(Math.abs(size - 1)).toBeLessThan(0.14);
    }
  });

  // Kasdin (1995): density ~ |2·sin(πf/r)|^(−α), which below a tenth of the rate is 1/f^α within 1 %.
  it.each([1, 2])(
    'of 1/f^%d noise falls with that slope, and with standard errors that are right',
    (alpha) => {
      const records = judgeErrors(100, { slope: alpha }, (noise) =>
        noiseSpectrum(noise.coloured(1024, alpha, 1024), 1, { highHz: 0.1, lowHz: 2.5 / 128 }),
      );
      expect(Math.abs(records.slope.bias)).toBeLessThan(0.5);
      expect(Math.abs(records.slope.size - 1)).toBeLessThan(0.25);
    },
  );

  it('names the colour', () => {
    const colour = (slope: number) =>
      noiseSpectrum(new SeededNoise(6).coloured(4000, slope, 2000), 10, { highHz: 1 }).colour;
    expect([0, 1, 2, 1.5].map(colour)).toEqual(['white', 'flicker', 'random-walk', 'other']);
  });

  it('refuses a band with too few bins', () => {
    expect(() => noiseSpectrum(new SeededNoise(1).normals(500), 1, { highHz: 0.02 })).toThrow(
      /must hold 5 bins/,
    );
  });
});
