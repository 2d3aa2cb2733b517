import { expect, it } from 'vitest';
import { benchClock } from './bench-clock.js';

it('runs at the given speed and does not count a hold-up of the bench', () => {
  let nowMs = 1000;
  const benchS = benchClock(() => nowMs, 5, 60);
  nowMs += 10;
  expect(benchS()).toBeCloseTo(0.05, 12);
  nowMs += 5000;
  expect(benchS()).toBeCloseTo(0.35, 12);
});
