import { describe, expect, it } from 'vitest';
import { SeededNoise } from '../signals/seeded-noise.fixture.js';
import { coverage } from './coverage.fixture.js';
import { meanInflation, meanInterval } from './mean-interval.js';

describe('interval of a mean', () => {
  // Five values with mean 3, s = √2.5: 3 ± 2.776·√0.5 (t of 4 degrees, any table).
  it('of independent values is that of the textbook', () => {
    const found = meanInterval([1, 2, 3, 4, 5], { correlation: 'independent' });
    expect(found.mean).toBe(3);
    expect(found.standardError).toBeCloseTo(Math.SQRT1_2, 12);
    expect(found.high).toBeCloseTo(3 + 2.776445 * Math.SQRT1_2, 5);
    expect(found.low).toBeCloseTo(3 - 2.776445 * Math.SQRT1_2, 5);
  });

  it('inflates the variance by the closed form of the double sum', () => {
    for (const [n, phi] of [
      [5, 0.3],
      [40, 0.9],
      [7, 0],
    ] as const) {
      let sum = 0;
      for (let i = 0; i < n; i += 1) for (let j = 0; j < n; j += 1) sum += phi ** Math.abs(i - j) / n;
      expect(meanInflation(n, phi)).toBeCloseTo(sum, 10);
    }
  });

  // Binomial scatter of 1500 trials at 95 %: 0.6 %.
  it.each([
    [12, 0.6, 0.88, 0.93],
    [30, 0, 0.93, 0.98],
    [50, 0.6, 0.92, 0.97],
    [200, 0.6, 0.925, 0.965],
    [200, 0.9, 0.91, 0.965],
    [1000, 0.9, 0.93, 0.965],
  ])(
    'holds the truth as often as it says: %d values, φ = %d',
    (count, phi, least, most) => {
      const share = coverage(1500, (noise) => meanInterval(noise.autoregressive(count, phi)));
      expect(share).toBeGreaterThan(least);
      expect(share).toBeLessThan(most);
    },
    30_000,
  );

  // n·(1 − φ)/(1 + φ) for long series (closed form); the correction of r₁ shows in short ones.
  it('counts as many effective values as the closed form says', () => {
    const long = meanInterval(new SeededNoise(2).autoregressive(20_000, 0.8));
    expect(Math.abs((long.effectiveCount * 9) / 20_000 - 1)).toBeLessThan(0.06);
    const short = Array.from({ length: 800 }, (_, seed) =>
      meanInterval(new SeededNoise(seed).autoregressive(40, 0.5)),
    );
    const middle = short.map((found) => found.effectiveCount).sort((a, b) => a - b)[400]!;
    expect(Math.abs((middle * meanInflation(40, 0.5)) / 40 - 1)).toBeLessThan(0.08);
  });

  it('by blocks holds the truth as often as it says, for a correlation of any shape', () => {
    // A moving average of 12 is not of first order.
    const share = coverage(1500, (noise) => {
      const raw = noise.normals(611);
      const smooth = Array.from({ length: 600 }, (_, i) => raw.slice(i, i + 12).reduce((a, b) => a + b));
      return meanInterval(smooth, { correlation: 'blocks' });
    });
    expect(share).toBeGreaterThan(0.92);
    expect(share).toBeLessThan(0.97);
  }, 30_000);

  it('taking correlated values for independent would hold it far too seldom', () => {
    const share = coverage(500, (noise) =>
      meanInterval(noise.autoregressive(200, 0.9), { correlation: 'independent' }),
    );
    expect(share).toBeLessThan(0.5);
  });

  it('of values that do not differ has no width', () => {
    const { low, high } = meanInterval(new Float64Array(10).fill(2));
    expect([low, high]).toEqual([2, 2]);
  });

  it('refuses what has no interval', () => {
    expect(() => meanInterval([1])).toThrow(/at least 2/);
    expect(() => meanInterval([1, 2], { correlation: 'blocks' })).toThrow(/at least 40/);
    expect(() => meanInterval([1, NaN])).toThrow(/values\[1\]/);
    expect(() => meanInterval([1, 2], { confidence: 1 })).toThrow(/confidence/);
  });
});
