import { describe, expect, it } from 'vitest';
import { autocorrelation, integratedAutocorrelationTime } from './autocorrelation.js';
import { certifiedSets } from './nist-univariate.fixture.js';
import { SeededNoise } from './seeded-noise.fixture.js';
import { tracePeak } from './trace-peak.js';

describe('autocorrelation', () => {
  // NIST StRD, certified lag-1 autocorrelation.
  it.each(certifiedSets)('of $name is the certified one at lag 1', ({ values, lag1 }) => {
    expect(Math.abs(autocorrelation(values, 1)[1]! / lag1 - 1)).toBeLessThan(1e-7);
  });

  it('falls as φ^k for a first-order autoregression (theory)', () => {
    const r = autocorrelation(new SeededNoise(5).autoregressive(200_000, 0.8), 4);
    [1, 0.8, 0.64, 0.512, 0.4096].forEach((rho, k) => expect(Math.abs(r[k]! - rho)).toBeLessThan(0.01));
  });
});

describe('integrated autocorrelation time', () => {
  // τ = (1 + φ)/(1 − φ) for a first-order autoregression (closed form); −0.4 as one that alternates.
  it.each([-0.4, 0, 0.5, 0.9])('of a first-order autoregression with φ = %d', (phi) => {
    const time = integratedAutocorrelationTime(new SeededNoise(11).autoregressive(100_000, phi));
    const expected = (1 + phi) / (1 - phi);
    expect(Math.abs(time.samples - expected)).toBeLessThan(Math.max(4 * time.standardError, 0.02 * expected));
  });

  it('is 1 of values that do not differ, and never 0 or below', () => {
    expect(integratedAutocorrelationTime([2, 2, 2]).samples).toBe(1);
    expect(integratedAutocorrelationTime([1, -1, 1, -1, 1, -1]).samples).toBeGreaterThan(0);
    expect(() => integratedAutocorrelationTime([1])).toThrow(/at least 2/);
  });
});

describe('peak of a trace', () => {
  it('is exact for a parabola between samples', () => {
    const peak = tracePeak(Array.from({ length: 10 }, (_, i) => 5 - 2 * (i - 4.3) ** 2));
    expect(peak?.position).toBeCloseTo(4.3, 12);
    expect(peak?.height).toBeCloseTo(5, 12);
    expect(peak?.curvature).toBeCloseTo(-4, 12);
  });

  it('is the sample at an end or on a plateau, and none of a bad trace', () => {
    expect(tracePeak([3, 2, 1])).toEqual({ position: 0, height: 3, curvature: 0 });
    expect(tracePeak([1, 1, 1])).toEqual({ position: 0, height: 1, curvature: 0 });
    expect(tracePeak([1, NaN, 2])).toBeNull();
    expect(tracePeak([])).toBeNull();
  });
});
