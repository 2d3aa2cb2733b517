import type { SeekingLawId } from '../seeking/seeking-laws.js';
import { seekingLaws } from '../seeking/seeking-laws.js';
import type { QuadraticPlant } from './identify-plant.fixture.js';

export const lawIds = Object.keys(seekingLaws) as SeekingLawId[];
export const lossAllowed = 0.02;

/** One actuator, and two whose effects are coupled: eigenvalues 2.28 and 0.72 (trace 3, determinant 1.64). */
export const shapes = [
  { curvature: [[0.5]], best: [1.3] },
  {
    curvature: [
      [2, 0.6],
      [0.6, 1],
    ],
    best: [0.4, -0.7],
  },
];

export function plantOf(shape: number, timeConstantS: number, noise: number): QuadraticPlant {
  return { scanS: 0.1, timeConstantS, noise, half: 3, ...shapes[shape]! };
}

/** The walk of perturb-and-observe costs at worst (grid off by half a step) 9/7 of its mean over all offsets. */
const walkWorst = 9 / 7;

/** Most that the end may cost: the predicted ripple (a twentieth for what prediction leaves out) and the noise allowance. */
export function mostLoss(lawId: SeekingLawId, rippleLoss: number): number {
  const ripple = lawId === 'perturb-observe' ? walkWorst * rippleLoss : rippleLoss;
  return 1.05 * ripple + 0.25 * lossAllowed;
}
