import { z } from 'zod';
import { axesOf, dwellingAxis, parameter, taperParameter } from './law-parameters.js';
import { writeEstimates } from './gradient-estimator.js';
import {
  admit,
  at,
  createSeekCore,
  isSettled,
  moveAll,
  fitDithers,
  remember,
  type SeekCore,
} from './seek-core.js';
import type { SeekingInput, SeekingLaw } from './seeking-law.js';
import { perActuator } from './signal-names.js';

const axis = dwellingAxis({
  scansPerPeriod: parameter(
    z.number().gt(2).max(1e9),
    'Dither period',
    'scans',
    'Scans per period of the perturbation; more than two.',
  ),
  phaseRad: parameter(
    z
      .number()
      .min(-2 * Math.PI)
      .max(2 * Math.PI)
      .default(0),
    'Demodulation lag',
    'rad',
    'Lag of the demodulation that makes up for that of plant and washout at the dither frequency.',
  ),
  gain: parameter(
    z.number().positive().max(1e12),
    'Gain γ',
    'actuator unit² / objective unit per scan',
    'Change of the estimate per scan and slope. On a peak with second derivative f″ the error shrinks by gain · |f″| each scan.',
  ),
});

const parametersSchema = z.object({
  axes: axesOf(axis, 16),
  washoutPole: parameter(
    z
      .number()
      .gt(-1)
      .lt(1)
      .refine((h) => h !== 0, 'Use a number between −1 and 1 that is not 0.')
      .default(-0.9),
    'Washout h',
    '',
    'The washout is (z − 1)/(z + h): its pole lies at −h; nearer to −1 for a lower corner.',
  ),
  taper: taperParameter,
});
export type DiscreteLawParameters = z.infer<typeof parametersSchema>;

interface DiscreteOwn {
  readonly parameters: DiscreteLawParameters;
  readonly phases: Float64Array;
  /** Objective and washout output of the scan before; NaN before the first. */
  lastObjective: number;
  washed: number;
  /** Scale of the dithers that were put out last. */
  scale: number;
}

export type DiscreteLawState = SeekCore<DiscreteOwn>;

const signalNames = ['estimate', 'washout', 'demodulated'];

/**
 * Discrete-time gradient seeking: washout (z − 1)/(z + h), dither a·cos ωk, demodulation by (2/a)·cos(ωk − φ),
 * integrator γ/(z − 1); the factor 2/a, which the original leaves in γ, makes γ independent of the amplitude.
 * It counts scans (`trialS` and `settleS` too) and does not look at their length: for rigs whose plant answers within a scan.
 *
 * The averaged error shrinks by 1 − γ·|f''|·Re[e^{jφ}W(e^{jω})] a scan, W being washout and plant.
 *
 * @source J.-Y. Choi, M. Krstić, K. B. Ariyur and J. S. Lee (2002), "Extremum seeking control for discrete-time
 * systems", IEEE Transactions on Automatic Control 47:318–323 (from memory)
 * @realtime `step` is safe: it allocates nothing
 */
export const discreteLaw: SeekingLaw<DiscreteLawParameters, DiscreteLawState> = {
  id: 'discrete',
  title: 'Discrete-time gradient',
  purpose: 'The gradient law counted in scans, for plants that answer within a scan.',
  source:
    'J.-Y. Choi, M. Krstić, K. B. Ariyur and J. S. Lee (2002), "Extremum seeking control for discrete-time systems", IEEE Trans. Automatic Control 47:318–323',
  actuatorsMax: 16,
  ditherKinds: ['sine'],
  parametersSchema,

  signalNames: (actuators) => perActuator(actuators, signalNames),

  init(parameters, start) {
    const { axes, taper } = parameters;
    // The first step answers no dither: cos of a quarter period is none.
    const phases = new Float64Array(axes.length).fill(-Math.PI / 2);
    const state = createSeekCore({
      own: { parameters, phases, lastObjective: NaN, washed: 0, scale: 1 },
      axes,
      start,
      taper,
      trialS: Math.max(...axes.map(({ scansPerPeriod }) => scansPerPeriod)),
      signals: axes.length * signalNames.length,
      reach: axes.map(({ amplitude }) => amplitude),
    });
    writeEstimates(state.estimate, state.signals, signalNames.length);
    return state;
  },

  step(state, input, dtS) {
    const { own } = state;
    if (admit(state, input, dtS)) climb(state, input, dtS);
    else {
      own.lastObjective = NaN;
      own.washed = 0;
      own.phases.fill(-Math.PI / 2);
      own.scale = 1;
    }
    writeEstimates(state.estimate, state.signals, signalNames.length);
  },
};

function climb(state: DiscreteLawState, { objective }: SeekingInput, dtS: number): void {
  const { own, signals, change, dither } = state;
  const { parameters, phases } = own;
  const { axes, washoutPole } = parameters;
  const rise = own.lastObjective === own.lastObjective ? objective - own.lastObjective : 0;
  own.lastObjective = objective;
  own.washed = rise - washoutPole * own.washed;
  for (let i = 0; i < axes.length; i += 1) {
    const { amplitude, phaseRad, gain } = axes[i] as DiscreteLawParameters['axes'][number];
    const demodulated = (2 / (amplitude * own.scale)) * Math.cos(at(phases, i) - phaseRad) * own.washed;
    change[i] = gain * demodulated;
    signals[i * signalNames.length + 1] = own.washed;
    signals[i * signalNames.length + 2] = demodulated;
  }
  // Settling, trials and taper are counted in scans.
  if (isSettled(state, 1)) moveAll(state, dtS);
  remember(state, 1);
  own.scale = state.taper.scale;
  for (let i = 0; i < axes.length; i += 1) {
    const { amplitude, scansPerPeriod } = axes[i] as DiscreteLawParameters['axes'][number];
    phases[i] = (at(phases, i) + (2 * Math.PI) / scansPerPeriod) % (2 * Math.PI);
    dither[i] = amplitude * own.scale * Math.cos(at(phases, i));
  }
  fitDithers(state);
}
