import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { ditherWithin, highestWithin, lowestWithin } from './seek-box.js';

const finite = fc.double({ min: -1e6, max: 1e6, noNaN: true });
const reach = fc.double({ min: 0, max: 1e6, noNaN: true });

describe('the box of an estimate', () => {
  it('leaves room for the dither in floating point too', () => {
    let rounded = 0;
    fc.assert(
      fc.property(finite, reach, (limit, dither) => {
        const highest = highestWithin(limit, dither);
        const lowest = lowestWithin(limit, dither);
        expect(highest + dither).toBeLessThanOrEqual(limit);
        expect(lowest - dither).toBeGreaterThanOrEqual(limit);
        expect(Math.abs(highest - (limit - dither))).toBeLessThanOrEqual(1e-9);
        if (limit - dither + dither > limit) rounded += 1;
      }),
      { numRuns: 2000 },
    );
    // Plain subtraction would have gone over the limit in these.
    expect(rounded).toBeGreaterThan(50);
  });

  it('cuts a dither that has no room', () => {
    fc.assert(
      fc.property(finite, reach, finite, (min, width, dither) => {
        const max = min + width;
        const estimate = min + width / 3;
        const cut = ditherWithin(estimate, dither, min, max);
        expect(estimate + cut).toBeGreaterThanOrEqual(min);
        expect(estimate + cut).toBeLessThanOrEqual(max);
      }),
      { numRuns: 2000 },
    );
    expect(ditherWithin(1, 0.5, 0, 2)).toBe(0.5);
  });
});
