import type { SeekingLawId } from '@cresthold/shared';
import { describe, expect, it } from 'vitest';
import { seekOnBench } from './seek-on-bench.js';
import { sizedBenches } from './sized-benches.js';
import { mostLoss } from './sized-verdict.js';

/** The laws that the plant of each bench suits; every law on every bench is in the long tests. */
const chosen: Record<string, SeekingLawId[]> = {
  burner: ['gradient'],
  coupling: ['newton', 'spsa'],
  matcher: ['newton'],
  string: ['discrete'],
  mixer: ['perturb-observe'],
  pulser: ['gradient'],
};

describe.each(sizedBenches)('the $title, identified and sized without hand tuning', (bench) => {
  it.each<SeekingLawId>(chosen[bench.title] ?? ['gradient'])(
    '%s ends within the predicted loss',
    (lawId) => {
      const seek = seekOnBench(bench, lawId, 2);
      expect(seek.endLoss).toBeLessThan(mostLoss(bench, lawId, seek));
      expect(seek.endLoss).toBeGreaterThan(0.2 * seek.size.predicted.rippleLoss);
    },
    60_000,
  );
});
