import { seekingLaws } from '../seeking/seeking-laws.js';
import { curvatureDoubt } from './curvature-doubt.js';
import type { LawParameters, LawPrediction, LawSize } from './law-size.types.js';
import { loopKinds, type PeriodicLawId } from './loop-kinds.js';
import { newtonRates, periodicParameters, periodOf, type PeriodicCase } from './periodic-parameters.js';
import {
  inverseDiagonal,
  leastMargins,
  predictGradientLaw,
  predictNewtonLaw,
  ratesOf,
  slopeDensity,
} from './predict-law.js';
import { noiseShare, sizeLoops, type SizedLoops } from './size-loops.js';
import { remarksOn } from './sizing-remarks.js';
import type { CheckedDemands, CheckedPlant } from './sizing-plant.schema.js';

/**
 * Sizes a law with periodic dithers. Rate κ: the least of ω/12, ωl/8, a quarter of the distance of the dithers'
 * lines, and what noise allows (it may add a quarter of the allowed loss); a curvature that is known badly slows it
 * by 1 + 2·(relative standard error). Gains: k_i = κ/(ρ_i·f_ii·c), with c the largest eigenvalue of the curvature in
 * units in which each actuator's own is 1, so that the fastest direction converges with κ.
 *
 * - discrete: the same in scans; its washout (z − 1)/(z + h) with h = −(1 − x)/(1 + x), x = ωh·dt/2, is 1 + x times
 *   the washout that the bilinear rule makes.
 * - newton: rate κ/ρ with the smallest ρ; Γ⁻¹ begins at the surveyed curvature, the whole matrix, and follows its
 *   estimate with κ·λ²/4, or slower where noise would scatter it by more than λ/5: its own demodulation,
 *   (8/a²)·cos 2ωt, makes a variance of 16σ²·dt·ωr/a⁴ of white noise. λ is the smallest eigenvalue of the curvature in
 *   units in which each actuator's own is 1; on a ridge an error there makes one 1/λ times as large of the inverse.
 * - least-squares: a memory of one longest period, which cuts noise as a low-pass of the corner 1/(m·T) does.
 * - bounded-rate: cannot make up for a lag, which so costs cos λ. Its phase k·y must stay below half a rad for the
 *   noise and below a rad for the swing of the objective at the distance of the start: κ ≤ a²ωf''/(4σ)·ρ and
 *   κ ≤ ω·ρ/(4·distance).
 * - slope: what the demodulation shows of the wanted slope is ρ of it.
 * - constrained: the reserve is what dithers and scatter make of the constrained quantity, Σ|h_i|·a_i, a quarter of it for the wandering of the estimate, and two
 *   standard deviations of its low-passed noise; the margin may shrink with κ.
 *
 * @source averaging: M. Krstić and H.-H. Wang (2000), Automatica 36:595–601; K. B. Ariyur and M. Krstić (2003),
 * "Real-Time Optimization by Extremum-Seeking Control"; A. Ghaffari, M. Krstić and D. Nešić (2012), Automatica
 * 48:1759–1767; A. Scheinker and M. Krstić (2014), Systems & Control Letters 63:25–31 (all from memory); the
 * variances are integrals of filtered white noise, the numbers are chosen here
 */
export function sizePeriodicLaw<Id extends PeriodicLawId>(
  lawId: Id,
  plant: CheckedPlant,
  demands: CheckedDemands,
): LawSize<Id> {
  const sized = sizeLoops(plant, demands, loopKinds[lawId]);
  if (lawId === 'discrete') raiseByDifference(sized);
  const { rate, rateLimitedBy } = rateOf(lawId, plant, demands, sized);
  const gains = sized.axes.map(({ share, curvature }) => rate / (share * curvature * sized.coupling));
  const known: PeriodicCase = { plant, demands, sized, rate, gains };
  const predicted =
    lawId === 'newton'
      ? predictNewtonLaw(plant, sized, newtonRates(sized, rate))
      : predictGradientLaw(plant, sized, gains, ratesOf(plant, rate));
  const margins = leastMargins(sized, rate);
  const remarks = remarksOn({ lawId, plant, demands, sized, predicted, margins });
  const kept = Number.isFinite(predicted.convergenceS) ? predicted : { ...predicted, convergenceS: null };
  return {
    lawId,
    parameters: seekingLaws[lawId].parametersSchema.parse(
      periodicParameters[lawId](known),
    ) as LawParameters<Id>,
    ditherPeriodsS: sized.axes.map(periodOf),
    amplitudes: sized.axes.map(({ amplitude }) => amplitude),
    amplitudesLimitedBy: sized.axes.map(({ limitedBy }) => limitedBy),
    ratePerS: rate,
    rateLimitedBy,
    predicted: kept,
    unpredicted: unpredictedOf(kept),
    margins,
    remarks,
  };
}

function unpredictedOf(predicted: LawPrediction): LawSize['unpredicted'] {
  if (predicted.convergenceS !== null) return {};
  return {
    convergenceS: 'The curvature is not positive in every direction, so that no rate holds everywhere.',
  };
}

/** The washout (z − 1)/(z + h) passes 1 + x times what that of the bilinear rule passes. */
function raiseByDifference({ axes }: SizedLoops): void {
  for (const axis of axes) {
    const raised = 1 + (axis.loop.washoutRadPerS * axis.loop.scanS) / 2;
    axis.share *= raised;
    axis.noise *= raised;
  }
}

function rateOf(
  lawId: PeriodicLawId,
  plant: CheckedPlant,
  demands: CheckedDemands,
  sized: SizedLoops,
): { rate: number; rateLimitedBy: NonNullable<LawSize['rateLimitedBy']> } {
  const limits = {
    'time-scales': sized.byTimeScales / (1 + 2 * curvatureDoubt(plant)),
    noise: (noiseShare * demands.lossAllowed) / noiseLossPerRate(lawId, plant, sized),
    distance: Infinity,
  };
  if (lawId === 'bounded-rate') {
    const eachOf = sized.axes.map(({ loop, share, amplitude, curvature, noise }) => ({
      noise: (amplitude ** 2 * loop.omegaRadPerS * curvature * share) / (4 * noise),
      distance: (loop.omegaRadPerS * share) / (4 * demands.distanceAmplitudes),
    }));
    limits.noise = Math.min(limits.noise, ...eachOf.map((each) => each.noise));
    limits.distance = Math.min(...eachOf.map((each) => each.distance));
  }
  const names = ['time-scales', 'noise', 'distance'] as const;
  const rateLimitedBy = names.reduce((a, b) => (limits[b] < limits[a] ? b : a));
  return { rate: limits[rateLimitedBy], rateLimitedBy };
}

function noiseLossPerRate(lawId: PeriodicLawId, plant: CheckedPlant, { axes, coupling }: SizedLoops): number {
  const inverse = lawId === 'newton' ? inverseDiagonal(plant.curvature) : null;
  return axes.reduce((sum, axis, i) => {
    const spread = inverse ? inverse[i]! : 1 / (axis.curvature * coupling);
    return sum + (slopeDensity(axis) * spread) / (4 * axis.share ** 2);
  }, 0);
}
