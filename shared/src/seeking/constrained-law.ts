import { z } from 'zod';
import { createFilterBank, resetFilterBank, stepFilterBank, type FilterBank } from './filter-bank.js';
import { filterDirection, relaxedBarrier } from './constraint-filter.js';
import {
  act,
  createDemodulatingCore,
  filterParameters,
  withSpeedLimits,
  type Demodulating,
} from './demodulating-core.js';
import {
  createGradientEstimator,
  gradientSignals,
  resetGradientEstimator,
  stepGradientEstimator,
  writeEstimates,
  type GradientEstimator,
} from './gradient-estimator.js';
import { axesOf, gainParameter, parameter, periodicAxis } from './law-parameters.js';
import { admitPeriodic, demodulate, retreatPeriodic } from './periodic-core.js';
import { held } from './seek-box.js';
import { at, isSettled, moveAll, type SeekCore } from './seek-core.js';
import { ditherKinds, type SeekingInput, type SeekingLaw } from './seeking-law.js';
import { perActuator } from './signal-names.js';
import { isUsable } from './usable-number.js';

const axis = periodicAxis(ditherKinds, { gain: gainParameter });
type Axis = z.infer<typeof axis>;
const positive = z.number().positive().max(1e12);

const parametersSchema = z.object({
  axes: axesOf(axis, 16),
  side: parameter(
    z.enum(['above', 'below']),
    'Allowed side',
    '',
    'Whether the constrained quantity is to stay above or below its bound.',
  ),
  method: parameter(
    z.enum(['filter', 'barrier']).default('filter'),
    'Method',
    '',
    'Filter: goes up to the bound and slides along it. Barrier: keeps off the bound, the farther the greater its weight.',
  ),
  approachRate: parameter(
    positive.default(0.1),
    'Approach rate',
    '1 / s',
    'Filter: the distance to the bound shrinks no faster than with this rate, and grows back with it.',
  ),
  reserve: parameter(
    z.number().min(0).max(1e12).default(0),
    'Reserve',
    'unit of the quantity',
    'Distance from the bound that is kept on average; choose it above the ripple that the dither makes there.',
  ),
  barrierWeight: parameter(
    positive.default(1),
    'Barrier weight',
    'objective unit',
    'Barrier: what a distance to the bound e times as large is worth.',
  ),
  barrierKnee: parameter(
    positive.default(0.01),
    'Barrier knee',
    'unit of the quantity',
    'Barrier: below this distance it rises as a parabola, so that it stays finite beyond the bound.',
  ),
  ...filterParameters,
});
export type ConstrainedLawParameters = z.infer<typeof parametersSchema>;

interface ConstrainedOwn extends Demodulating<ConstrainedLawParameters> {
  readonly marginEstimator: GradientEstimator;
  readonly marginFilter: FilterBank;
  /** Wanted speed and slope of the margin, in dither amplitudes. */
  readonly direction: Float64Array;
  readonly marginSlope: Float64Array;
}

export type ConstrainedLawState = SeekCore<ConstrainedOwn>;

const signalsPerActuator = [...gradientSignals, 'marginGradient'];
const stride = signalsPerActuator.length;

/**
 * Gradient seeking while a second measured quantity stays on one side of a bound. Its slope is demodulated with
 * the same dithers. *Filter*: the gradient step is replaced by the nearest one that does not let the margin shrink
 * faster than it may (axes are compared in units of their dither amplitude). *Barrier*: a relaxed logarithmic
 * barrier of the margin is added to the objective, and the law climbs the sum.
 *
 * Safety here is practical only: the slope is known late and with noise, and the dither swings about the estimate;
 * small violations are possible. The envelope's interlocks remain what protects. A speed limit that is not given
 * is one dither amplitude a period. Where the constrained quantity is not a number the law retreats.
 *
 * @source A. Williams, M. Krstić and A. Scheinker (2023), "Semi-global practical extremum seeking with practical
 * safety", arXiv:2309.15401; D. DeHaan and M. Guay (2005), Automatica 41:1567–1574
 * @realtime `step` is safe: it allocates nothing
 */
