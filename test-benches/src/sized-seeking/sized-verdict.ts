import { seekingLaws, type SeekingLawId } from '@cresthold/shared';
import { seekOnBench, type SizedBenchSeek } from './seek-on-bench.js';
import type { SizedBench } from './sized-bench.js';

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

/** One law on one bench, over several seeds; losses are means, in the unit of the objective. */
export interface SizedVerdict {
  endLoss: number;
  mostLoss: number;
  /** How many seeds ended within what was predicted for each. */
  within: number;
  /** Loss by the drift alone, as predicted; 0 where there is no closed form. */
  driftLoss: number;
  /** Whether the sizing said of every seed that the drift costs more than is allowed, where it does. */
  isDriftTold: boolean;
}

export function judgeSized(bench: SizedBench, lawId: SeekingLawId, seeds: readonly number[]): SizedVerdict {
  const seeks = seeds.map((seed) => seekOnBench(bench, lawId, seed));
  const mean = (of: (seek: SizedBenchSeek) => number) =>
    seeks.reduce((sum, seek) => sum + of(seek), 0) / seeks.length;
  return {
    endLoss: mean(({ endLoss }) => endLoss),
    mostLoss: mean((seek) => mostLoss(bench, lawId, seek)),
    within: seeks.filter((seek) => seek.endLoss < mostLoss(bench, lawId, seek)).length,
    driftLoss: mean(({ size }) => size.predicted.driftLoss ?? 0),
    isDriftTold: seeks.every(
      ({ size: { predicted, remarks } }) =>
        (predicted.driftLoss ?? 0) <= bench.lossAllowed ||
        remarks.some((remark) => remark.includes('drifts faster')),
    ),
  };
}

/** Laws that do not hold a bench, by its nature: for the docs, and for the test, which sees them fail. */
export const notHeld: Record<string, Partial<Record<SeekingLawId, string>>> = {
  pulser: {
    spsa: 'it tries whole steps, of which every other one is over the cliff',
    'perturb-observe': 'it walks in whole steps, of which the last is over the cliff',
  },
};
