import fc from 'fast-check';
import { expect, it } from 'vitest';
import { meanInterval } from './mean-interval.js';
import { pairedDifference, trialOrder } from './paired-difference.js';
import { studentProbability, studentQuantile } from './student-t.js';
import { TrackingMeter } from './tracking-meter.js';

const finite = fc.double({ min: -1e3, max: 1e3, noNaN: true });

/** Laws of metrics, for any data. */
export function describeMetricLaws(numRuns: number, timeoutMs: number): void {
  it(
    'a tracking meter lets no bad sample in, and its efficiency is above 0 and at most 1 where the best is the best',
    () => {
      const number = fc.oneof(
        { weight: 5, arbitrary: fc.double({ min: 0.1, max: 1, noNaN: true }) },
        fc.constantFrom(NaN, Infinity),
      );
      const sample = fc.tuple(number, number, fc.double({ min: 1e-3, max: 10, noNaN: true }));
      fc.assert(
        fc.property(fc.array(sample, { minLength: 1, maxLength: 40 }), (samples) => {
          const meter = new TrackingMeter('maximise');
          for (const [share, best, dtS] of samples) meter.add(share * best, best, dtS);
          const whole = samples.reduce((sum, [, , dtS]) => sum + dtS, 0);
          expect(meter.countedS + meter.leftOutS).toBeCloseTo(whole, 6);
          if (meter.countedS === 0) return;
          expect(meter.efficiency).toBeLessThanOrEqual(1 + 1e-12);
          expect(meter.efficiency).toBeGreaterThan(0);
          expect(meter.regret).toBeGreaterThanOrEqual(-1e-9);
        }),
        { numRuns },
      );
    },
    timeoutMs,
  );

  it(
    "Student's quantile and probability undo each other, degrees whole or not",
    () => {
      const probability = fc.double({ min: 0.001, max: 0.999, noNaN: true });
      fc.assert(
        fc.property(probability, fc.double({ min: 0.5, max: 500, noNaN: true }), (p, freedom) => {
          expect(studentProbability(studentQuantile(p, freedom), freedom)).toBeCloseTo(p, 9);
        }),
        { numRuns },
      );
    },
    timeoutMs,
  );

  it(
    'an interval holds its mean, moves and scales with the data, and is wider the surer it must be',
    () => {
      const data = fc.array(finite, { minLength: 2, maxLength: 30 });
      fc.assert(
        fc.property(data, finite, fc.double({ min: 0.1, max: 10, noNaN: true }), (values, shift, factor) => {
          const found = meanInterval(values);
          const moved = meanInterval(values.map((value) => factor * value + shift));
          const slack = 1e-6 * (1 + factor) * (1 + Math.max(...values.map(Math.abs), Math.abs(shift)));
          expect(found.low).toBeLessThanOrEqual(found.mean);
          expect(found.high).toBeGreaterThanOrEqual(found.mean);
          expect(Math.abs(moved.mean - (factor * found.mean + shift))).toBeLessThan(slack);
          const surer = meanInterval(values, { confidence: 0.99 });
          expect(surer.low).toBeLessThanOrEqual(found.low);
          expect(surer.high).toBeGreaterThanOrEqual(found.high);
          expect(found.effectiveCount).toBeLessThanOrEqual(values.length * (1 + 1e-12));
        }),
        { numRuns },
      );
    },
    timeoutMs,
  );

  it(
    'a paired difference is free of any drift in a straight line',
    () => {
      fc.assert(
        fc.property(fc.integer({ min: 2, max: 8 }), finite, finite, finite, (blocks, start, drift, gain) => {
          const legs = trialOrder(blocks).map((arm, k) => ({
            arm,
            mean: start + drift * k + (arm === 'seeking' ? gain : 0),
          }));
          const slack = 1e-9 * (1 + Math.abs(start) + Math.abs(drift) + Math.abs(gain));
          for (const block of pairedDifference(legs).blocks)
            expect(Math.abs(block - gain)).toBeLessThan(slack);
        }),
        { numRuns },
      );
    },
    timeoutMs,
  );
}