export const constrainedLaw: SeekingLaw<ConstrainedLawParameters, ConstrainedLawState> = {
  id: 'constrained',
  title: 'Constrained gradient',
  purpose: 'Climbs while another quantity stays above or below a bound.',
  source:
    'A. Williams, M. Krstić and A. Scheinker (2023), "Semi-global practical extremum seeking with practical safety", arXiv:2309.15401',
  actuatorsMax: 16,
  ditherKinds,
  parametersSchema,

  signalNames: (actuators) => [...perActuator(actuators, signalsPerActuator), 'margin'],

  init(parameters, start) {
    const { axes, washoutRatio, lowPassRatio } = parameters;
    const n = axes.length;
    const slowestS = Math.max(...axes.map(({ periodS }) => periodS));
    return createDemodulatingCore(
      withSpeedLimits(parameters),
      start,
      (dithers) => ({
        marginEstimator: createGradientEstimator(dithers, washoutRatio, lowPassRatio),
        marginFilter: createFilterBank(Float64Array.of((lowPassRatio * 2 * Math.PI) / slowestS)),
        direction: new Float64Array(n),
        marginSlope: new Float64Array(n),
      }),
      { stride, others: 1 },
    );
  },

  step(state, input, dtS) {
    const { signals } = state;
    const { estimator, marginEstimator } = state.own;
    const isKnown = tellMargin(state.own, input);
    if (!admitPeriodic(state, input, dtS)) resetFilters(state.own);
    else if (!isKnown) {
      retreatPeriodic(state);
      resetFilters(state.own);
    } else {
      estimator.told[0] = input.objective;
      climb(state, dtS);
      act(state, dtS, stride);
      for (let i = 0; i < state.estimate.length; i += 1) {
        signals[i * stride + 4] = at(marginEstimator.gradient, i);
      }
      signals[state.estimate.length * stride] = at(marginEstimator.told, 0);
    }
    writeEstimates(state.estimate, signals, stride);
  },
};

/** Writes the distance to the bound, above zero on the allowed side. @returns false where it is not known */
function tellMargin({ parameters, marginEstimator }: ConstrainedOwn, input: SeekingInput): boolean {
  const { constraint, bound } = input;
  if (!isUsable(constraint) || !isUsable(bound)) return false;
  const margin = parameters.side === 'above' ? constraint - bound : bound - constraint;
  marginEstimator.told[0] = margin - parameters.reserve;
  return true;
}

function resetFilters({ estimator, marginEstimator, marginFilter }: ConstrainedOwn): void {
  resetGradientEstimator(estimator);
  resetGradientEstimator(marginEstimator);
  resetFilterBank(marginFilter);
}

function climb(state: ConstrainedLawState, dtS: number): void {
  const { demodulators, change } = state;
  const { parameters, estimator, marginEstimator, marginFilter, direction, marginSlope } = state.own;
  const { axes, method } = parameters;
  const margin = at(marginEstimator.told, 0);
  const isBarrier = method === 'barrier';
  if (isBarrier) {
    const barrier = parameters.barrierWeight * relaxedBarrier(margin, parameters.barrierKnee);
    // Far beyond the bound the barrier is beyond all measure; held, it still leads back.
    estimator.told[0] = held(at(estimator.told, 0) + barrier, -1e100, 1e100);
  }
  demodulate(state);
  stepGradientEstimator(estimator, demodulators, dtS);
  stepGradientEstimator(marginEstimator, demodulators, dtS);
  marginFilter.input[0] = margin;
  stepFilterBank(marginFilter, dtS);
  if (!isSettled(state, dtS)) return;
  for (let i = 0; i < axes.length; i += 1) {
    const { amplitude, gain } = axes[i] as Axis;
    direction[i] = (gain * at(estimator.gradient, i)) / amplitude;
    marginSlope[i] = at(marginEstimator.gradient, i) * amplitude;
  }
  if (!isBarrier) filterDirection(direction, marginSlope, marginFilter.output, parameters);
  for (let i = 0; i < axes.length; i += 1) {
    change[i] = at(direction, i) * (axes[i] as Axis).amplitude * dtS;
  }
  moveAll(state, dtS);
}
