import fc from 'fast-check';
import { expect, it } from 'vitest';
import { countPeaks } from './count-peaks.fixture.js';
import { findHills, gridNeighbours, lineNeighbours } from './hills.js';

const height = fc.oneof(fc.integer({ min: 0, max: 5 }), fc.double({ min: 0, max: 5, noNaN: true }));

/** Laws of hills on any map. */
export function describeHillLaws(numRuns: number, timeoutMs: number): void {
  it(
    'finds as many hills on a line as walking left and right from every top does',
    () => {
      const threshold = fc.double({ min: 0, max: 4, noNaN: true });
      fc.assert(
        fc.property(fc.array(height, { minLength: 1, maxLength: 30 }), threshold, (heights, least) => {
          const hills = findHills(heights, lineNeighbours(heights.length));
          const counted = hills.filter((hill, rank) => rank === 0 || hill.prominence > least).length;
          expect(counted).toBe(countPeaks(heights, least));
        }),
        { numRuns },
      );
    },
    timeoutMs,
  );

  it(
    'on a grid the first hill is the highest point, each top is above its surroundings, and no prominence is above the range',
    () => {
      fc.assert(
        fc.property(fc.array(height, { minLength: 20, maxLength: 20 }), (heights) => {
          const neighbours = gridNeighbours(5, 4);
          const hills = findHills(heights, neighbours);
          const [low, high] = [Math.min(...heights), Math.max(...heights)];
          expect([hills[0]?.height, hills[0]?.prominence]).toEqual([high, high - low]);
          for (const hill of hills) {
            expect(hill.height).toBe(heights[hill.index]);
            for (const i of neighbours(hill.index)) expect(heights[i]!).toBeLessThanOrEqual(hill.height);
            expect(hill.prominence).toBeLessThanOrEqual(high - low);
          }
        }),
        { numRuns },
      );
    },
    timeoutMs,
  );
}
