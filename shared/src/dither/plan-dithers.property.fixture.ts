import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { DomainError } from '../errors/domain-error.js';
import { planDithers, type DitherPlan, type DitherRequest } from './plan-dithers.js';

const requests: fc.Arbitrary<DitherRequest> = fc
  .record({
    actuators: fc.integer({ min: 1, max: 16 }),
    law: fc.constantFrom('gradient' as const, 'newton' as const),
    scanMs: fc.integer({ min: 1, max: 2000 }),
    scansPerPeriodMin: fc.integer({ min: 4, max: 40 }),
    /** Steps of 1/window in the range of dithers. */
    steps: fc.integer({ min: 1, max: 1200 }),
    slowest: fc.double({ min: 0.02, max: 0.6, noNaN: true }),
    apart: fc.integer({ min: 1, max: 3 }),
    hasWindow: fc.boolean(),
    bands: fc.array(
      fc.tuple(fc.double({ min: 0, max: 1, noNaN: true }), fc.double({ min: 0.001, max: 0.05, noNaN: true })),
      {
        maxLength: 3,
      },
    ),
  })
  .map(({ scanMs, steps, slowest, apart, hasWindow, bands, ...rest }) => {
    const scanS = scanMs / 1000;
    const highestHz = 1 / (scanS * rest.scansPerPeriodMin);
    const windowScans = steps * rest.scansPerPeriodMin;
    return {
      ...rest,
      scanS,
      highestHz,
      lowestHz: slowest * highestHz,
      apartHz: apart / (windowScans * scanS),
      windowS: hasWindow ? windowScans * scanS : null,
      forbidden: bands.map(([from, width]) => ({
        fromHz: from * highestHz,
        toHz: (from + width) * highestHz,
      })),
    };
  });

/** The conditions over again, written out plainly and in Hz. */
function checkPlan(plan: DitherPlan, request: DitherRequest): void {
  const f = plan.frequenciesHz;
  const scanHz = 1 / request.scanS;
  const seen = (hz: number) => Math.abs(hz - scanHz * Math.round(hz / scanHz));
  const demodulated = [...f];
  const others = f.map((hz) => 3 * hz);
  f.forEach((hz, i) => {
    const products = [2 * hz, ...f.slice(0, i).flatMap((other) => [hz + other, Math.abs(hz - other)])];
    (request.law === 'newton' ? demodulated : others).push(...products);
  });
  const rounding = 1e-9 * scanHz;
  const least = request.apartHz - rounding;
  const distances = demodulated.flatMap((hz, i) => [
    seen(hz),
    ...[...demodulated.slice(0, i), ...others].map((other) => Math.abs(seen(hz) - seen(other))),
  ]);
  expect(Math.min(...distances)).toBeGreaterThanOrEqual(least);
  expect(plan.apartHz).toBeCloseTo(Math.min(...distances), 9);
  const touched = demodulated.filter((hz) =>
    (request.forbidden ?? []).some(
      ({ fromHz, toHz }) => seen(hz) > fromHz + rounding && seen(hz) < toHz - rounding,
    ),
  );
  expect(touched).toEqual([]);
  expect(f).toHaveLength(request.actuators);
  expect(Math.min(...f)).toBeGreaterThanOrEqual(request.lowestHz - rounding);
  expect(Math.max(...f)).toBeLessThanOrEqual(request.highestHz + rounding);
  for (const hz of f) {
    expect(1 / (hz * request.scanS)).toBeGreaterThanOrEqual((request.scansPerPeriodMin ?? 10) * (1 - 1e-9));
    expect(Math.abs(hz * plan.windowS - Math.round(hz * plan.windowS))).toBeLessThan(1e-6);
  }
  if (request.windowS !== null) expect(plan.windowS).toBeCloseTo(request.windowS ?? NaN, 6);
}

export function describeDitherPlans(numRuns: number): void {
  describe('every plan', () => {
    it('meets its own conditions, and where there is none, says what to change', () => {
      let planned = 0;
      fc.assert(
        fc.property(requests, (request) => {
          let plan: DitherPlan;
          try {
            plan = planDithers(request);
          } catch (error) {
            expect(error).toBeInstanceOf(DomainError);
            expect((error as DomainError).code).toBe('analysis.invalid-input');
            expect((error as DomainError).details.length).toBeGreaterThan(0);
            return;
          }
          planned += 1;
          checkPlan(plan, request);
          if (planned % 50 === 0) expect(planDithers(request)).toEqual(plan);
        }),
        { numRuns },
      );
      expect(planned).toBeGreaterThan(numRuns / 4);
    }, 3_600_000);
  });
}
