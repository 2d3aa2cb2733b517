import { z } from 'zod';
import {
  act,
  createDemodulatingCore,
  filterParameters,
  observe,
  withSpeedLimits,
  type Demodulating,
} from './demodulating-core.js';
import { gradientSignals, writeEstimates } from './gradient-estimator.js';
import {
  createHessianEstimator,
  resetHessianEstimator,
  stepHessianEstimator,
  type HessianEstimator,
} from './hessian-estimator.js';
import { axesOf, parameter, periodicAxis } from './law-parameters.js';
import {
  applyRiccatiFilter,
  createRiccatiFilter,
  stepRiccatiFilter,
  type RiccatiFilter,
} from './riccati-filter.js';
import { at, isSettled, moveAll, type SeekCore } from './seek-core.js';
import type { SeekingLaw } from './seeking-law.js';
import { perActuator } from './signal-names.js';

const positive = z.number().positive().max(1e12);

const axis = periodicAxis(['sine'], {
  curvature: parameter(
    positive,
    'Curvature',
    'objective unit / actuator unit²',
    'First guess of the size of the second derivative at the peak, from a survey; the law corrects it.',
  ),
});

function isTriangle(rows: readonly (readonly number[])[], actuators: number): boolean {
  return rows.length === actuators - 1 && rows.every((row, i) => row.length === i + 1);
}

const parametersSchema = z
  .object({
    axes: axesOf(axis, 8),
    rate: parameter(
      positive,
      'Convergence rate',
      '1 / s',
      'Rate with which the estimate approaches the peak, the same in every direction; a tenth of the dither frequency at most.',
    ),
    crossCurvatures: parameter(
      z
        .array(z.array(z.number().min(-1e12).max(1e12)).min(1).max(7))
        .max(7)
        .default([]),
      'Cross curvatures',
      'objective unit / actuator unit²',
      'First guess of the second derivatives between two actuators, sign turned, from a survey: one row for each actuator but the first, with those before it. Empty where nothing is known.',
    ),
    inverseRate: parameter(
      positive,
      'Rate of the inverse Hessian',
      '1 / s',
      'How fast the inverse of the Hessian follows its estimate; of the order of the convergence rate.',
    ),
    ...filterParameters,
    hessianRatio: parameter(
      z.number().positive().max(10).default(0.05),
      'Low-pass of the Hessian',
      'of the lowest dither frequency',
      'Corner of the filter that takes the ripple off the second derivatives.',
    ),
    lag: parameter(
      z
        .object({
          timeConstantS: parameter(
            z.number().min(0).max(1e9).default(0),
            'Time constant',
            's',
            'From Identify.',
          ),
          deadTimeS: parameter(z.number().min(0).max(1e9).default(0), 'Dead time', 's', 'From Identify.'),
        })
        .prefault({}),
      'Lag of the plant',
      '',
      'The second derivatives show at other frequencies than the dither; this makes up for the lag there.',
    ),
  })
  .refine(({ axes, crossCurvatures: rows }) => rows.length === 0 || isTriangle(rows, axes.length), {
    message: 'Give one row for each actuator but the first, each one entry longer than that before; or none.',
    path: ['crossCurvatures'],
  });
export type NewtonLawParameters = z.infer<typeof parametersSchema>;

interface NewtonOwn extends Demodulating<NewtonLawParameters> {
  readonly curvatures: HessianEstimator;
  /** Γ, the inverse of the curvature −Ĥ. */
  readonly inverse: RiccatiFilter;
  readonly curvature: Float64Array;
}

export type NewtonLawState = SeekCore<NewtonOwn>;

/**
 * Newton seeking: the gradient is multiplied with a running inverse of the Hessian, so that the estimate
 * approaches the peak at a rate that is set, θ̂' = rate·Γ·∇̂ with Γ → (−H)⁻¹, along every direction alike and
 * whatever the scale of the objective is (the guess of the curvature scaled along with it).
 *
 * While the Hessian is not known well the step is held by a speed limit: one dither amplitude a period where none
 * is given.
 *
 * Conditions on the frequencies: no ω_i may equal an ω_j, (ω_j + ω_k)/2, ω_j + 2ω_k or ω_j ± ω_k; keep clear of
 * 2ω_j and 3ω_j as well.
 *
 * @source A. Ghaffari, M. Krstić and D. Nešić (2012), "Multivariable Newton-based extremum seeking", Automatica
 * 48:1759–1767 (from memory)
 * @realtime `step` is safe: it allocates nothing
 */
export const newtonLaw: SeekingLaw<NewtonLawParameters, NewtonLawState> = {
  id: 'newton',
  title: 'Newton',
  purpose: 'Climbs at a set rate in every direction, for ridges and for actuators of unlike effect.',
  source:
    'A. Ghaffari, M. Krstić and D. Nešić (2012), "Multivariable Newton-based extremum seeking", Automatica 48:1759–1767',
  actuatorsMax: 8,
  ditherKinds: ['sine'],
  parametersSchema,

  signalNames: (actuators) => [...perActuator(actuators, gradientSignals), ...hessianNames(actuators)],

  init(parameters, start) {
    const { axes, lag, washoutRatio, hessianRatio, inverseRate, crossCurvatures } = parameters;
    const n = axes.length;
    const state = createDemodulatingCore(
      withSpeedLimits(parameters),
      start,
      (dithers) => ({
        curvatures: createHessianEstimator(dithers, lag, washoutRatio, hessianRatio),
        inverse: createRiccatiFilter(
          axes.map(({ curvature }) => curvature),
          inverseRate,
          crossCurvatures,
        ),
        curvature: new Float64Array(n * n),
      }),
      { stride: gradientSignals.length, others: (n * (n + 1)) / 2 },
    );
    restHessian(state);
    return state;
  },

  step(state, input, dtS) {
    if (observe(state, input, dtS)) {
      climb(state, dtS);
      act(state, dtS);
      writeHessian(state);
    } else {
      restHessian(state);
    }
    writeEstimates(state.estimate, state.signals);
  },
};

function climb(state: NewtonLawState, dtS: number): void {
  const { dithers, change } = state;
  const { parameters, estimator, curvatures, inverse, curvature } = state.own;
  stepHessianEstimator(curvatures, dithers, estimator.told, dtS);
  if (!isSettled(state, dtS)) return;
  for (let i = 0; i < curvature.length; i += 1) curvature[i] = -at(curvatures.hessian, i);
  stepRiccatiFilter(inverse, curvature, dtS);
  applyRiccatiFilter(inverse, estimator.gradient, change);
  for (let i = 0; i < change.length; i += 1) change[i] = parameters.rate * at(change, i) * dtS;
  moveAll(state, dtS);
}

/** The Hessian begins again from what the inverse holds. */
function restHessian({ own: { curvatures, inverse } }: NewtonLawState): void {
  resetHessianEstimator(curvatures, inverse.inverse);
}

/** Lower triangle: `hessian` for one actuator, `hessian11`, `hessian21`, `hessian22` for several. */
function hessianNames(actuators: number): string[] {
  if (actuators === 1) return ['hessian'];
  const rows = Array.from({ length: actuators }, (_, i) => i + 1);
  return rows.flatMap((row) => rows.slice(0, row).map((column) => `hessian${row}${column}`));
}

function writeHessian({ own: { curvatures }, signals, estimate }: NewtonLawState): void {
  const { entries, hessian, size } = curvatures;
  const from = estimate.length * gradientSignals.length;
  for (let e = 0; e < entries.length; e += 1) {
    const { row, column } = entries[e] as HessianEstimator['entries'][number];
    signals[from + e] = at(hessian, row * size + column);
  }
}
