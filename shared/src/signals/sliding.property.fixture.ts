import fc from 'fast-check';
import { expect, it } from 'vitest';
import { percentile, type PercentileType } from './percentile.js';
import { RunningPercentile } from './running-percentile.js';
import { SlidingPercentile } from './sliding-percentile.js';
import { SlidingStatistics } from './sliding-statistics.js';
import { traceStatistics } from './trace-statistics.js';

const finite = fc.double({ min: -1e6, max: 1e6, noNaN: true });
/** Mostly numbers, with ties, and now and then a bad one. */
const reading = fc.oneof(
  { weight: 8, arbitrary: finite },
  { weight: 3, arbitrary: fc.integer({ min: -3, max: 3 }) },
  { weight: 1, arbitrary: fc.constantFrom(NaN, Infinity, -Infinity) },
);
const readings = fc.array(reading, { maxLength: 80 });
const windowLength = fc.integer({ min: 1, max: 25 });
const close = (a: number, b: number, scale: number) => Math.abs(a - b) <= 1e-9 * scale;

/** Laws of statistics in a sliding window, for any readings. */
export function describeSlidingLaws(numRuns: number, timeoutMs: number): void {
  it(
    'a sliding window reads what a fresh computation of its values reads, after every value',
    () => {
      fc.assert(
        fc.property(windowLength, readings, (length, values) => {
          const window = new SlidingStatistics(length);
          const good: number[] = [];
          for (const value of values) {
            if (window.add(value)) good.push(value);
            const fresh = traceStatistics(good.slice(-length));
            const size = Math.max(fresh.peak, 1e-12);
            expect(window.count).toBe(fresh.count);
            if (fresh.count === 0) continue;
            expect(close(window.mean, fresh.mean, size)).toBe(true);
            expect(close(window.rms, fresh.rms, size)).toBe(true);
            expect([window.min, window.max]).toEqual([fresh.min, fresh.max]);
            if (fresh.count < 3 || fresh.standardDeviation < 1e-3 * size) continue;
            expect(close(window.standardDeviation, fresh.standardDeviation, size)).toBe(true);
            expect(close(window.skewness, fresh.skewness, 100)).toBe(true);
            expect(close(window.kurtosis, fresh.kurtosis, 1000)).toBe(true);
            expect(close(window.lag1Autocorrelation, fresh.lag1Autocorrelation, 100)).toBe(true);
          }
        }),
        { numRuns },
      );
    },
    timeoutMs,
  );

  it(
    'percentiles lie between least and greatest, rise with the percentage, and slide as computed afresh',
    () => {
      const type = fc.constantFrom<PercentileType>(4, 5, 6, 7, 8, 9);
      const percent = fc.double({ min: 0, max: 100, noNaN: true });
      fc.assert(
        fc.property(windowLength, readings, type, percent, percent, (length, values, definition, p, q) => {
          const window = new SlidingPercentile(length, definition);
          const estimate = new RunningPercentile(Math.min(Math.max(p, 1), 99));
          const good: number[] = [];
          for (const value of values) {
            if (window.add(value)) good.push(value);
            expect(estimate.add(value)).toBe(Number.isFinite(value));
          }
          if (good.length === 0) return;
          const kept = good.slice(-length);
          const low = window.percentile(Math.min(p, q));
          const high = window.percentile(Math.max(p, q));
          expect(low).toBe(percentile(kept, Math.min(p, q), definition));
          const slack = 1e-9 * Math.max(...kept.map(Math.abs));
          expect(low).toBeLessThanOrEqual(high + slack);
          expect(low).toBeGreaterThanOrEqual(Math.min(...kept) - slack);
          expect(high).toBeLessThanOrEqual(Math.max(...kept) + slack);
          expect(estimate.value).toBeGreaterThanOrEqual(Math.min(...good));
          expect(estimate.value).toBeLessThanOrEqual(Math.max(...good));
        }),
        { numRuns },
      );
    },
    timeoutMs,
  );
}
