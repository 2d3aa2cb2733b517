import { z } from 'zod';
import {
  act,
  climbAbove,
  createDemodulatingCore,
  filterParameters,
  observe,
  type Demodulating,
} from './demodulating-core.js';
import { gradientSignals, writeEstimates } from './gradient-estimator.js';
import { axesOf, gainParameter, periodicAxis } from './law-parameters.js';
import { isSettled, type SeekCore } from './seek-core.js';
import { ditherKinds, type SeekingLaw } from './seeking-law.js';
import { perActuator } from './signal-names.js';

const axis = periodicAxis(ditherKinds, { gain: gainParameter });

const parametersSchema = z.object({ axes: axesOf(axis, 16), ...filterParameters });
export type GradientLawParameters = z.infer<typeof parametersSchema>;

interface GradientOwn extends Demodulating<GradientLawParameters> {
  /** Slopes at which the estimates rest: none. */
  readonly references: Float64Array;
}

export type GradientLawState = SeekCore<GradientOwn>;

/**
 * Gradient seeking with washout, demodulation, low-pass and integrator, for one actuator or several.
 *
 * With θ = θ̂ + a·sin ωt the law forms ξ = (2/a)·sin(ωt − φ)·washout(y) for each actuator, whose mean is the
 * slope of the objective times Re[e^{jφ}F(jω)H(jω)] for a plant F behind the map and the washout H, low-passes it
 * and integrates θ̂' = k·ξ. On a quadratic with second derivative f'' the averaged error decays with the rate
 * k·|f''|·Re[e^{jφ}F(jω)H(jω)] while the low-pass is fast beside it. With several actuators the frequencies must
 * differ, and no sum or difference of two may meet a third (Ariyur & Krstić 2003, ch. 2, from memory).
 *
 * @source M. Krstić and H.-H. Wang (2000), "Stability of extremum seeking feedback for general nonlinear
 * dynamic systems", Automatica 36:595–601; square dither: Y. Tan, D. Nešić and I. Mareels (2008), "On the choice
 * of dither in extremum seeking systems", Automatica 44:1446–1450 (both from memory)
 * @realtime `step` is safe: it allocates nothing
 */
export const gradientLaw: SeekingLaw<GradientLawParameters, GradientLawState> = {
  id: 'gradient',
  title: 'Gradient',
  purpose: 'Climbs along the slope that a small dither shows; the first choice for one actuator or a few.',
  source:
    'M. Krstić and H.-H. Wang (2000), "Stability of extremum seeking feedback for general nonlinear dynamic systems", Automatica 36:595–601',
  actuatorsMax: 16,
  ditherKinds,
  parametersSchema,

  signalNames: (actuators) => perActuator(actuators, gradientSignals),

  init: (parameters, start) =>
    createDemodulatingCore(parameters, start, (dithers) => ({
      references: new Float64Array(dithers.length),
    })),

  step(state, input, dtS) {
    if (observe(state, input, dtS)) {
      if (isSettled(state, dtS)) climbAbove(state, state.own.references, dtS);
      act(state, dtS);
    }
    writeEstimates(state.estimate, state.signals);
  },
};
