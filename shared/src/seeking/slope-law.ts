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
import { axesOf, gainParameter, parameter, periodicAxis } from './law-parameters.js';
import { isSettled, type SeekCore } from './seek-core.js';
import { ditherKinds, type SeekingLaw } from './seeking-law.js';
import { perActuator } from './signal-names.js';
import { recoveredShare } from './washout-share.js';

const axis = periodicAxis(ditherKinds, {
  gain: gainParameter,
  slope: parameter(
    z.number(),
    'Wanted slope',
    'objective unit / actuator unit',
    'Slope at which the estimate rests; 0 is the peak, above zero lies on the rising side of it.',
  ),
  slopeShare: parameter(
    z.number().positive().max(1).nullable().default(null),
    'Recovered share of the slope',
    '',
    'How much of the slope the demodulation shows; empty for a plant without lag. Behind a lag whose phase is made up for: the gain of plant and washout at the dither frequency.',
  ),
});

const parametersSchema = z.object({ axes: axesOf(axis, 16), ...filterParameters });
export type SlopeLawParameters = z.infer<typeof parametersSchema>;

interface SlopeOwn extends Demodulating<SlopeLawParameters> {
  /** What the estimator shows at the wanted slope, objective unit / actuator unit. */
  readonly references: Float64Array;
}

export type SlopeLawState = SeekCore<SlopeOwn>;

/**
 * Slope seeking: rests where the objective has a given slope, for plants whose best point is a cliff's edge or
 * whose curve has no peak. θ̂' = k·(ξ − r) with ξ as in the gradient law and r what ξ shows at the wanted slope:
 * slope · Re[e^{jφ}H(jω)] for the washout H (the original's r = (a·f'ref/2)·Re H before scaling by 2/a).
 * Stable where the curve bends down (f'' < 0).
 *
 * @source K. B. Ariyur and M. Krstić (2004), "Slope seeking: a generalization of extremum seeking", International
 * Journal of Adaptive Control and Signal Processing 18:1–22 (from memory)
 * @realtime `step` is safe: it allocates nothing
 */
export const slopeLaw: SeekingLaw<SlopeLawParameters, SlopeLawState> = {
  id: 'slope',
  title: 'Slope',
  purpose: 'Rests where the objective rises with a given slope, for curves whose peak must not be reached.',
  source:
    'K. B. Ariyur and M. Krstić (2004), "Slope seeking: a generalization of extremum seeking", Int. J. Adaptive Control and Signal Processing 18:1–22',
  actuatorsMax: 16,
  ditherKinds,
  parametersSchema,

  signalNames: (actuators) => perActuator(actuators, gradientSignals),

  init(parameters, start) {
    const { axes, washoutRatio } = parameters;
    return createDemodulatingCore(parameters, start, () => ({
      references: Float64Array.from(
        axes,
        (a) => a.slope * (a.slopeShare ?? recoveredShare(a.dither, washoutRatio, a.phaseRad)),
      ),
    }));
  },

  step(state, input, dtS) {
    if (observe(state, input, dtS)) {
      if (isSettled(state, dtS)) climbAbove(state, state.own.references, dtS);
      act(state, dtS);
    }
    writeEstimates(state.estimate, state.signals);
  },
};
