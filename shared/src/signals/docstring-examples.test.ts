import { expect, it } from 'vitest';
import { bandPower } from './band-power.js';
import { percentile } from './percentile.js';
import { tracePeak } from './trace-peak.js';
import { traceStatistics } from './trace-statistics.js';

it('says in its examples what it does', () => {
  expect(traceStatistics([1, 2, 3, 4]).mean).toBe(2.5);
  expect(percentile([4, 1, 3, 2], 50)).toBe(2.5);
  expect(bandPower([1, -1, 1, -1], 4, 1, 2, { window: 'rectangular' })).toBeCloseTo(1, 12);
  expect(tracePeak([0, 3, 4, 3])).toEqual({ position: 2, height: 4, curvature: -2 });
});
