import { sizeAmplitude, type AmplitudeBound } from '../dither/dither-amplitude.js';
import type { LawMargins } from './law-size.types.js';
import { noiseAt, type CheckedDemands, type CheckedPlant } from './sizing-plant.schema.js';

/** Time constants in which the plant settles: 1.8 % of a step is left after four. */
const settlings = 4;
const scansAveragedMin = 4;

/** How long each point is tried. */
export interface Tries {
  settleS: number;
  scansAveraged: number;
  dwellS: number;
  /** Standard deviation of the mean of a dwell, objective unit. */
  meanNoise: number;
}

/** The plant settles, then so many scans are averaged; noise counts as dense as it is at the frequency of trials. */
export function triesOf(plant: CheckedPlant, scansAveraged: number): Tries {
  const { scanS, timeConstantsS, deadTimeS } = plant;
  const lag = timeConstantsS.reduce((sum, tau) => sum + settlings * tau, deadTimeS);
  const settleS = Math.ceil(lag / scanS) * scanS;
  const dwellS = settleS + scansAveraged * scanS;
  const sigma = noiseAt(plant, 1 / (2 * dwellS));
  return { settleS, scansAveraged, dwellS, meanNoise: sigma / Math.sqrt(scansAveraged) };
}

/** Settling and averaging take equally long, with four scans at least. */
export function evenTries(plant: CheckedPlant): Tries {
  const { settleS } = triesOf(plant, 1);
  return triesOf(plant, Math.max(scansAveragedMin, Math.round(settleS / plant.scanS)));
}

export interface TriedReach {
  amplitude: number;
  limitedBy: AmplitudeBound;
  /** f_ii, objective unit / actuator unit². */
  curvature: number;
}

/** @param lossFactors mean loss of the points tried along each actuator, over f''a²/4 */
export function triedReaches(
  plant: CheckedPlant,
  demands: CheckedDemands,
  lossFactors: readonly number[],
): TriedReach[] {
  return plant.actuators.map(({ resolution, amplitudeMax, min, max }, i) => {
    const curvature = plant.curvature[i]![i]!;
    const sized = sizeAmplitude({
      resolution,
      noise: 0,
      scansAveraged: 1,
      slopeToSee: 1,
      amplitudeMax: Math.min(amplitudeMax ?? Infinity, (max - min) / 2),
      // A point is gone to at the slew limit of the guard; the dwell has time for it.
      slewPerS: Infinity,
      periodS: 1,
      curvature: curvature * lossFactors[i]!,
      lossAllowed: demands.lossAllowed / plant.actuators.length,
    });
    return { amplitude: sized.amplitude, limitedBy: sized.limitedBy, curvature };
  });
}

/** @param trials to a tenth of the distance; null where it is not known */
export function tryingMargins(plant: CheckedPlant, tries: Tries, trials: number | null): LawMargins {
  const lagS = plant.timeConstantsS.reduce((sum, tau) => sum + tau, plant.deadTimeS);
  return {
    plantOverDither: tries.dwellS / lagS,
    ditherOverAdaptation: trials,
    lowPassOverSwing: null,
    linesOverAdaptation: null,
    delayMargin: null,
    scansPerPeriod: tries.dwellS / plant.scanS,
  };
}
