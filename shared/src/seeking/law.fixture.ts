import { boundedRateLaw } from './bounded-rate-law.js';
import { constrainedLaw } from './constrained-law.js';
import { discreteLaw } from './discrete-law.js';
import { gradientLaw } from './gradient-law.js';
import { leastSquaresLaw } from './least-squares-law.js';
import { newtonLaw } from './newton-law.js';
import { perturbObserveLaw } from './perturb-observe-law.js';
import type { SeekingLaw, SeekingState } from './seeking-law.js';
import { slopeLaw } from './slope-law.js';
import { spsaLaw } from './spsa-law.js';

/** What tests set of one actuator; the schema of the law fills in the rest. */
export type AxisSetting = Record<string, number | string | null>;

/** Parameters through the law's own schema, so that its defaults and conditions are under test as well. */
export function settled<P extends object>(
  law: SeekingLaw<P, SeekingState>,
  axes: readonly AxisSetting[],
  others: Record<string, unknown> = {},
): P {
  const boxed = axes.map((axis) => ({ min: -100, max: 100, amplitude: 0.1, ...axis }));
  return law.parametersSchema.parse({ axes: boxed, ...others });
}

export interface LawCase {
  id: string;
  law: SeekingLaw<object, SeekingState>;
  /** Parameters for a peak of second derivative −2 and a dither period of 1 s. */
  parameters: (axes: readonly AxisSetting[]) => object;
}

function lawCase<P extends object>(
  law: SeekingLaw<P, SeekingState>,
  own: AxisSetting,
  others: Record<string, unknown> = {},
  name: string = law.id,
): LawCase {
  const spread = (axis: AxisSetting, i: number): AxisSetting => {
    const periodS = (own['periodS'] as number | undefined) ?? NaN;
    return { ...own, ...(periodS > 0 && { periodS: periodS / (1 + 0.27 * i) }), ...axis };
  };
  return {
    id: name,
    law: law,
    parameters: (axes) => settled(law, axes.map(spread), others),
  };
}

const periodic = { periodS: 1, gain: 0.05 };
const taper = { band: 0.1, afterPeriods: 2, floor: 0.2 };

/** Every law, with the dithers that make a difference. */
export const lawCases: readonly LawCase[] = [
  lawCase(gradientLaw, periodic),
  lawCase(gradientLaw, { ...periodic, dither: 'square' }, { taper }, 'gradient, square, taper'),
  lawCase(gradientLaw, { ...periodic, dither: 'measured' }, {}, 'gradient, measured ripple'),
  lawCase(discreteLaw, { scansPerPeriod: 20, gain: 0.005 }),
  lawCase(newtonLaw, { periodS: 1, curvature: 2 }, { rate: 0.1, inverseRate: 0.1, taper }),
  lawCase(leastSquaresLaw, periodic, { taper }),
  lawCase(leastSquaresLaw, { ...periodic, dither: 'measured' }, {}, 'least-squares, measured ripple'),
  lawCase(boundedRateLaw, periodic, { taper }),
  lawCase(slopeLaw, { ...periodic, slope: 0.3 }),
  lawCase(constrainedLaw, periodic, { side: 'above' }),
  lawCase(constrainedLaw, periodic, { side: 'below', method: 'barrier' }, 'constrained, barrier'),
  lawCase(spsaLaw, { gain: 0.1 }, { dwellS: 0.5, settleS: 0.1, taper }),
  lawCase(perturbObserveLaw, {}, { dwellS: 0.5, settleS: 0.1, taper }),
];

export function lawCaseAt(cases: readonly LawCase[], index: number): LawCase {
  const found = cases[index];
  if (!found) throw new Error(`There is no law ${index}.`);
  return found;
}
