import { z } from 'zod';
import { createDwell, restartDwell, stepDwell, type Dwell } from './dwell.js';
import { writeEstimates } from './gradient-estimator.js';
import { axesOf, dwellingAxis, dwellParameters, parameter, taperParameter } from './law-parameters.js';
import { admit, at, createSeekCore, fitDithers, moveAll, remember, type SeekCore } from './seek-core.js';
import { createSeededUniform, nextSign, type SeededUniform } from './seeded-uniform.js';
import type { SeekingLaw } from './seeking-law.js';
import { perActuator } from './signal-names.js';

const axis = dwellingAxis({
  gain: parameter(
    z.number().positive().max(1e12),
    'Gain a',
    'actuator unit² / objective unit per trial',
    'Change of the estimate per trial and slope at the beginning, before it decays.',
  ),
});

const exponent = z.number().min(0).max(1);

const parametersSchema = z
  .object({
    axes: axesOf(axis, 64),
    ...dwellParameters,
    gainExponent: parameter(
      exponent.default(0.602),
      'Decay of the gain',
      '',
      'Exponent with which the gain decays from trial to trial; 0 keeps it, to follow a best point that drifts.',
    ),
    amplitudeExponent: parameter(
      exponent.default(0.101),
      'Decay of the amplitude',
      '',
      'Exponent with which the perturbation decays from trial to trial; 0 keeps it.',
    ),
    stability: parameter(
      z.number().min(0).max(1e9).default(0),
      'Stability constant A',
      'trials',
      'Keeps the first steps small; about a tenth of the trials that are planned.',
    ),
    seed: parameter(z.int().default(1), 'Seed', '', 'The same seed gives the same perturbations.'),
    taper: taperParameter,
  })
  .refine(({ dwellS, settleS }) => settleS < dwellS, {
    message: 'Settling must end before the dwell does.',
    path: ['settleS'],
  });
export type SpsaLawParameters = z.infer<typeof parametersSchema>;

interface SpsaOwn {
  readonly parameters: SpsaLawParameters;
  readonly random: SeededUniform;
  /** Trials that are done. */
  trial: number;
  /** 0 before the first point, +1 and −1 at the points of a trial. */
  side: number;
  readonly signs: Float64Array;
  /** Perturbation of each actuator in this trial, c_k, actuator units. */
  readonly reaches: Float64Array;
  readonly dwell: Dwell;
  /** Mean of the objective at the first point of the trial. */
  above: number;
}

export type SpsaLawState = SeekCore<SpsaOwn>;

const signalNames = ['estimate', 'gradient'];

/** Gain of trial k (from 0): a/(k + 1 + A)^α. */
export function spsaGain(gain: number, stability: number, exponentAlpha: number, trial: number): number {
  return gain / (trial + 1 + stability) ** exponentAlpha;
}

/** Perturbation of trial k (from 0): c/(k + 1)^γ. */
export function spsaAmplitude(amplitude: number, exponentGamma: number, trial: number): number {
  return amplitude / (trial + 1) ** exponentGamma;
}

/**
 * Simultaneous perturbation stochastic approximation: all actuators are perturbed at once by ±c_k with random
 * signs Δ, at two points a trial however many actuators there are, and moved by
 * a_k·(y₊ − y₋)/(2·c_k·Δ_i). The gain is normalised so that `gain` is that of the first trial:
 * a_k = gain·((1 + A)/(k + 1 + A))^α, c_k = amplitude/(k + 1)^γ.
 *
 * @source J. C. Spall (1992), "Multivariate stochastic approximation using a simultaneous perturbation gradient
 * approximation", IEEE Transactions on Automatic Control 37:332–341; gains: Spall (1998), "Implementation of the
 * simultaneous perturbation algorithm for stochastic optimization", IEEE Transactions on Aerospace and Electronic
 * Systems 34:817–823 (both from memory)
 * @realtime `step` is safe: it allocates nothing
 */
export const spsaLaw: SeekingLaw<SpsaLawParameters, SpsaLawState> = {
  id: 'spsa',
  title: 'Simultaneous perturbation',
  purpose: 'Tries two points a trial, however many actuators there are; for many actuators.',
  source:
    'J. C. Spall (1992), "Multivariate stochastic approximation using a simultaneous perturbation gradient approximation", IEEE Trans. Automatic Control 37:332–341',
  actuatorsMax: 64,
  ditherKinds: ['square'],
  parametersSchema,

  signalNames: (actuators) => perActuator(actuators, signalNames),

  init(parameters, start) {
    const { axes, taper, dwellS, seed } = parameters;
    const state = createSeekCore({
      own: {
        parameters,
        random: createSeededUniform(seed),
        trial: 0,
        side: 0,
        signs: new Float64Array(axes.length),
        reaches: new Float64Array(axes.length),
        dwell: createDwell(),
        above: NaN,
      },
      axes,
      start,
      taper,
      trialS: 2 * dwellS,
      signals: axes.length * signalNames.length,
      reach: axes.map(({ amplitude }) => amplitude),
    });
    state.settleS = 0;
    writeEstimates(state.estimate, state.signals, signalNames.length);
    return state;
  },

  step(state, input, dtS) {
    const { own } = state;
    if (!admit(state, input, dtS)) {
      own.side = 0;
      state.settleS = 0;
      restartDwell(own.dwell);
    } else if (own.side === 0) {
      beginTrial(state);
    } else if (stepDwell(own.dwell, own.parameters.dwellS, own.parameters.settleS, input.objective, dtS)) {
      endPoint(state);
    }
    if (own.side !== 0) remember(state, dtS);
    writeEstimates(state.estimate, state.signals, signalNames.length);
  },
};

function beginTrial(state: SpsaLawState): void {
  const { parameters, signs, reaches, random, trial } = state.own;
  const { axes, amplitudeExponent } = parameters;
  const { scale } = state.taper;
  for (let i = 0; i < signs.length; i += 1) {
    const { amplitude } = axes[i] as { amplitude: number };
    signs[i] = nextSign(random);
    reaches[i] = scale * spsaAmplitude(amplitude, amplitudeExponent, trial);
  }
  perturbTo(state, 1);
}

function perturbTo(state: SpsaLawState, side: number): void {
  const { own, dither } = state;
  const { signs, reaches } = own;
  own.side = side;
  restartDwell(own.dwell);
  for (let i = 0; i < signs.length; i += 1) dither[i] = side * at(signs, i) * at(reaches, i);
  fitDithers(state);
}

function endPoint(state: SpsaLawState): void {
  const { own, change, signals } = state;
  const { parameters, dwell, signs, reaches, trial } = own;
  const mean = dwell.sum / dwell.count;
  if (own.side === 1) {
    own.above = mean;
    perturbTo(state, -1);
    return;
  }
  const { axes, stability, gainExponent, dwellS } = parameters;
  const decay = spsaGain((1 + stability) ** gainExponent, stability, gainExponent, trial);
  for (let i = 0; i < axes.length; i += 1) {
    const { gain } = axes[i] as { gain: number };
    const gradient = (own.above - mean) / (2 * at(reaches, i) * at(signs, i));
    change[i] = gain * decay * gradient;
    signals[i * signalNames.length + 1] = gradient;
  }
  moveAll(state, 2 * dwellS);
  own.trial = trial + 1;
  beginTrial(state);
}
