import { describe, expect, it } from 'vitest';
import { guardPeriodS, testLimit } from './guard.fixture.js';
import {
  createGuardedActuator,
  guardJumpToRest,
  guardRequest,
  guardRules,
  hasIntervened,
  takeOver,
} from './guard.js';

function guardedAt(value: number, change = {}, grid = { step: 0, origin: 0 }) {
  const guarded = createGuardedActuator(testLimit(change), grid, guardPeriodS);
  takeOver(guarded, value);
  return guarded;
}

describe('guard', () => {
  it('moves nothing with the first write after taking over', () => {
    const guarded = guardedAt(37.2);
    guardRequest(guarded, 37.2, 0, guardPeriodS);
    expect(guarded.applied).toBe(37.2);
    expect([...guarded.counts]).toEqual([0, 0, 0, 0]);
  });

  it('refuses to be asked before it was taken over', () => {
    const guarded = createGuardedActuator(testLimit(), undefined, guardPeriodS);
    expect(guardRequest(guarded, 20, 0, guardPeriodS)).toBe(false);
    expect(takeOver(guarded, NaN)).toBe(false);
  });

  it('holds the range, counts and reports it', () => {
    const guarded = guardedAt(99.9);
    guardRequest(guarded, 150, 0, guardPeriodS);
    expect(guarded.applied).toBe(100);
    expect(hasIntervened(guarded, 'range')).toBe(true);
    expect(hasIntervened(guarded, 'slew')).toBe(false);
  });

  it('holds the sum of base and dither inside the range', () => {
    const guarded = guardedAt(99.9);
    guardRequest(guarded, 99.9, 3, guardPeriodS);
    expect(guarded.applied).toBe(100);
    expect(hasIntervened(guarded, 'range')).toBe(true);
  });

  it('cuts the dither to its amplitude before it looks at the slew', () => {
    const guarded = guardedAt(50, { slewPerS: 1000 });
    guardRequest(guarded, 50, -12, guardPeriodS);
    expect(guarded.applied).toBe(45);
    expect(hasIntervened(guarded, 'dither')).toBe(true);
    expect(hasIntervened(guarded, 'slew')).toBe(false);
  });

  it('forbids dither where the amplitude is 0', () => {
    const guarded = guardedAt(50, { ditherAmplitudeMax: 0 });
    guardRequest(guarded, 50, 0.1, guardPeriodS);
    expect(guarded.applied).toBe(50);
  });

  it('counts every rule that intervened in one request', () => {
    const guarded = guardedAt(0);
    guardRequest(guarded, 500, 9, guardPeriodS);
    guardRequest(guarded, NaN, 0, guardPeriodS);
    expect(guarded.applied).toBe(0.5);
    expect(Object.fromEntries(guardRules.map((rule, i) => [rule, guarded.counts[i]]))).toEqual({
      'non-finite': 1,
      range: 1,
      dither: 1,
      slew: 1,
    });
  });

  it('makes no jump after a long gap: two nominal periods count at most', () => {
    const guarded = guardedAt(0);
    guardRequest(guarded, 100, 0, 3600);
    expect(guarded.applied).toBeCloseTo(10 * 2 * guardPeriodS, 12);
  });

  it('holds still where no time has passed', () => {
    const guarded = guardedAt(10);
    for (const dtS of [0, -1, NaN]) {
      guardRequest(guarded, 100, 0, dtS);
      expect(guarded.applied).toBe(10);
    }
  });

  it('rounds to the grid, but never out of the range', () => {
    const guarded = guardedAt(
      9.8,
      { max: 9.95, rest: 1, ditherAmplitudeMax: 1, slewPerS: 1000 },
      { step: 0.1, origin: 0 },
    );
    guardRequest(guarded, 9.95, 0, guardPeriodS);
    expect(guarded.applied).toBeCloseTo(9.9, 12);
  });

  it('saves allowance where the grid is coarser than the slew limit, and goes a step now and then', () => {
    /** 10 per s × 50 ms is half a step of 1. */
    const guarded = guardedAt(0, {}, { step: 1, origin: 0 });
    const applied = Array.from({ length: 6 }, () => {
      guardRequest(guarded, 100, 0, guardPeriodS);
      return guarded.applied;
    });
    expect(applied).toEqual([0, 1, 1, 2, 2, 3]);
  });

  it('does not call the rounding of a ramp within the slew limit an intervention', () => {
    const guarded = guardedAt(0, {}, { step: 0.03, origin: 0 });
    for (let i = 1; i <= 100; i++) guardRequest(guarded, i * 0.47, 0, guardPeriodS);
    expect(guarded.applied).toBeCloseTo(47.01, 9);
    expect([...guarded.counts]).toEqual([0, 0, 0, 0]);
  });

  it('comes in at the slew limit from outside its range', () => {
    const guarded = guardedAt(-1);
    const applied = Array.from({ length: 4 }, () => {
      guardRequest(guarded, 0, 0, guardPeriodS);
      return guarded.applied;
    });
    expect(applied).toEqual([-0.5, 0, 0, 0]);
  });

  it('jumps to rest, and only there, by a stop of category 0', () => {
    const guarded = guardedAt(90, { rest: 20.04 }, { step: 0.1, origin: 0 });
    guardJumpToRest(guarded);
    expect(guarded.applied).toBeCloseTo(20, 12);
  });

  it('puts the rest value on the grid inside the range', () => {
    const guarded = guardedAt(5, { rest: 0, min: 0 }, { step: 1, origin: 0.5 });
    expect(guarded.rest).toBe(0.5);
  });

  it('does not let the rounding of the grid put the rest value outside the range', () => {
    /** 0.3 − 3 × 0.1 is −5.6e−17 in double numbers. */
    const guarded = guardedAt(5, { rest: 0, min: 0 }, { step: 0.1, origin: 0.3 });
    guardJumpToRest(guarded);
    expect(guarded.applied).toBe(0);
  });
});
