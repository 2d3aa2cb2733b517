import {
  createFirstOrderFilter,
  resetFirstOrderFilter,
  stepLowPass,
  stepWashout,
  type FirstOrderFilterState,
} from '../signals/first-order-filter.js';
import type { SeekingLaw, SeekingOutput, SeekingState } from './seeking-law.js';

/** Parameters of the gradient law; it always climbs: feed it the negative of what is to be made small. */
export interface GradientLawParameters {
  /** Dither amplitude a (half of peak to peak), actuator unit; above zero. */
  amplitude: number;
  /** Dither period, s; above zero. */
  periodS: number;
  /** Washout corner over dither frequency; above zero. */
  washoutRatio: number;
  /** Low-pass corner over dither frequency; above zero. */
  lowPassRatio: number;
  /** Integrator gain k, actuator unit per second per (objective unit per actuator unit); above zero. */
  gain: number;
  /** Lag φ of the demodulating sine, rad: −∠(plant · washout) at the dither frequency recovers the full slope. */
  phaseRad: number;
  /** Box of the estimate, actuator unit. */
  min: number;
  max: number;
}

export interface GradientLawState extends SeekingState {
  readonly parameters: GradientLawParameters;
  /** Phase of the dither that was put out last, rad. */
  phase: number;
  readonly washout: FirstOrderFilterState;
  readonly lowPass: FirstOrderFilterState;
  /** No adaptation for this long: filters settle after a start or a retreat, s. */
  settleS: number;
  /** Estimate that has seen a whole valid dither period since; where a retreat goes. */
  lastGood: number;
  /** Estimate at the beginning of the present valid period. */
  candidate: number;
  /** Valid time since `candidate` was taken, s. */
  validS: number;
  /** True while the objective is invalid and the law waits at `lastGood`. */
  isRetreated: boolean;
  readonly output: SeekingOutput;
}

const Signal = { estimate: 0, washout: 1, demodulated: 2, gradient: 3 } as const;

/**
 * Gradient seeking with washout, demodulation, low-pass and integrator.
 *
 * The objective given to a step is taken as the answer to the dither of the step before. With
 * θ = θ̂ + a·sin ωt the law forms ξ = (2/a)·sin(ωt − φ)·washout(y), whose mean is the slope of the
 * objective times Re[e^{jφ}F(jω)H(jω)] for a plant F behind the map and the washout H, low-passes it and
 * integrates θ̂' = k·ξ. On a quadratic with second derivative f'' the averaged error decays with the rate
 * k·|f''|·Re[e^{jφ}F(jω)H(jω)] while the low-pass is fast beside it.
 *
 * Where the objective is not valid it stops dither and adaptation and goes back to the last estimate that
 * saw a whole valid dither period; once valid again it lets its filters settle for one period.
 * The estimate is held in the box; the integrator has no state but the estimate, so it cannot wind up.
 *
 * @source M. Krstić and H.-H. Wang (2000), "Stability of extremum seeking feedback for general nonlinear
 * dynamic systems", Automatica 36:595–601
 * @realtime `step` is safe: it allocates nothing
 */
export const gradientLaw: SeekingLaw<GradientLawParameters, GradientLawState> = {
  id: 'gradient',
  signalNames: ['estimate', 'washout', 'demodulated', 'gradient'],

  init(parameters, start) {
    const estimate = clamp(start, parameters.min, parameters.max);
    return {
      parameters,
      estimate,
      phase: 0,
      washout: createFirstOrderFilter(),
      lowPass: createFirstOrderFilter(),
      settleS: parameters.periodS,
      lastGood: estimate,
      candidate: estimate,
      validS: 0,
      isRetreated: false,
      signals: Float64Array.of(estimate, NaN, NaN, NaN),
      output: { estimate, dither: 0 },
    };
  },

  step(state, input, dtS) {
    if (input.isValid && Number.isFinite(input.objective)) climb(state, input.objective, dtS);
    else retreat(state);
    state.signals[Signal.estimate] = state.estimate;
    state.output.estimate = state.estimate;
    return state.output;
  },
};

function climb(state: GradientLawState, objective: number, dtS: number): void {
  const { amplitude, periodS, washoutRatio, lowPassRatio, gain, phaseRad, min, max } = state.parameters;
  const omega = (2 * Math.PI) / periodS;
  state.isRetreated = false;
  const washed = stepWashout(state.washout, objective, washoutRatio * omega, dtS);
  const demodulated = (2 / amplitude) * Math.sin(state.phase - phaseRad) * washed;
  const gradient = stepLowPass(state.lowPass, demodulated, lowPassRatio * omega, dtS);
  if (state.settleS > 0) state.settleS -= dtS;
  else state.estimate = clamp(state.estimate + gain * gradient * dtS, min, max);
  rememberGood(state, dtS);
  state.signals[Signal.washout] = washed;
  state.signals[Signal.demodulated] = demodulated;
  state.signals[Signal.gradient] = gradient;
  state.phase = (state.phase + omega * dtS) % (2 * Math.PI);
  state.output.dither = amplitude * Math.sin(state.phase);
}

/** Keeps the estimate of one to two dither periods ago: the newest that is known to have been valid throughout. */
function rememberGood(state: GradientLawState, dtS: number): void {
  state.validS += dtS;
  if (state.validS < state.parameters.periodS) return;
  state.lastGood = state.candidate;
  state.candidate = state.estimate;
  state.validS = 0;
}

function retreat(state: GradientLawState): void {
  state.estimate = state.lastGood;
  state.candidate = state.lastGood;
  state.validS = 0;
  state.isRetreated = true;
  state.settleS = state.parameters.periodS;
  state.phase = 0;
  resetFirstOrderFilter(state.washout);
  resetFirstOrderFilter(state.lowPass);
  state.signals.fill(NaN);
  state.output.dither = 0;
}

function clamp(value: number, min: number, max: number): number {
  return Math.min(Math.max(value, min), max);
}
