import { describe, expect, it } from 'vitest';
import { convergenceRatio, lossRatio } from './predicted-laws.fixture.js';
import { lawIds } from './sized-laws.cases.fixture.js';

const deviation = 0.15;

describe.each(lawIds)('%s, sized, in simulation', (lawId) => {
  it.each(lawId === 'perturb-observe' ? [0] : [0, 1])(
    'converges in the predicted time to 15 % (shape %i)',
    (shape) => {
      expect(Math.abs(convergenceRatio(lawId, shape, 0.3) - 1)).toBeLessThan(deviation);
    },
  );

  it('loses what is predicted for ripple and noise to 15 %', () => {
    // What an average over all offsets of its grid gives, the walk on one grid misses by up to 2/7.
    const most = lawId === 'perturb-observe' ? 2 / 7 : deviation;
    expect(Math.abs(lossRatio(lawId, 0, 0.3, 0.1, 2) - 1)).toBeLessThan(most);
  });
});
