import { describe, expect, it } from 'vitest';
import { countPeaks } from './count-peaks.fixture.js';
import { findHills, lineNeighbours } from './hills.js';

describe('hills of a line', () => {
  it.each([
    [[5], 1],
    [[5, 5, 5], 1],
    [[1, 2, 3], 1],
    [[3, 2, 1], 1],
    [[3, 1, 3], 2],
    [[0, 3, 1, 2, 0], 2],
    [[0, 3, 3, 0], 1],
    [[0, 2, 2, 5], 1],
    [[0, 3, 1, 3, 0], 2],
    [[0, 3, 2.6, 2.9, 0], 1],
    [[4, 0, 3, 1, 5, 2, 2.4], 3],
  ])('%j has %d above a prominence of 0.5, by walking and by flooding', (heights, expected) => {
    expect(countPeaks(heights, 0.5)).toBe(expected);
    const hills = findHills(heights, lineNeighbours(heights.length));
    expect(hills.filter(({ prominence }, rank) => rank === 0 || prominence > 0.5).length).toBe(expected);
  });
});
