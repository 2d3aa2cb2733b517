import fc from 'fast-check';
import { expect, it } from 'vitest';
import { bandPower } from './band-power.js';
import { createFirstOrderFilter, stepLowPass, stepWashout } from './first-order-filter.js';
import { createSecondOrderFilter, secondOrderKinds, stepSecondOrderFilter } from './second-order-filter.js';

const reading = fc.oneof(
  { weight: 6, arbitrary: fc.double({ min: -1, max: 1, noNaN: true }) },
  { weight: 1, arbitrary: fc.constantFrom(NaN, Infinity, -Infinity) },
);
const readings = fc.array(reading, { maxLength: 100 });

/** Laws of filters and spectra, for any input. */
export function describeSignalLaws(numRuns: number, timeoutMs: number): void {
  const settings = fc.record({
    kind: fc.constantFrom(...secondOrderKinds),
    frequencyHz: fc.double({ min: 1e-3, max: 0.499, noNaN: true }),
    quality: fc.double({ min: 0.05, max: 50, noNaN: true }),
    periodS: fc.constant(1),
  });

  it(
    'a second-order filter stays bounded and finite, with holes in its input',
    () => {
      fc.assert(
        fc.property(settings, readings, (given, values) => {
          const state = createSecondOrderFilter(given);
          for (const value of values) {
            const output = stepSecondOrderFilter(state, value);
            expect(Number.isFinite(output)).toBe(Number.isFinite(value));
            // Largest possible answer to a bounded input: the sum of the impulse response, some Q.
            if (Number.isFinite(value)) expect(Math.abs(output)).toBeLessThan(10 + 4 * given.quality);
          }
          expect(Number.isFinite(state.first) && Number.isFinite(state.second)).toBe(true);
        }),
        { numRuns },
      );
    },
    timeoutMs,
  );

  it(
    'a low-pass with a corner below the step rate stays within its input, and with the washout makes it up again',
    () => {
      fc.assert(
        fc.property(readings, fc.double({ min: 0, max: 2, noNaN: true }), (values, corner) => {
          const [low, high] = [createFirstOrderFilter(), createFirstOrderFilter()];
          for (const value of values) {
            const slow = stepLowPass(low, value, corner, 1);
            const fast = stepWashout(high, value, corner, 1);
            expect([slow, fast].every(Number.isFinite)).toBe(Number.isFinite(value));
            if (!Number.isFinite(value)) continue;
            expect(Math.abs(slow)).toBeLessThanOrEqual(1 + 1e-12);
            expect(slow + fast).toBeCloseTo(value, 12);
          }
        }),
        { numRuns },
      );
    },
    timeoutMs,
  );

  it(
    'band powers of two bands that touch sum up to the mean square (Parseval)',
    () => {
      const series = fc.array(fc.double({ min: -1e3, max: 1e3, noNaN: true }), {
        minLength: 2,
        maxLength: 50,
      });
      fc.assert(
        fc.property(series, fc.double({ min: 0, max: 1, noNaN: true }), (values, share) => {
          const given = { window: 'rectangular', isMeanRemoved: false } as const;
          const low = bandPower(values, 10, 0, 5 * share, given);
          const high = bandPower(values, 10, 5 * share, 5, given);
          const meanSquare = values.reduce((sum, value) => sum + value * value, 0) / values.length;
          expect(Math.abs(low + high - meanSquare)).toBeLessThanOrEqual(1e-9 * meanSquare + 1e-18);
        }),
        { numRuns },
      );
    },
    timeoutMs,
  );
}
