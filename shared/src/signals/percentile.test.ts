import { describe, expect, it } from 'vitest';
import { percentile, type PercentileType } from './percentile.js';
import { RunningPercentile } from './running-percentile.js';
import { SeededNoise } from './seeded-noise.fixture.js';
import { SlidingPercentile } from './sliding-percentile.js';

const data = [3.1, -2.0, 7.7, 1.5, 9.2, 4.4, -0.3, 6.0, 2.2, 5.9, 8.1];
const percents = [0, 10, 25, 50, 62, 90, 100];

describe('percentile', () => {
  // NumPy (with SciPy 1.17.1) percentile, methods interpolated_inverted_cdf, hazen, weibull, linear,
  // median_unbiased, normal_unbiased, which its documentation numbers 4 to 9 after Hyndman and Fan (1996).
  it.each<[PercentileType, number[]]>([
    [4, [-2.0, -1.83, 1.05, 3.75, 5.63, 8.06, 9.2]],
    [5, [-2.0, -0.98, 1.675, 4.4, 5.932, 8.54, 9.2]],
    [6, [-2.0, -1.66, 1.5, 4.4, 5.944, 8.98, 9.2]],
    [7, [-2.0, -0.3, 1.85, 4.4, 5.92, 8.1, 9.2]],
    [8, [-2.0, -1.2066666666666666, 1.6166666666666667, 4.4, 5.936, 8.686666666666666, 9.2]],
    [9, [-2.0, -1.15, 1.63125, 4.4, 5.935, 8.65, 9.2]],
  ])('of definition %d agrees with an independent implementation', (type, expected) => {
    percents.forEach((percent, i) => expect(percentile(data, percent, type)).toBeCloseTo(expected[i]!, 12));
  });

  it('is NaN of nothing and of a bad trace, and refuses a percentage beyond 100', () => {
    expect(percentile([], 50)).toBeNaN();
    expect(percentile([1, NaN, 2], 50)).toBeNaN();
    expect(percentile([1, -Infinity, 2], 50)).toBeNaN();
    expect(() => percentile([1], 101)).toThrow(/percent/);
  });
});

describe('running percentile', () => {
  // The worked example of Jain and Chlamtac (1985), table I: median of 20 values, from memory: 4.44.
  it('gives the worked example of its authors', () => {
    const values = [
      0.02, 0.15, 0.74, 3.39, 0.83, 22.37, 10.15, 15.43, 38.62, 15.92, 34.6, 10.28, 1.47, 0.4, 0.05, 11.39,
      0.27, 0.42, 0.09, 11.37,
    ];
    const median = new RunningPercentile(50);
    for (const value of values) median.add(value);
    expect(median.value).toBeCloseTo(4.44, 2);
  });

  // Quantiles of the normal distribution: 1.2816 at 90 %, −0.6745 at 25 % (tables). Standard error
  // √(p(1−p)/n)/φ(z) = 0.0054, 0.0043.
  it.each([
    [90, 1.2816],
    [25, -0.6745],
  ])('comes near the %d %% point of normal values', (percent, expected) => {
    const noise = new SeededNoise(percent);
    const estimate = new RunningPercentile(percent);
    for (let i = 0; i < 100_000; i += 1) estimate.add(noise.normal());
    expect(Math.abs(estimate.value - expected)).toBeLessThan(0.025);
  });

  it('is exact up to five values', () => {
    const estimate = new RunningPercentile(50);
    expect(estimate.value).toBeNaN();
    for (const value of [5, 1, 4]) estimate.add(value);
    expect(estimate.value).toBe(4);
  });
});

it('a sliding percentile forgets what has left its window', () => {
  const window = new SlidingPercentile(3);
  for (const value of [100, 1, NaN, 2, 3]) window.add(value);
  expect(window.percentile(100)).toBe(3);
  expect(window.percentile(50)).toBe(2);
});
