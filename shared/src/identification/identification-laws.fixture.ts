import fc from 'fast-check';
import { expect, it } from 'vitest';
import { DomainError } from '../errors/domain-error.js';
import type { Estimate } from '../signals/estimate.js';
import { fitPeak } from './fit-peak.js';
import { noiseSpectrum } from './noise-colour.js';
import { smoothCurve } from './smooth-curve.js';
import { fitStepResponse } from './step-response.js';
import { readSurveyCurve } from './survey-curve.js';

/** Numbers of every kind that a channel gives: smooth, equal, huge, tiny, now and then bad. */
const reading = fc.oneof(
  { weight: 6, arbitrary: fc.double({ min: -10, max: 10, noNaN: true }) },
  { weight: 3, arbitrary: fc.integer({ min: -2, max: 2 }) },
  { weight: 1, arbitrary: fc.constantFrom(1e9, -1e9, 1e-12, 0) },
);
const series = fc.array(reading, { maxLength: 40 });
const seriesWithHoles = fc.array(
  fc.oneof({ weight: 30, arbitrary: reading }, { weight: 1, arbitrary: fc.constantFrom(NaN, Infinity) }),
  { maxLength: 40 },
);

/** Runs an analysis; null where it refuses in the way that it should. */
function attempt<T>(analysis: () => T): T | null {
  try {
    return analysis();
  } catch (error) {
    expect(error).toBeInstanceOf(DomainError);
    expect((error as DomainError).code).toMatch(/^analysis\./);
    return null;
  }
}

const expectFinite = (...estimates: Estimate[]) => {
  for (const { value, standardError } of estimates) {
    expect(value).not.toBeNaN();
    expect(standardError).not.toBeLessThan(0);
  }
};

/** Identification never fails but in its own typed way, and never answers with what is no number. */
export function describeIdentificationLaws(numRuns: number, timeoutMs: number): void {
  it(
    'fits of any series give numbers or refuse with a code of the catalogue',
    () => {
      let answered = 0;
      fc.assert(
        fc.property(seriesWithHoles, fc.double({ min: -5, max: 40, noNaN: true }), (values, at) => {
          const places = values.map((_, i) => i);
          const step = attempt(() => fitStepResponse({ timesS: places, values, stepAtS: at, stepSize: 2 }));
          if (step) expectFinite(step.gain, step.timeConstantS, step.deadTimeS, step.start);
          const peak = attempt(() => fitPeak(places, values, { near: at, halfWidth: 6 }));
          if (peak) expectFinite(peak.position, peak.height, peak.curvature);
          const curve = attempt(() => smoothCurve(places, values));
          if (curve) expectFinite(curve.at(at).value, curve.at(at).slope);
          const noise = attempt(() => noiseSpectrum(values, 10, { segmentLength: 16 }));
          if (noise) expect(noise.slope.standardError).toBeGreaterThan(0);
          answered += [step, peak, curve, noise].filter((result) => result !== null).length;
        }),
        { numRuns },
      );
      expect(answered).toBeGreaterThan(numRuns / 2);
    },
    timeoutMs,
  );

  it(
    'a survey of any shape has a best place among its valid ones, and as many hills either way up',
    () => {
      fc.assert(
        fc.property(series, fc.boolean(), fc.integer({ min: 0, max: 60 }), (values, hasDown, invalid) => {
          const up = values.map((objective, i) => ({
            value: i / 3,
            objective,
            standardError: 0.1,
            isValid: i !== invalid,
          }));
          const down = hasDown ? up.map((s) => ({ ...s, objective: s.objective + 0.1 })) : [];
          const high = attempt(() => readSurveyCurve(up, down, 'maximise'));
          if (!high) {
            expect(up.some((sample) => sample.isValid)).toBe(false);
            return;
          }
          const turned = (list: typeof up) => list.map((s) => ({ ...s, objective: -s.objective }));
          const low = readSurveyCurve(turned(up), turned(down), 'minimise');
          // Plus 0 makes one of the two zeros of them.
          expect(high.hills[0]!.objective + 0).toBe(Math.max(...high.samples.map((s) => s.objective)) + 0);
          expect(low.hills.map((hill) => hill.index)).toEqual(high.hills.map((hill) => hill.index));
        }),
        { numRuns },
      );
    },
    timeoutMs,
  );
}
