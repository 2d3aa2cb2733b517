import { seekingLaws, type SeekingLawId } from '@cresthold/shared';
import type { SizedBench } from './sized-bench.js';
import type { SizedBenchSeek } from './seek-on-bench.js';

export const lawIds = Object.keys(seekingLaws) as SeekingLawId[];

/** The walk of perturb-and-observe costs at worst (grid off by half a step) 9/7 of its mean; others a tenth more by what is no parabola. */
const rippleMost = (lawId: SeekingLawId) => (lawId === 'perturb-observe' ? 9 / 7 : 1.1);
/** Share of the allowed loss that the sizing lets noise add. */
const noiseShare = 0.25;

/** Most that the end may lose: predicted ripple, scatter and trail, and what the plant's own ripple costs. */
export function mostLoss(
  bench: SizedBench,
  lawId: SeekingLawId,
  { size, identified }: SizedBenchSeek,
): number {
  const { rippleLoss, driftLoss } = size.predicted;
  const own = (bench.ripples ?? []).reduce(
    (sum, { amplitude }, i) => sum + ((identified.plant.curvature[i]?.[i] ?? NaN) * amplitude ** 2) / 4,
    0,
  );
  return rippleMost(lawId) * rippleLoss + noiseShare * bench.lossAllowed + (driftLoss ?? 0) + own;
}
