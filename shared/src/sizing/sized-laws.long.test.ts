import { describe, expect, it } from 'vitest';
import { lawIds, lossAllowed, mostLoss, plantOf } from './sized-laws.cases.fixture.js';
import { identifySizeSeek } from './sized-laws.fixture.js';

/** The mean of five runs still scatters by as much as the allowance leaves room for; that of twenty does not. */
const seeds = Array.from({ length: 20 }, (_, index) => index + 1);

describe.each(lawIds)('%s, identified and sized from noisy data', (lawId) => {
  const grid = [0, 1].flatMap((shape) =>
    [0, 0.3, 3].flatMap((tau) => [0.002, 0.02, 0.1].map((noise) => [shape, tau, noise] as const)),
  );
  it.each(grid)(
    'ends within the predicted loss (shape %i, time constant %d s, noise %d)',
    (shape, tau, noise) => {
      const runs = seeds.map((seed) =>
        identifySizeSeek(lawId, plantOf(shape, tau, noise), { lossAllowed }, seed),
      );
      const mean = runs.reduce((sum, { endLoss }) => sum + endLoss, 0) / runs.length;
      const ripple = runs.reduce((sum, { size }) => sum + size.predicted.rippleLoss, 0) / runs.length;
      expect(mean).toBeLessThan(mostLoss(lawId, ripple));
    },
    60_000,
  );
});
