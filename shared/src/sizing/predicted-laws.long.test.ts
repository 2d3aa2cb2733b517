import { describe, expect, it } from 'vitest';
import { convergenceRatio, lossRatio } from './predicted-laws.fixture.js';
import { lawIds } from './sized-laws.cases.fixture.js';

const deviation = 0.15;

describe.each(lawIds)('%s, sized, over two decades of time constant and noise', (lawId) => {
  const most = lawId === 'perturb-observe' ? 2 / 7 : deviation;
  const shapes = lawId === 'perturb-observe' ? [0] : [0, 1];
  it.each(shapes.flatMap((shape) => [0, 0.05, 0.5, 5].map((tau) => [shape, tau] as const)))(
    'converges in the predicted time (shape %i, time constant %d s)',
    (shape, tau) => {
      expect(Math.abs(convergenceRatio(lawId, shape, tau) - 1)).toBeLessThan(deviation);
    },
    120_000,
  );

  it.each(
    shapes.flatMap((shape) =>
      [0.05, 0.5, 5].flatMap((tau) => [0.003, 0.03, 0.3].map((noise) => [shape, tau, noise] as const)),
    ),
  )(
    'loses what is predicted (shape %i, time constant %d s, noise %d)',
    (shape, tau, noise) => {
      expect(Math.abs(lossRatio(lawId, shape, tau, noise, 6) - 1)).toBeLessThan(most);
    },
    240_000,
  );
});
