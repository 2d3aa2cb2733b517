import { describe, expect, it } from 'vitest';
import type { MomentReadings } from './moment-readings.js';
import { certifiedSets } from './nist-univariate.fixture.js';
import { RunningStatistics } from './running-statistics.js';
import { SeededNoise } from './seeded-noise.fixture.js';
import { SlidingStatistics } from './sliding-statistics.js';
import { traceStatistics } from './trace-statistics.js';

const running = (values: ArrayLike<number>) => {
  const statistics = new RunningStatistics();
  for (const value of Array.from(values)) statistics.add(value);
  return statistics;
};
/** A window that has seen other values before. */
const sliding = (values: ArrayLike<number>) => {
  const statistics = new SlidingStatistics(values.length);
  for (let i = 0; i < 777; i += 1) statistics.add(1e9 * Math.sin(i));
  for (const value of Array.from(values)) statistics.add(value);
  return statistics;
};
const ways: [string, (values: ArrayLike<number>) => MomentReadings][] = [
  ['running', running],
  ['sliding', sliding],
  ['trace', traceStatistics],
];
const relative = (value: number, reference: number) => Math.abs(value / reference - 1);

describe.each(ways)('%s statistics', (_, of) => {
  // NIST StRD, univariate: certified values, see the fixture.
  it.each(certifiedSets)('give the certified values of $name', (set) => {
    const statistics = of(set.values);
    expect(statistics.count).toBe(set.values.length);
    expect(relative(statistics.mean, set.mean)).toBeLessThan(3e-15);
    expect(relative(statistics.standardDeviation, set.standardDeviation)).toBeLessThan(set.tolerance);
    expect(relative(statistics.lag1Autocorrelation, set.lag1)).toBeLessThan(Math.max(set.tolerance, 1e-10));
  });

  // The encyclopaedia example of kurtosis 18.05 (from memory), recomputed by SciPy 1.17.1 stats.kurtosis and
  // stats.skew.
  it('tell the three definitions of kurtosis apart', () => {
    const statistics = of([0, 3, 4, 1, 2, 3, 0, 2, 1, 3, 2, 0, 2, 2, 3, 2, 5, 2, 3, 999]);
    expect(statistics.kurtosis).toBeCloseTo(18.051426543784178, 9);
    expect(statistics.kurtosis - 3).toBeCloseTo(15.051426543784178, 9);
    expect(statistics.unbiasedExcessKurtosis).toBeCloseTo(19.998428728659757, 9);
    expect(statistics.skewness).toBeCloseTo(4.129251496378207, 10);
  });

  it('give −1.2 exactly for the unbiased excess kurtosis of 1 to 10 (uniform, closed form)', () => {
    const statistics = of([1, 2, 3, 4, 5, 6, 7, 8, 9, 10]);
    expect(statistics.unbiasedExcessKurtosis).toBeCloseTo(-1.2, 12);
    expect(statistics.kurtosis).toBeCloseTo(1.7757575757575756, 12);
    expect(statistics.skewness).toBeCloseTo(0, 12);
  });

  // Of a sine: rms 1/√2, crest factor √2, kurtosis 3/2 (closed form over whole periods).
  it('give the closed forms of a sine', () => {
    const statistics = of(
      Float64Array.from({ length: 1000 }, (_, i) => Math.sin((2 * Math.PI * 5 * i) / 1000)),
    );
    expect(statistics.rms).toBeCloseTo(Math.SQRT1_2, 12);
    expect(statistics.crestFactor).toBeCloseTo(Math.SQRT2, 12);
    expect(statistics.kurtosis).toBeCloseTo(1.5, 12);
  });

  // At the quantiles (i − ½)/n of the distributions; theory: uniform 1.8, Laplace 6 (slowly, from below),
  // exponential skewness 2.
  it('near the kurtosis and skewness of known distributions', () => {
    const at = (quantile: (p: number) => number) =>
      of(Float64Array.from({ length: 20000 }, (_, i) => quantile((i + 0.5) / 20000)));
    expect(at((p) => p).kurtosis).toBeCloseTo(1.8, 6);
    const laplace = at((p) => (p < 0.5 ? Math.log(2 * p) : -Math.log(2 - 2 * p)));
    expect(Math.abs(laplace.kurtosis - 6)).toBeLessThan(0.05);
    expect(Math.abs(at((p) => -Math.log(1 - p)).skewness - 2)).toBeLessThan(0.01);
  });

  it('take the mean into rms, peak and crest factor', () => {
    const statistics = of([3, -5]);
    expect(statistics.rms).toBeCloseTo(Math.sqrt(17), 14);
    expect(statistics.peak).toBe(5);
    expect([statistics.min, statistics.max]).toEqual([-5, 3]);
    expect(statistics.standardError).toBeCloseTo(4, 14);
  });

  it('have no reading of too few values', () => {
    expect(of([1]).standardDeviation).toBeNaN();
    expect(of([1, 2, 3]).unbiasedExcessKurtosis).toBeNaN();
    expect(of([2, 2, 2]).kurtosis).toBeNaN();
    expect(of([2, 2, 2]).lag1Autocorrelation).toBeNaN();
  });
});

describe('bad values', () => {
  it.each([NaN, Infinity, -Infinity])('%d is left out of running and sliding statistics', (bad) => {
    const [a, b] = [new RunningStatistics(), new SlidingStatistics(4)];
    for (const statistics of [a, b]) {
      expect([1, bad, 3].map((value) => statistics.add(value))).toEqual([true, false, true]);
      expect([statistics.count, statistics.mean]).toEqual([2, 2]);
      statistics.clear();
      expect(statistics.mean).toBeNaN();
    }
  });

  it('make every reading of a trace bad', () => {
    expect(traceStatistics([1, NaN, 3]).mean).toBeNaN();
    expect(traceStatistics([1, Infinity, 3]).peak).toBeNaN();
    expect(traceStatistics([]).mean).toBeNaN();
  });
});

// Theory: kurtosis 3, skewness 0; standard errors √(24/n) and √(6/n) of n = 200 000 values.
it('finds the kurtosis and skewness of normal values', () => {
  const statistics = traceStatistics(new SeededNoise(21).normals(200_000));
  expect(Math.abs(statistics.kurtosis - 3)).toBeLessThan(4 * Math.sqrt(24 / 200_000));
  expect(Math.abs(statistics.unbiasedExcessKurtosis)).toBeLessThan(4 * Math.sqrt(24 / 200_000));
  expect(Math.abs(statistics.skewness)).toBeLessThan(4 * Math.sqrt(6 / 200_000));
});

it('joins running statistics as if all values had been added to one', () => {
  const values = Array.from({ length: 50 }, (_, i) => Math.sin(i * i));
  const joined = running(values.slice(0, 13));
  joined.join(running(values.slice(13)));
  const whole = traceStatistics(values);
  expect(joined.kurtosis).toBeCloseTo(whole.kurtosis, 12);
  expect(joined.skewness).toBeCloseTo(whole.skewness, 12);
  expect(joined.lag1Autocorrelation).toBeCloseTo(whole.lag1Autocorrelation, 12);
});

it('refuses a window without a length', () => {
  expect(() => new SlidingStatistics(0)).toThrow(/length: must be a whole number/);
});
