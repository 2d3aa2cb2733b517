import { boundedRateLaw } from './bounded-rate-law.js';
import { constrainedLaw } from './constrained-law.js';
import { discreteLaw } from './discrete-law.js';
import { gradientLaw } from './gradient-law.js';
import { leastSquaresLaw } from './least-squares-law.js';
import { newtonLaw } from './newton-law.js';
import { perturbObserveLaw } from './perturb-observe-law.js';
import { slopeLaw } from './slope-law.js';
import { spsaLaw } from './spsa-law.js';

/** Every seeking law by its id, in the order of the palette. `wideSearch` goes round any of them. */
export const seekingLaws = {
  gradient: gradientLaw,
  discrete: discreteLaw,
  newton: newtonLaw,
  'least-squares': leastSquaresLaw,
  'bounded-rate': boundedRateLaw,
  slope: slopeLaw,
  constrained: constrainedLaw,
  spsa: spsaLaw,
  'perturb-observe': perturbObserveLaw,
} as const;

export type SeekingLawId = keyof typeof seekingLaws;
