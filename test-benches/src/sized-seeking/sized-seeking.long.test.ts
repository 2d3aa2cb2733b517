import { describe, expect, it } from 'vitest';
import { sizedBenches } from './sized-benches.js';
import { judgeSized, lawIds, notHeld } from './sized-verdict.js';

const seeds = [1, 2, 3, 4, 5, 6];

describe.each(sizedBenches)('the $title, identified and sized without hand tuning', (bench) => {
  const failing = lawIds.filter((lawId) => notHeld[bench.title]?.[lawId]);
  const holding = lawIds.filter((lawId) => !failing.includes(lawId));

  it.each(holding)(
    '%s ends within the predicted loss, and says where the drift costs more than is allowed',
    (lawId) => {
      const verdict = judgeSized(bench, lawId, seeds);
      expect(verdict.endLoss).toBeLessThan(verdict.mostLoss);
      expect(verdict.isDriftTold).toBe(true);
    },
    600_000,
  );

  if (failing.length > 0) {
    it.each(failing)(
      '%s does not hold it, as the docs say',
      (lawId) => {
        const verdict = judgeSized(bench, lawId, seeds);
        expect(verdict.endLoss).toBeGreaterThan(verdict.mostLoss);
      },
      600_000,
    );
  }
});
