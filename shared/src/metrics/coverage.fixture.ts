import { SeededNoise } from '../signals/seeded-noise.fixture.js';
import type { MeanInterval } from './mean-interval.js';

/** Share of seeded repetitions whose interval holds the truth 0. */
export function coverage(trials: number, measure: (noise: SeededNoise) => MeanInterval): number {
  let held = 0;
  for (let seed = 1; seed <= trials; seed += 1) {
    const { low, high } = measure(new SeededNoise(seed));
    if (low <= 0 && 0 <= high) held += 1;
  }
  return held / trials;
}
