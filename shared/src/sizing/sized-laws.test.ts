import { describe, expect, it } from 'vitest';
import { lawIds, lossAllowed, mostLoss, plantOf } from './sized-laws.cases.fixture.js';
import { identifySizeSeek } from './sized-laws.fixture.js';

describe.each(lawIds)('%s, identified and sized from noisy data', (lawId) => {
  it.each([
    [0, 0, 0.05],
    [0, 0.3, 0.02],
    [1, 0.3, 0.02],
  ])('ends within the predicted loss (shape %i, time constant %d s, noise %d)', (shape, tau, noise) => {
    const { size, endLoss } = identifySizeSeek(lawId, plantOf(shape, tau, noise), { lossAllowed }, 1);
    expect(endLoss).toBeLessThan(mostLoss(lawId, size.predicted.rippleLoss));
    expect(endLoss).toBeGreaterThan(0.25 * size.predicted.rippleLoss);
  });
});
