import type { AxisDither } from './axis-dither.js';
import {
  createGradientEstimator,
  gradientSignals,
  resetGradientEstimator,
  stepGradientEstimator,
  writeEstimates,
  writeGradientSignals,
  type GradientEstimator,
} from './gradient-estimator.js';
import {
  lowPassRatioParameter,
  taperParameter,
  washoutRatioParameter,
  type PeriodicAxis,
  type TaperParameters,
} from './law-parameters.js';
import { admitPeriodic, createPeriodicCore, demodulate, perturb } from './periodic-core.js';
import { at, moveAll, type SeekCore } from './seek-core.js';
import type { SeekingInput } from './seeking-law.js';

/** What the schemas of all laws that demodulate behind washout and low-pass have beside their actuators. */
export const filterParameters = {
  washoutRatio: washoutRatioParameter,
  lowPassRatio: lowPassRatioParameter,
  taper: taperParameter,
};

interface DemodulatingParameters {
  readonly axes: readonly PeriodicAxis[];
  readonly washoutRatio: number;
  readonly lowPassRatio: number;
  readonly taper: TaperParameters;
}

/** What such a law keeps at least. */
export interface Demodulating<Parameters = unknown> {
  readonly parameters: Parameters;
  readonly estimator: GradientEstimator;
}

export interface SignalCounts {
  /** Signals of each actuator; the first are those of the gradient. */
  stride: number;
  /** Signals behind those of the actuators. */
  others: number;
}

const gradientOnly: SignalCounts = { stride: gradientSignals.length, others: 0 };

/** @param own makes what the law keeps besides, from its dithers */
export function createDemodulatingCore<P extends DemodulatingParameters, Own extends object>(
  parameters: P,
  start: ArrayLike<number>,
  own: (dithers: readonly AxisDither[]) => Own,
  { stride, others }: SignalCounts = gradientOnly,
): SeekCore<Demodulating<P> & Own> {
  const { axes, taper, washoutRatio, lowPassRatio } = parameters;
  const signals = axes.length * stride + others;
  const state = createPeriodicCore({ axes, start, taper, washoutRatio, signals }, (dithers) => ({
    parameters,
    estimator: createGradientEstimator(dithers, washoutRatio, lowPassRatio),
    ...own(dithers),
  }));
  writeEstimates(state.estimate, state.signals, stride);
  return state;
}

/** The parameters with a speed limit of one dither amplitude a period where none is given. */
export function withSpeedLimits<P extends DemodulatingParameters>(parameters: P): P {
  const axes = parameters.axes.map((a) => ({ ...a, speedMax: a.speedMax ?? a.amplitude / a.periodS }));
  return { ...parameters, axes };
}

/**
 * Begins a step: admits the objective and estimates its slope.
 *
 * @returns false where the core has retreated and the estimator begins anew; the law has to reset what it keeps besides
 * @realtime safe: allocates nothing
 */
export function observe(state: SeekCore<Demodulating>, input: SeekingInput, dtS: number): boolean {
  const { estimator } = state.own;
  if (!admitPeriodic(state, input, dtS)) {
    resetGradientEstimator(estimator);
    return false;
  }
  estimator.told[0] = input.objective;
  demodulate(state);
  stepGradientEstimator(estimator, state.demodulators, dtS);
  return true;
}

/** Moves each estimate by its gain times what the slope is above its reference. */
export function climbAbove(
  state: SeekCore<Demodulating<{ readonly axes: readonly { readonly gain: number }[] }>>,
  references: Float64Array,
  dtS: number,
): void {
  const { change } = state;
  const { parameters, estimator } = state.own;
  for (let i = 0; i < change.length; i += 1) {
    const { gain } = parameters.axes[i] as { gain: number };
    change[i] = gain * (at(estimator.gradient, i) - at(references, i)) * dtS;
  }
  moveAll(state, dtS);
}

/** Ends a step: puts out the next dither and shows what was found. */
export function act(
  state: SeekCore<Demodulating>,
  dtS: number,
  stride: number = gradientSignals.length,
): void {
  perturb(state, dtS);
  writeGradientSignals(state.own.estimator, state.signals, stride);
}
