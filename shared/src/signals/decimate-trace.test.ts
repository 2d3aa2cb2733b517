import fc from 'fast-check';
import { expect, it } from 'vitest';
import { decimateTrace } from './decimate-trace.js';

it('says in its example what it does', () => {
  expect(decimateTrace([1, 9, 2, 3, 0, 4], 4)).toEqual({ points: [1, 9, 0, 4], places: [0, 1, 4, 5] });
});

it('leaves a short trace as it is', () => {
  expect(decimateTrace(Float32Array.of(1, 2, 3), 3)).toEqual({ points: [1, 2, 3], places: null });
  expect(decimateTrace([], 2)).toEqual({ points: [], places: null });
});

it('keeps the extremes of every stretch, in order, and no more points than asked', () => {
  const values = fc.array(fc.double({ noNaN: true, min: -9, max: 9 }), { minLength: 1, maxLength: 200 });
  fc.assert(
    fc.property(values, fc.integer({ min: 2, max: 40 }), (points, most) => {
      const thin = decimateTrace(points, most);
      expect(thin.points.length).toBeLessThanOrEqual(most);
      expect(Math.min(...thin.points)).toBe(Math.min(...points));
      expect(Math.max(...thin.points)).toBe(Math.max(...points));
      thin.places?.forEach((place, i) => {
        expect(points[place]).toBe(thin.points[i]);
        expect(place).toBeGreaterThan(thin.places?.[i - 1] ?? -1);
      });
    }),
  );
});
