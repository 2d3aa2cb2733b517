import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  guardCases,
  guardedAt,
  guardPeriodS,
  guardRequests,
  roundingOf,
  testLimit,
} from './guard.fixture.js';
import {
  createGuardedActuator,
  freshSlew,
  guardRequest,
  hasIntervened,
  isAppliedAtRest,
  isInsideRange,
  slewAllowance,
  takeOver,
} from './guard.js';

const shares = fc.double({ min: 0, max: 1, noNaN: true });
const sequences = fc.array(guardRequests, { minLength: 1, maxLength: 60 });
const countedS = (dtS: number) => (dtS > 0 ? Math.min(dtS, 2 * guardPeriodS) : 0);

describe('the guard, whatever it is asked for', () => {
  it('applies only finite values inside the range, once the actuator was inside', () => {
    fc.assert(
      fc.property(guardCases, shares, sequences, (guardCase, share, requests) => {
        const guarded = guardedAt(guardCase, share);
        for (const { base, dither, dtS } of requests) {
          guardRequest(guarded, base, dither, dtS);
          expect(isInsideRange(guardCase.limit, guarded.applied)).toBe(true);
        }
      }),
      { numRuns: 400 },
    );
  });

  it('moves at most slew times dt in a scan, and a whole grid step where the grid is coarser', () => {
    fc.assert(
      fc.property(guardCases, shares, sequences, ({ limit, grid }, share, requests) => {
        const guarded = guardedAt({ limit, grid }, share);
        for (const { base, dither, dtS } of requests) {
          const before = guarded.applied;
          guardRequest(guarded, base, dither, dtS);
          const allowed = Math.max(limit.slewPerS * countedS(dtS), grid.step);
          const moved = Math.abs(guarded.applied - before);
          expect(moved).toBeLessThanOrEqual(allowed + roundingOf(before, guarded.applied));
        }
      }),
      { numRuns: 400 },
    );
  });

  it('travels over any sequence no further than the slew limit allows in that time', () => {
    fc.assert(
      fc.property(guardCases, shares, sequences, ({ limit, grid }, share, requests) => {
        const guarded = guardedAt({ limit, grid }, share);
        let travelled = 0;
        let allowed = 0;
        for (const { base, dither, dtS } of requests) {
          const before = guarded.applied;
          guardRequest(guarded, base, dither, dtS);
          travelled += Math.abs(guarded.applied - before);
          allowed += limit.slewPerS * countedS(dtS);
          expect(travelled).toBeLessThanOrEqual(allowed + roundingOf(before, travelled) * requests.length);
        }
      }),
      { numRuns: 400 },
    );
  });

  it('ends on the grid or does not move', () => {
    fc.assert(
      fc.property(guardCases, shares, sequences, ({ limit, grid }, share, requests) => {
        fc.pre(grid.step > 0);
        const guarded = guardedAt({ limit, grid }, share);
        for (const { base, dither, dtS } of requests) {
          const before = guarded.applied;
          guardRequest(guarded, base, dither, dtS);
          if (guarded.applied === before) continue;
          const steps = (guarded.applied - grid.origin) / grid.step;
          expect(Math.abs(steps - Math.round(steps))).toBeLessThanOrEqual(2e-6);
        }
      }),
      { numRuns: 400 },
    );
  });

  it('adds no more dither than its amplitude, where the slew limit leaves room for it', () => {
    fc.assert(
      fc.property(guardCases, shares, guardRequests, ({ limit }, share, { base, dither }) => {
        fc.pre(Number.isFinite(base) && Number.isFinite(dither));
        const fast = { ...limit, slewPerS: 1e6 };
        const guarded = guardedAt({ limit: fast, grid: { step: 0, origin: 0 } }, share);
        guardRequest(guarded, base, dither, guardPeriodS);
        const heldBase = Math.min(Math.max(base, limit.min), limit.max);
        const part = Math.abs(guarded.applied - heldBase);
        expect(part).toBeLessThanOrEqual(limit.ditherAmplitudeMax + roundingOf(heldBase));
      }),
      { numRuns: 400 },
    );
  });

  it('lets a legal request through as it is, and again', () => {
    fc.assert(
      fc.property(guardCases, shares, shares, shares, ({ limit }, share, towards, part) => {
        const guarded = guardedAt({ limit, grid: { step: 0, origin: 0 } }, share);
        const reach = freshSlew(guarded, guardPeriodS) * (2 * towards - 1);
        const goal = Math.min(Math.max(guarded.applied + reach * 0.999, limit.min), limit.max);
        const dither = Math.min(limit.ditherAmplitudeMax, goal - limit.min) * part;
        const wanted = goal - dither + dither;
        for (let pass = 0; pass < 2; pass++) {
          expect(guardRequest(guarded, goal - dither, dither, guardPeriodS)).toBe(true);
          expect(guarded.applied).toBe(Math.min(Math.max(wanted, limit.min), limit.max));
        }
        expect(hasIntervened(guarded, 'slew') || hasIntervened(guarded, 'dither')).toBe(false);
      }),
      { numRuns: 400 },
    );
  });

  it('comes in from outside without ever going further out, and then stays in', () => {
    const outside = fc.double({ min: 0.001, max: 500, noNaN: true });
    fc.assert(
      fc.property(guardCases, outside, fc.boolean(), sequences, ({ limit, grid }, by, isAbove, requests) => {
        const guarded = createGuardedActuator(limit, grid, guardPeriodS);
        takeOver(guarded, isAbove ? limit.max + by : limit.min - by);
        const distance = () => Math.max(0, limit.min - guarded.applied, guarded.applied - limit.max);
        for (const { base, dither, dtS } of requests) {
          const before = distance();
          guardRequest(guarded, base, dither, dtS);
          expect(distance()).toBeLessThanOrEqual(before);
        }
      }),
      { numRuns: 400 },
    );
  });

  it('reaches rest in the end, however coarse the grid and slow the actuator', () => {
    fc.assert(
      fc.property(guardCases, shares, ({ limit, grid }, share) => {
        const guarded = guardedAt({ limit, grid }, share);
        fc.pre(grid.step === 0 || (limit.max - limit.min) / grid.step > 2);
        const scans = 10 + (2 * (limit.max - limit.min + grid.step)) / (limit.slewPerS * guardPeriodS);
        fc.pre(scans < 20_000);
        for (let i = 0; i < scans && !isAppliedAtRest(guarded); i++) {
          const by = slewAllowance(guarded, guardPeriodS);
          const towards = Math.min(Math.max(guarded.rest, guarded.applied - by), guarded.applied + by);
          guardRequest(guarded, towards, 0, guardPeriodS);
          expect(hasIntervened(guarded, 'slew')).toBe(false);
        }
        expect(isAppliedAtRest(guarded)).toBe(true);
      }),
      { numRuns: 200 },
    );
  });

  it('refuses what is no number, and stays where it is', () => {
    const unusable = fc.constantFrom(NaN, Infinity, -Infinity);
    fc.assert(
      fc.property(unusable, fc.boolean(), (value, isDither) => {
        const guarded = createGuardedActuator(testLimit(), undefined, guardPeriodS);
        takeOver(guarded, 40);
        const isLet = guardRequest(guarded, isDither ? 40 : value, isDither ? value : 0, guardPeriodS);
        expect(isLet).toBe(false);
        expect(guarded.applied).toBe(40);
        expect(hasIntervened(guarded, 'non-finite')).toBe(true);
      }),
    );
  });
});
