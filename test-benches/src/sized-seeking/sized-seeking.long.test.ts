import { describe, expect, it } from 'vitest';
import { seekOnBench } from './seek-on-bench.js';
import { sizedBenches } from './sized-benches.js';
import { lawIds, mostLoss } from './sized-seeking.fixture.js';

describe.each(sizedBenches)('the $title, identified and sized without hand tuning', (bench) => {
  it.each(lawIds)(
    '%s ends within the predicted loss, with two seeds',
    (lawId) => {
      const seeks = [1, 2].map((seed) => seekOnBench(bench, lawId, seed));
      const mean = (of: (seek: (typeof seeks)[number]) => number) =>
        seeks.reduce((sum, seek) => sum + of(seek), 0) / seeks.length;
      expect(mean(({ endLoss }) => endLoss)).toBeLessThan(mean((seek) => mostLoss(bench, lawId, seek)));
    },
    600_000,
  );
});
