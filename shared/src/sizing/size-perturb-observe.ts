import { perturbObserveLaw } from '../seeking/perturb-observe-law.js';
import type { LawPrediction, LawSize } from './law-size.types.js';
import { inverseDiagonal } from './predict-law.js';
import { couplingOf } from './size-loops.js';
import { remarksOn } from './sizing-remarks.js';
import type { CheckedDemands, CheckedPlant } from './sizing-plant.schema.js';
import { evenTries, triedReaches, triesOf, tryingMargins, type TriedReach, type Tries } from './tries.js';

/** Distance of the start, in steps, that convergence is predicted for. */
const startSteps = 3;
const scansMin = 2;
/** Standard deviations by which two means must differ at the best point for a decision. */
const decisionErrors = 3;
/**
 * Sizes perturb-and-observe. Step Δ: the largest whose loss is allowed. It takes no step that does not pay, so it stops
 * where each slope is within ±½f_ii·Δ_i. Slopes anywhere in there, and three points walked along each actuator, lose
 * ½·Σ f_ii·Δ_i²·(s_i/12 + 1/2) on average, with s_i = f_ii·(H⁻¹)_ii; one actuator, or several that are not coupled,
 * have s = 1 and so 7/24·f''Δ². Along a ridge s is large: there it stops far from the best point, and the step must be
 * small. Dwell: four time constants, then as many scans as make the difference of two means at the best point,
 * f''Δ²/2, three of its standard deviations √2·σ/√N: N = 72σ²/(f''Δ²)².
 *
 * @source loss of the walk: derived here, see `perturbObserveLaw`; the three standard deviations are chosen here
 */
export function sizePerturbObserve(plant: CheckedPlant, demands: CheckedDemands): LawSize<'perturb-observe'> {
  const n = plant.actuators.length;
  const shares = walkShares(plant);
  const reaches = triedReaches(
    plant,
    demands,
    shares.map((share) => 2 * share),
  );
  const tries = decisiveTries(plant, reaches);
  const trials = startSteps * n + 1;
  const isCoupled = couplingOf(plant.curvature).coupling > 1 + 1e-9;
  const predicted: LawPrediction = {
    convergenceS: isCoupled ? null : trials * tries.dwellS,
    rippleLoss: reaches.reduce(
      (sum, { amplitude, curvature }, i) => sum + (shares[i]! * curvature * amplitude ** 2) / 2,
      0,
    ),
    noiseLoss: null,
    driftLag: null,
    driftLoss: null,
    gradientNoise: null,
  };
  const margins = tryingMargins(plant, tries, isCoupled ? null : trials);
  const known = { lawId: 'perturb-observe', plant, demands, sized: null, predicted, margins };
  return {
    lawId: 'perturb-observe',
    parameters: perturbObserveLaw.parametersSchema.parse({
      axes: plant.actuators.map(({ min, max }, i) => ({ min, max, amplitude: reaches[i]!.amplitude })),
      dwellS: tries.dwellS,
      settleS: tries.settleS,
    }),
    ditherPeriodsS: reaches.map(() => n * tries.dwellS),
    amplitudes: reaches.map(({ amplitude }) => amplitude),
    amplitudesLimitedBy: reaches.map(({ limitedBy }) => limitedBy),
    ratePerS: null,
    rateLimitedBy: null,
    predicted,
    unpredicted: {
      ...(isCoupled && { convergenceS: zigzag }),
      noiseLoss: walks,
      driftLag: walks,
      driftLoss: walks,
      gradientNoise: walks,
    },
    margins,
    remarks: [...remarksOn(known), ...ridgeRemarks(plant), ...driftRemarks(plant, reaches, n * tries.dwellS)],
  };
}

/** s_i = f_ii·(H⁻¹)_ii: how much further than alone it may be off along each actuator; infinite on a flat ridge. */
function ridgeFactors({ curvature }: CheckedPlant): number[] {
  return inverseDiagonal(curvature).map((inverse, i) => curvature[i]![i]! * inverse);
}

/** Mean of e² + Δ²/2 over where it stops, in Δ². */
function walkShares(plant: CheckedPlant): number[] {
  return ridgeFactors(plant).map((factor) => (Number.isFinite(factor) ? factor : 1) / 12 + 1 / 2);
}

function ridgeRemarks(plant: CheckedPlant): string[] {
  if (ridgeFactors(plant).every(Number.isFinite)) return [];
  return [
    'The curvature is not positive in every direction, and the walk may stop anywhere along the flat one: its loss is that of actuators that are not coupled.',
  ];
}

const walks =
  'It decides by comparing two means and has no slope: its walk under noise or drift has no closed form.';
const zigzag =
  'The actuators are coupled, so that the walk by turns goes there in a zigzag of no fixed length.';

/** As many scans as a decision at the best point needs, by the noise as dense as it is at that frequency of trials. */
function decisiveTries(plant: CheckedPlant, reaches: readonly TriedReach[]): Tries {
  const difference = Math.min(...reaches.map(({ amplitude, curvature }) => (curvature * amplitude ** 2) / 2));
  const needed = ({ meanNoise, scansAveraged }: Tries) =>
    Math.ceil(2 * scansAveraged * ((decisionErrors * meanNoise) / difference) ** 2);
  const scansAveraged = Math.max(scansMin, needed(evenTries(plant)));
  return triesOf(plant, Math.max(scansAveraged, needed(triesOf(plant, scansAveraged))));
}

function driftRemarks({ actuators }: CheckedPlant, reaches: readonly TriedReach[], roundS: number): string[] {
  if (!actuators.some(({ driftPerS }, i) => driftPerS * roundS > reaches[i]!.amplitude / 2)) return [];
  return [
    'The best point drifts by more than half a step while one is judged: allow more loss or quieten the objective.',
  ];
}
