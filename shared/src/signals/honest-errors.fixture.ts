import type { Estimate } from './estimate.js';
import { SeededNoise } from './seeded-noise.fixture.js';

/** How the errors of an estimate compare with the standard errors that it gave itself. */
export interface ErrorRecord {
  /** Mean of (value − truth)/standardError: 0 without bias. */
  bias: number;
  /** Root mean square of the same: 1 where the standard errors are right. */
  size: number;
}

/** Repeats a measurement with seeded noise and compares each named estimate with the truth. */
export function judgeErrors<Name extends string>(
  trials: number,
  truths: Record<Name, number>,
  measure: (noise: SeededNoise) => Readonly<Record<NoInfer<Name>, Estimate>>,
): Record<Name, ErrorRecord> {
  const names = Object.keys(truths) as Name[];
  const scores = new Map<Name, number[]>(names.map((name) => [name, []]));
  for (let seed = 1; seed <= trials; seed += 1) {
    const measured = measure(new SeededNoise(seed));
    for (const name of names) {
      scores.get(name)!.push((measured[name].value - truths[name]) / measured[name].standardError);
    }
  }
  const records = names.map((name) => {
    const list = scores.get(name)!;
    const bias = list.reduce((sum, score) => sum + score, 0) / trials;
    const size = Math.sqrt(list.reduce((sum, score) => sum + score * score, 0) / trials);
    return [name, { bias, size }] as const;
  });
  return Object.fromEntries(records) as Record<Name, ErrorRecord>;
}
