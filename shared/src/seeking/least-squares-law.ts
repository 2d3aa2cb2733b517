import { z } from 'zod';
import { writeLaggedDithers } from './axis-dither.js';
import { writeEstimates } from './gradient-estimator.js';
import { axesOf, gainParameter, parameter, periodicAxis, taperParameter } from './law-parameters.js';
import { admitPeriodic, createPeriodicCore, perturb } from './periodic-core.js';
import {
  createRecursiveSlope,
  resetRecursiveSlope,
  stepRecursiveSlope,
  type RecursiveSlope,
} from './recursive-slope.js';
import { at, isSettled, moveAll, type SeekCore } from './seek-core.js';
import { ditherKinds, type SeekingLaw } from './seeking-law.js';
import { perActuator } from './signal-names.js';

const axis = periodicAxis(ditherKinds, { gain: gainParameter });

const parametersSchema = z.object({
  axes: axesOf(axis, 16),
  memoryPeriods: parameter(
    z.number().positive().max(1e6).default(1),
    'Memory',
    'longest dither periods',
    'Time constant with which older samples are forgotten; longer is less noisy and slower.',
  ),
  taper: taperParameter,
});
export type LeastSquaresLawParameters = z.infer<typeof parametersSchema>;

interface LeastSquaresOwn {
  readonly parameters: LeastSquaresLawParameters;
  readonly slope: RecursiveSlope;
}

export type LeastSquaresLawState = SeekCore<LeastSquaresOwn>;

const signalNames = ['estimate', 'gradient'];

/**
 * Gradient by recursive least squares: fits y = c + Σ g_i·d_i to the dithers d_i (each lagging by φ_i) with
 * exponential forgetting and integrates θ̂' = k·g. The constant is fitted along, so that there is no washout whose
 * corner is to be chosen and none whose phase is to be compensated. Over whole periods the slope equals the
 * demodulated one; its variance is 2σ²/(N·a²) with N = 2·memory/dt samples in effect.
 *
 * @source G. Gelbert, J. P. Moeck, C. O. Paschereit and R. King (2012), "Advanced algorithms for gradient
 * estimation in one- and two-parameter extremum seeking controllers", Journal of Process Control 22:700–709; M.
 * Guay and D. Dochain (2015), "A time-varying extremum-seeking control approach", Automatica 51:356–363 (both
 * from memory)
 * @realtime `step` is safe: it allocates nothing
 */
export const leastSquaresLaw: SeekingLaw<LeastSquaresLawParameters, LeastSquaresLawState> = {
  id: 'least-squares',
  title: 'Recursive least squares',
  purpose: 'Fits the slope to the last dither periods; quick, and without a washout to tune.',
  source:
    'G. Gelbert, J. P. Moeck, C. O. Paschereit and R. King (2012), "Advanced algorithms for gradient estimation in one- and two-parameter extremum seeking controllers", J. Process Control 22:700–709',
  actuatorsMax: 16,
  ditherKinds,
  parametersSchema,

  signalNames: (actuators) => [...perActuator(actuators, signalNames), 'mean'],

  init(parameters, start) {
    const { axes, taper } = parameters;
    const signals = axes.length * signalNames.length + 1;
    const state = createPeriodicCore({ axes, start, taper, washoutRatio: 0, signals }, () => ({
      parameters,
      slope: createRecursiveSlope(axes.length),
    }));
    writeEstimates(state.estimate, state.signals, signalNames.length);
    return state;
  },

  step(state, input, dtS) {
    if (admitPeriodic(state, input, dtS)) {
      state.own.slope.told[0] = input.objective;
      climb(state, dtS);
      perturb(state, dtS);
    } else {
      resetRecursiveSlope(state.own.slope);
    }
    writeEstimates(state.estimate, state.signals, signalNames.length);
  },
};

function climb(state: LeastSquaresLawState, dtS: number): void {
  const { dithers, demodulators: lagged, signals, trialS, change } = state;
  const { parameters, slope } = state.own;
  const { axes, memoryPeriods } = parameters;
  writeLaggedDithers(dithers, lagged);
  for (let i = 0; i < axes.length; i += 1) {
    const { amplitude } = axes[i] as { amplitude: number };
    slope.regressors[i + 1] = at(lagged, i) / amplitude;
  }
  slope.told[1] = Math.exp(-dtS / (memoryPeriods * trialS));
  stepRecursiveSlope(slope);
  for (let i = 0; i < axes.length; i += 1) {
    const { amplitude, gain } = axes[i] as { amplitude: number; gain: number };
    const gradient = at(slope.weights, i + 1) / amplitude;
    change[i] = gain * gradient * dtS;
    signals[i * signalNames.length + 1] = gradient;
  }
  signals[axes.length * signalNames.length] = at(slope.weights, 0);
  if (isSettled(state, dtS)) moveAll(state, dtS);
}
