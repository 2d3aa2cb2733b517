import { gridStarts, seekingLaws, wideSearch, type SeekingLaw, type SeekingState } from '@cresthold/shared';
import type { TablePlant } from './table-plants.js';

export const scanS = 0.05;
export const amplitude = 0.1;
/** Dither period, s: where the plant lags, five times the sum of its time constants and more. */
export const periodS = 2;
/** Convergence rate that the gains are sized for, 1/s. */
const rate = 0.05;

/** A law with parameters that follow from a plant by one rule, never tuned to it by hand. */
export interface TableLaw {
  readonly title: string;
  readonly law: SeekingLaw<object, SeekingState>;
  /** Loss that its dither costs at a peak, over the f″a²/4 of a sine. */
  readonly rippleFactor: number;
  parameters(plant: TablePlant): object;
}

/** Lag of the plant at the dither frequency less the lead of the washout, as Identify would give it. */
function phaseFor({ lagsS }: TablePlant, frequencyRadPerS: number, washoutRatio: number): number {
  const lag = lagsS.reduce((sum, lagS) => sum + Math.atan(frequencyRadPerS * lagS), 0);
  return lag - Math.atan(washoutRatio);
}

const box = ({ half }: TablePlant) => ({ min: -half, max: half, amplitude });

/** Gain for the set rate in the steepest direction. */
const gainFor = ({ curvature }: TablePlant) => rate / Math.max(...curvature);

function periodicAxes(plant: TablePlant, washoutRatio: number, own: (i: number) => object = () => ({})) {
  return plant.start.map((_, i) => {
    const ownPeriodS = periodS / (1 + 0.4 * i);
    const phaseRad = phaseFor(plant, (2 * Math.PI) / ownPeriodS, washoutRatio);
    return { ...box(plant), periodS: ownPeriodS, phaseRad, gain: gainFor(plant), ...own(i) };
  });
}

function entry<P extends object>(
  law: SeekingLaw<P, SeekingState>,
  settings: (plant: TablePlant) => object,
  others: Partial<Pick<TableLaw, 'title' | 'rippleFactor'>> = {},
): TableLaw {
  return {
    title: law.title,
    rippleFactor: 1,
    ...others,
    law: law,
    parameters: (plant) => law.parametersSchema.parse(settings(plant)),
  };
}

const washoutRatio = 0.2;
const speedMax = amplitude;
const gradient = (plant: TablePlant) => ({ axes: periodicAxes(plant, washoutRatio, () => ({ speedMax })) });

export const tableLaws: readonly TableLaw[] = [
  entry(seekingLaws.gradient, gradient),
  entry(
    seekingLaws.gradient,
    (plant) => ({ axes: periodicAxes(plant, washoutRatio, () => ({ speedMax, dither: 'square' })) }),
    { title: 'Gradient, square dither', rippleFactor: 2 },
  ),
  entry(seekingLaws.discrete, (plant) => ({
    axes: plant.start.map((_, i) => {
      const scansPerPeriod = periodS / scanS / (1 + 0.4 * i);
      const frequency = (2 * Math.PI) / (scansPerPeriod * scanS);
      // The pole of the washout for the same corner: e^{−r·ω·dt}.
      const phaseRad = phaseFor(plant, frequency, washoutRatio);
      return { ...box(plant), scansPerPeriod, phaseRad, gain: gainFor(plant) * scanS, speedMax };
    }),
    washoutPole: -Math.exp((-washoutRatio * 2 * Math.PI * scanS) / periodS),
  })),
  entry(seekingLaws.newton, (plant) => ({
    axes: periodicAxes(plant, washoutRatio, (i) => ({ curvature: plant.curvature[i] })),
    rate,
    inverseRate: rate,
    lag: { timeConstantS: plant.lagsS.reduce((sum, lagS) => sum + lagS, 0) },
  })),
  entry(seekingLaws['least-squares'], (plant) => ({
    axes: periodicAxes(plant, 0, () => ({ speedMax })),
    memoryPeriods: 2,
  })),
  entry(seekingLaws['bounded-rate'], (plant) => ({ axes: periodicAxes(plant, 0) })),
  entry(
    seekingLaws.slope,
    (plant) => ({
      axes: periodicAxes(plant, washoutRatio, () => ({ slope: 0, speedMax })),
    }),
    { title: 'Slope, wanted slope 0' },
  ),
  entry(
    seekingLaws.constrained,
    (plant) => ({ axes: periodicAxes(plant, washoutRatio), side: 'below', reserve: 2 * amplitude }),
    {
      title: 'Constrained, x₁ below 1',
    },
  ),
  entry(
    seekingLaws.spsa,
    (plant) => ({
      axes: plant.start.map(() => ({
        ...box(plant),
        gain: (rate * periodS * 2) / Math.max(...plant.curvature),
        speedMax,
      })),
      dwellS: periodS / 2,
      settleS: periodS / 4,
      gainExponent: 0,
      amplitudeExponent: 0,
    }),
    { rippleFactor: 2 },
  ),
  entry(seekingLaws['perturb-observe'], (plant) => ({
    axes: plant.start.map(() => box(plant)),
    dwellS: periodS / 2,
    settleS: periodS / 4,
  })),
  entry(
    wideSearch(seekingLaws.gradient),
    (plant) => ({
      law: gradient(plant),
      visit: {
        starts: gridStarts(
          plant.start.map(() => ({ min: -plant.half + 0.5, max: plant.half - 0.5 })),
          plant.actuators === 1 ? 10 : 6,
        ),
        settleS: 1,
        seekS: 0,
        averageS: 1,
      },
    }),
    { title: 'Survey, then gradient' },
  ),
];
