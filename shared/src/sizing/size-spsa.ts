import { spsaGain, spsaLaw } from '../seeking/spsa-law.js';
import type { LawPrediction, LawSize } from './law-size.types.js';
import { convergedShare } from './predict-seeking.js';
import { curvatureDoubt } from './curvature-doubt.js';
import { couplingOf, noiseShare } from './size-loops.js';
import { remarksOn } from './sizing-remarks.js';
import type { CheckedDemands, CheckedPlant } from './sizing-plant.schema.js';
import { evenTries, triedReaches, tryingMargins, type TriedReach, type Tries } from './tries.js';

/** Trials in a seek whose time is not given. */
const trialsMeant = 200;

/**
 * Sizes simultaneous perturbation by its author's guidelines: the perturbation c is the largest that the allowed
 * loss permits (that of ±c is f''c²/2 for each actuator); A is a tenth of the planned trials; the exponents are
 * 0.602 and 0.101, or 0 where the best point drifts, since a gain that fades cannot follow; and the first gain is as
 * large as the first step permits: a·f'' = 1/(2n) of the distance for n actuators, whose mean square error so falls
 * (each sees the slopes of the others as noise: E‖x₊‖² ≈ (1 − 2aλ + n·a²λ²)·‖x‖²). Noise may add a quarter of the
 * allowed loss: a step scatters by a·σ_m/(√2·c), which a constant gain turns into a variance of
 * a·σ_m²/(2c²·f''·(2 − a·f'')).
 *
 * The losses are those of the first trials; where gain and perturbation fade they become less.
 *
 * @source J. C. Spall (1998), "Implementation of the simultaneous perturbation algorithm for stochastic
 * optimization", IEEE Transactions on Aerospace and Electronic Systems 34:817–823 (from memory); step and scatter
 * derived here
 */
export function sizeSpsa(plant: CheckedPlant, demands: CheckedDemands): LawSize<'spsa'> {
  const tries = evenTries(plant);
  const reaches = triedReaches(
    plant,
    demands,
    plant.actuators.map(() => 2),
  );
  const { coupling, slowest } = couplingOf(plant.curvature);
  const scatter = reaches.map(({ amplitude }) => tries.meanNoise / (Math.SQRT2 * amplitude));
  const byNoise = (noiseShare * demands.lossAllowed) / lossPerShare(reaches, scatter);
  const byTrials = 1 / (2 * plant.actuators.length * coupling * (1 + 2 * curvatureDoubt(plant)));
  const share = Math.min(byTrials, byNoise);
  const trialS = 2 * tries.dwellS;
  const trials = Math.max(10, Math.round((demands.seekS ?? trialsMeant * trialS) / trialS));
  const decay = decayOf(plant, trials);
  const needed = trialsTo(share * slowest * coupling, decay);
  const predicted = predictSpsa(plant, { reaches, scatter, share, trialS, needed });
  const margins = tryingMargins(plant, tries, needed);
  const known = { lawId: 'spsa', plant, demands, sized: null, predicted, margins };
  return {
    lawId: 'spsa',
    parameters: spsaLaw.parametersSchema.parse({ ...timesOf(plant, tries, reaches, share), ...decay }),
    ditherPeriodsS: reaches.map(() => trialS),
    amplitudes: reaches.map(({ amplitude }) => amplitude),
    amplitudesLimitedBy: reaches.map(({ limitedBy }) => limitedBy),
    ratePerS: share / trialS,
    rateLimitedBy: byNoise < byTrials ? 'noise' : 'time-scales',
    predicted,
    unpredicted: needed === null ? { convergenceS: fades } : {},
    margins,
    remarks: [...remarksOn(known), ...trialRemarks(needed, trials)],
  };
}

const fades = 'The gain fades before a tenth of the distance is reached.';

function trialRemarks(needed: number | null, trials: number): string[] {
  if (needed !== null && needed <= trials) return [];
  const count = needed === null ? 'more trials than it can make' : `about ${needed} trials`;
  return [`It needs ${count}, and ${trials} are planned: allow more time or more loss.`];
}

function timesOf(plant: CheckedPlant, tries: Tries, reaches: readonly TriedReach[], share: number): object {
  return {
    axes: reaches.map(({ amplitude, curvature }, i) => ({
      min: plant.actuators[i]!.min,
      max: plant.actuators[i]!.max,
      amplitude,
      gain: share / curvature,
      speedMax: amplitude / tries.dwellS,
    })),
    dwellS: tries.dwellS,
    settleS: tries.settleS,
  };
}

interface Decay {
  gainExponent: number;
  amplitudeExponent: number;
  stability: number;
}

function decayOf({ actuators }: CheckedPlant, trials: number): Decay {
  if (actuators.some(({ driftPerS }) => driftPerS > 0)) {
    return { gainExponent: 0, amplitudeExponent: 0, stability: 0 };
  }
  return { gainExponent: 0.602, amplitudeExponent: 0.101, stability: Math.round(trials / 10) };
}

/** Σ ½f''·share·scatter²/(f''(2 − share)) for each of the share, where it is small. */
function lossPerShare(reaches: readonly TriedReach[], scatter: readonly number[]): number {
  return reaches.reduce((sum, { curvature }, i) => sum + scatter[i]! ** 2 / (4 * curvature), 0);
}

interface Sized {
  reaches: readonly TriedReach[];
  scatter: readonly number[];
  share: number;
  trialS: number;
  needed: number | null;
}

function predictSpsa(plant: CheckedPlant, { reaches, scatter, share, trialS, needed }: Sized): LawPrediction {
  const sum = (of: (reach: TriedReach, i: number) => number) =>
    reaches.reduce((total, reach, i) => total + of(reach, i), 0);
  const driftLag = plant.actuators.map(({ driftPerS }) => (driftPerS * trialS) / share);
  return {
    convergenceS: needed === null ? null : trialS * needed,
    rippleLoss: sum(({ amplitude, curvature }) => (curvature * amplitude ** 2) / 2),
    noiseLoss: sum(({ curvature }, i) => (share * scatter[i]! ** 2) / (2 * curvature * (2 - share))),
    driftLag,
    driftLoss: sum(({ curvature }, i) => (curvature * driftLag[i]! ** 2) / 2),
    gradientNoise: [...scatter],
  };
}

const trialsMax = 1e5;

/** Trials until Π(1 − a_k·f'') has come to a tenth; null where that takes more than can be made. */
function trialsTo(share: number, { gainExponent, stability }: Decay): number | null {
  const scale = (1 + stability) ** gainExponent;
  let left = 1;
  for (let k = 0; k < trialsMax; k += 1) {
    left *= 1 - spsaGain(share * scale, stability, gainExponent, k);
    if (left <= convergedShare) return k + 1;
  }
  return null;
}
