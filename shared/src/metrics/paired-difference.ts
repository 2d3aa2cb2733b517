import { DomainError } from '../errors/domain-error.js';
import { checkSettings } from '../signals/check-settings.js';
import { meanInterval, type MeanInterval, type MeanIntervalSettings } from './mean-interval.js';

/** One of the two things that a paired trial compares. */
export type TrialArm = 'seeking' | 'baseline';

/** One stretch of a paired trial, all with one arm. */
export interface TrialLeg {
  arm: TrialArm;
  /** Mean objective over it, its settling time left out. */
  mean: number;
}

/** Legs in a block: A B B A. */
const blockLength = 4;

export interface PairedDifference extends MeanInterval {
  /** Difference of each block, seeking less baseline. */
  blocks: number[];
  /** Legs at the end that fill no block and were not used. */
  unusedLegs: number;
}

/**
 * Mean difference seeking less baseline of a paired trial in the order ABBA, with its confidence interval.
 *
 * In each block of four legs the means of both arms fall on the same middle time, so that a drift in a straight
 * line cancels exactly. A bent drift c·k² of leg number k leaves ∓2c; that cancels over two blocks where every
 * second one is BAAB. The blocks' differences are then taken as a series whose members may still resemble their
 * neighbours (see `meanInterval`).
 *
 * @param legs in their order in time, all equally long; each block of four ABBA or BAAB
 * @throws analysis.invalid-input where the order is another; analysis.too-little-data below two blocks
 * @source order: OIML R 111-1 (2004), Annex C.4.1, weighing cycles ABBA (from memory); ABBA BAAB: E. Prouhet
 * (1851), Comptes rendus 33:225
 */
export function pairedDifference(
  legs: readonly TrialLeg[],
  settings: MeanIntervalSettings = {},
): PairedDifference {
  const count = Math.floor(legs.length / blockLength);
  if (count < 2) throw new DomainError('analysis.too-little-data');
  const blocks = Array.from({ length: count }, (_, i) =>
    blockDifference(legs.slice(i * blockLength, (i + 1) * blockLength), i * blockLength),
  );
  return { ...meanInterval(blocks, settings), blocks, unusedLegs: legs.length - count * blockLength };
}

function blockDifference(block: readonly TrialLeg[], from: number): number {
  const [first, second, third, fourth] = block.map((leg) => leg.arm);
  const isAbba = first === fourth && second === third && first !== second;
  checkSettings([isAbba, `legs[${from}]`, 'must begin a block in the order ABBA or BAAB.']);
  const [a, b, c, d] = block.map((leg) => leg.mean) as [number, number, number, number];
  const outerLessInner = (a + d - b - c) / 2;
  return first === 'seeking' ? outerLessInner : -outerLessInner;
}

/**
 * Order of the legs of a paired trial: ABBA and BAAB in turn, beginning with the baseline.
 *
 * @param blocks of four legs, 1 or more
 * @example
 * trialOrder(1) // ['baseline', 'seeking', 'seeking', 'baseline']
 */
export function trialOrder(blocks: number): TrialArm[] {
  return Array.from({ length: blocks }, (_, i): TrialArm[] =>
    i % 2 === 0
      ? ['baseline', 'seeking', 'seeking', 'baseline']
      : ['seeking', 'baseline', 'baseline', 'seeking'],
  ).flat();
}
