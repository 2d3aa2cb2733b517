import { z } from 'zod';
import { writeEstimates } from './gradient-estimator.js';
import { axesOf, gainParameter, periodicAxis, taperParameter } from './law-parameters.js';
import { held } from './seek-box.js';
import { admit, at, createSeekCore, fitDithers, isSettled, remember, type SeekCore } from './seek-core.js';
import type { SeekingInput, SeekingLaw } from './seeking-law.js';
import { perActuator } from './signal-names.js';

const axis = periodicAxis(['sine'], { gain: gainParameter }).omit({
  speedMax: true,
  phaseRad: true,
  dither: true,
});
type Axis = z.infer<typeof axis>;

const parametersSchema = z.object({ axes: axesOf(axis, 16), taper: taperParameter });
export type BoundedRateLawParameters = z.infer<typeof parametersSchema>;

interface BoundedRateOwn {
  readonly parameters: BoundedRateLawParameters;
  /** What was asked for last, actuator units. */
  readonly applied: Float64Array;
  /** Perturbation that belongs to `applied`, actuator units. */
  readonly ripple: Float64Array;
  /** ωt of each actuator, rad. */
  readonly phases: Float64Array;
  /** Objective less this turns the phase: taken from the first sample, so that no phase is huge. */
  reference: number;
  /** On its way back to the last good point, which it goes to the end even where the objective is valid again. */
  isReturning: boolean;
}

export type BoundedRateLawState = SeekCore<BoundedRateOwn>;

const signalNames = ['estimate', 'turn'];

/**
 * Seeking with a bounded update rate: θ' = √(αω)·cos(ωt − k·y), whose size never exceeds √(αω) = a·ω whatever
 * the objective does, noise and spikes included. On average θ' = (kα/2)·∇y, with a ripple of amplitude
 * a = √(α/ω). Parametrised by a, and by the gain g = kα/2 of the other laws: α = a²·ω, k = 2g/(a²·ω).
 *
 * Only the phase of the perturbation carries the objective: k times the swing of the objective over a period
 * must stay well below a turn for the average to hold. The perturbation is its own reference, so that a lag λ of
 * the plant cannot be made up for by a phase: the rate falls by cos λ and turns its sign beyond a quarter period.
 * A retreat, too, is walked at no more than a·ω.
 *
 * @source A. Scheinker and M. Krstić (2013), "Minimum-seeking for CLFs: universal semiglobally stabilizing
 * feedback under unknown control directions", IEEE Transactions on Automatic Control 58:1107–1122; (2014),
 * "Extremum seeking with bounded update rates", Systems & Control Letters 63:25–31 (both from memory)
 * @realtime `step` is safe: it allocates nothing
 */
export const boundedRateLaw: SeekingLaw<BoundedRateLawParameters, BoundedRateLawState> = {
  id: 'bounded-rate',
  title: 'Bounded update rate',
  purpose: 'Moves at a speed that noise and spikes of the objective cannot raise.',
  source:
    'A. Scheinker and M. Krstić (2014), "Extremum seeking with bounded update rates", Systems & Control Letters 63:25–31',
  actuatorsMax: 16,
  ditherKinds: ['sine'],
  parametersSchema,

  signalNames: (actuators) => perActuator(actuators, signalNames),

  init(parameters, start) {
    const { axes, taper } = parameters;
    const state = createSeekCore({
      own: {
        parameters,
        applied: new Float64Array(axes.length),
        ripple: new Float64Array(axes.length),
        phases: new Float64Array(axes.length),
        reference: NaN,
        isReturning: false,
      },
      axes,
      start,
      taper,
      trialS: Math.max(...axes.map(({ periodS }) => periodS)),
      signals: axes.length * signalNames.length,
      reach: axes.map(({ amplitude }) => amplitude),
    });
    state.own.applied.set(state.estimate);
    writeEstimates(state.estimate, state.signals, signalNames.length);
    return state;
  },

  step(state, input, dtS) {
    const { own } = state;
    if (!admit(state, input, dtS)) own.isReturning = true;
    if (!own.isReturning) climb(state, input, dtS);
    else walkBack(state, dtS);
    writeEstimates(state.estimate, state.signals, signalNames.length);
  },
};

function climb(state: BoundedRateLawState, input: SeekingInput, dtS: number): void {
  const { own, signals } = state;
  const { parameters, phases, applied, ripple } = own;
  const { scale } = state.taper;
  if (own.reference !== own.reference) own.reference = input.objective;
  const isAdapting = isSettled(state, dtS);
  remember(state, dtS);
  for (let i = 0; i < applied.length; i += 1) {
    const { periodS, amplitude, gain } = parameters.axes[i] as Axis;
    const omega = (2 * Math.PI) / periodS;
    const reach = amplitude * scale;
    const turn = isAdapting ? ((2 * gain) / (reach * reach * omega)) * (input.objective - own.reference) : 0;
    const middle = at(phases, i) + (omega * dtS) / 2;
    phases[i] = (at(phases, i) + omega * dtS) % (2 * Math.PI);
    const speed = reach * omega * Math.cos(middle - turn);
    applied[i] = at(applied, i) + speed * dtS;
    ripple[i] = reach * Math.sin(at(phases, i) - turn);
    signals[i * signalNames.length + 1] = turn;
  }
  placeAll(state);
}

/** Holds the applied value in the box, the estimate in its own, and keeps their difference below the amplitude. */
function placeAll(state: BoundedRateLawState): void {
  const { own, estimate, dither, lowest, highest, min, max } = state;
  const { applied, ripple } = own;
  for (let i = 0; i < applied.length; i += 1) {
    const next = Math.max(Math.min(at(applied, i), at(max, i)), at(min, i));
    estimate[i] = Math.max(Math.min(next - at(ripple, i), at(highest, i)), at(lowest, i));
    dither[i] = next - at(estimate, i);
  }
  fitDithers(state);
  for (let i = 0; i < applied.length; i += 1) applied[i] = at(estimate, i) + at(dither, i);
}

function walkBack(state: BoundedRateLawState, dtS: number): void {
  const { own, estimate, dither, lastGood, min, max } = state;
  const { applied, phases, parameters } = own;
  let isThere = true;
  for (let i = 0; i < applied.length; i += 1) {
    const { amplitude, periodS } = parameters.axes[i] as Axis;
    const stride = ((2 * Math.PI) / periodS) * amplitude * dtS;
    const way = at(lastGood, i) - at(applied, i);
    if (stride >= 0) applied[i] = held(at(applied, i) + held(way, -stride, stride), at(min, i), at(max, i));
    if (!(Math.abs(way) <= stride)) isThere = false;
    estimate[i] = at(applied, i);
    dither[i] = 0;
  }
  phases.fill(0);
  own.reference = NaN;
  state.isRetreated = true;
  // It climbs on from the next valid step.
  own.isReturning = !isThere;
}
