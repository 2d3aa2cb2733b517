import { z } from 'zod';
import { createDwell, restartDwell, stepDwell, type Dwell } from './dwell.js';
import { writeEstimates } from './gradient-estimator.js';
import { axesOf, dwellingAxis, dwellParameters, taperParameter } from './law-parameters.js';
import { admit, at, createSeekCore, moveAll, remember, type SeekCore } from './seek-core.js';
import type { SeekingLaw } from './seeking-law.js';
import { perActuator } from './signal-names.js';

const parametersSchema = z
  .object({ axes: axesOf(dwellingAxis({}), 16), ...dwellParameters, taper: taperParameter })
  .refine(({ dwellS, settleS }) => settleS < dwellS, {
    message: 'Settling must end before the dwell does.',
    path: ['settleS'],
  });
export type PerturbObserveLawParameters = z.infer<typeof parametersSchema>;

interface PerturbObserveOwn {
  readonly parameters: PerturbObserveLawParameters;
  /** Direction in which each actuator goes next, +1 or −1. */
  readonly directions: Float64Array;
  /** The actuator that was moved last. */
  moved: number;
  readonly dwell: Dwell;
  /** Mean of the objective before the last move; NaN before the first. */
  before: number;
}

export type PerturbObserveLawState = SeekCore<PerturbObserveOwn>;

const signalNames = ['estimate', 'direction'];

/**
 * Perturb and observe, the baseline: a step of the size `amplitude`, a look at the objective, on in the same
 * direction if it did not fall and back if it did; several actuators by turns. There is no dither: the estimate
 * itself walks. Around a quadratic peak −c·e² with the grid off by e, |e| < Δ/2, it walks over three points and
 * loses c·(e² + Δ²/2) on average.
 *
 * @source the common hill-climbing rule; e.g. T. Esram and P. L. Chapman (2007), "Comparison of photovoltaic array
 * maximum power point tracking techniques", IEEE Transactions on Energy Conversion 22:439–449 (from memory)
 * @realtime `step` is safe: it allocates nothing
 */
export const perturbObserveLaw: SeekingLaw<PerturbObserveLawParameters, PerturbObserveLawState> = {
  id: 'perturb-observe',
  title: 'Perturb and observe',
  purpose: 'Steps on while the objective rises and back when it falls; the baseline to compare with.',
  source:
    'T. Esram and P. L. Chapman (2007), "Comparison of photovoltaic array maximum power point tracking techniques", IEEE Trans. Energy Conversion 22:439–449',
  actuatorsMax: 16,
  ditherKinds: ['square'],
  parametersSchema,

  signalNames: (actuators) => perActuator(actuators, signalNames),

  init(parameters, start) {
    const { axes, taper, dwellS } = parameters;
    const directions = new Float64Array(axes.length).fill(1);
    const state = createSeekCore({
      own: { parameters, directions, moved: 0, dwell: createDwell(), before: NaN },
      axes,
      start,
      taper,
      trialS: dwellS,
      signals: axes.length * signalNames.length,
      reach: axes.map(() => 0),
    });
    state.settleS = 0;
    writeEstimates(state.estimate, state.signals, signalNames.length);
    return state;
  },

  step(state, input, dtS) {
    const { own } = state;
    if (!admit(state, input, dtS)) turnBack(state);
    else {
      if (stepDwell(own.dwell, own.parameters.dwellS, own.parameters.settleS, input.objective, dtS))
        judge(state, dtS);
      remember(state, dtS);
    }
    writeEstimates(state.estimate, state.signals, signalNames.length);
  },
};

function judge(state: PerturbObserveLawState, dtS: number): void {
  const { own, taper, signals, change } = state;
  const { dwell, directions, parameters } = own;
  const { axes } = parameters;
  const mean = dwell.sum / dwell.count;
  if (mean < own.before) directions[own.moved] = -at(directions, own.moved);
  // The first dwell shows what the start is worth and moves nothing yet but the first actuator.
  const next = own.before === own.before ? (own.moved + 1) % axes.length : 0;
  own.before = mean;
  restartDwell(dwell);
  const { amplitude } = axes[next] as { amplitude: number };
  const step = amplitude * taper.scale;
  const room =
    at(directions, next) > 0
      ? at(state.highest, next) - at(state.estimate, next)
      : at(state.estimate, next) - at(state.lowest, next);
  // At its edge it looks the other way, where there is room.
  if (room < step / 2) directions[next] = -at(directions, next);
  change.fill(0);
  change[next] = at(directions, next) * step;
  moveAll(state, Math.max(parameters.dwellS, dtS));
  own.moved = next;
  for (let i = 0; i < axes.length; i += 1) signals[i * signalNames.length + 1] = at(directions, i);
}

/** Away from where the objective is not valid: the way of the last move. */
function turnBack(state: PerturbObserveLawState): void {
  const { own } = state;
  if (own.before === own.before) turnDirection(own);
  own.before = NaN;
  state.settleS = 0;
  restartDwell(own.dwell);
}

function turnDirection({ directions, moved }: PerturbObserveOwn): void {
  directions[moved] = -at(directions, moved);
}
