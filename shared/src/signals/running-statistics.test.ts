import { describe, expect, it } from 'vitest';
import { RunningStatistics } from './running-statistics.js';

const of = (values: number[]) => {
  const statistics = new RunningStatistics();
  for (const value of values) statistics.add(value);
  return statistics;
};

/** NIST Statistical Reference Datasets, univariate: NumAcc1 to NumAcc4 with their certified values. */
const numAcc = (base: number) => [
  base + 0.2,
  ...Array.from({ length: 500 }, () => [base + 0.1, base + 0.3]).flat(),
];

describe('running statistics', () => {
  it('gives the certified values of NumAcc1', () => {
    const statistics = of([10000001, 10000003, 10000002]);
    expect(statistics.mean).toBe(10000002);
    expect(statistics.standardDeviation).toBe(1);
  });

  it.each([
    [1, 1.2, 1e-12],
    [1_000_000, 1_000_000.2, 1e-9],
    [10_000_000, 10_000_000.2, 1e-7],
  ])('keeps its digits on the offset %d, where the sum of squares loses them', (base, mean, tolerance) => {
    const statistics = of(numAcc(base));
    expect(Math.abs(statistics.mean / mean - 1)).toBeLessThan(1e-14);
    expect(Math.abs(statistics.standardDeviation / 0.1 - 1)).toBeLessThan(tolerance);
  });

  it('has no mean when empty and no spread of one value', () => {
    expect(of([]).mean).toBeNaN();
    expect(of([1]).standardDeviation).toBeNaN();
  });
});
