import { at, edge, type ExperimentInput, type ObjectiveInput } from '../../kit/scenario-input.js';

export const burnerObjective: ObjectiveInput = {
  title: 'Combustion efficiency',
  direction: 'maximise',
  expression: 'efficiency',
  unit: '%',
  validity: [
    { condition: 'flame > 0.5', message: 'Without a flame the figure means nothing.' },
    { condition: 'co < 4000', message: 'With so much CO the burner is over the cliff.' },
  ],
};

/**
 * How Burner 1 is sought, in real seconds.
 *
 * The plant: time constant 1 s of the burner, run at five times its speed, so τ = 0.2 s; scan 0.05 s. The
 * efficiency falls by 0.08 % per % of trim on the side of much air and bends by f'' = −0.039 % per (% of
 * trim)² at its best point.
 * - Period 2.5 s: ω = 2.51 rad/s, ωτ = 0.50, so the plant leaves 89 % of the dither and lags 26.7°; 50 scans
 *   a period.
 * - Amplitude 1.2 % costs f''a²/4 = 0.014 % of efficiency at the best point. On the slope it answers with
 *   0.09 %, ten times the noise of one scan (about 0.008 %).
 * - Washout 0.3 ω passes 96 % and leads by 16.7°; low-pass 0.5 ω = 1.26 rad/s.
 * - Phase: the plant's lag of 26.7°, less what the washout leads.
 * - Gain 6: climbs the slope at 6 · 0.08 · 0.89 = 0.43 %/s, 45 % in under two minutes; at the best point the
 *   error decays with κ = 6 · 0.039 · 0.86 = 0.20 1/s: a twelfth of ω and less than ωl/4 = 0.31, where it
 *   would begin to swing. The best point drifts by 2 % · 2π / 240 s = 0.05 %/s at most, so that the estimate
 *   trails by 0.05 / 0.20 = 0.26 %, which costs less than 0.002 % of efficiency.
 */
export const burnerSeeking = {
  ditherAmplitude: 1.2,
  ditherPeriodS: 2.5,
  washoutRatio: 0.3,
  lowPassRatio: 0.5,
  gain: 6,
  phaseDeg: 10,
  min: 12,
  max: 75,
} as const;

/** Far from the best on the safe side; there the burner loses more than 3 points. */
export const seekStartPct = 60;
export const seekForS = 300;
/** Least gain that passes, points of efficiency. */
const leastGain = 2;

const {
  ditherAmplitude: amplitude,
  ditherPeriodS: periodS,
  washoutRatio,
  lowPassRatio,
  ...seeking
} = burnerSeeking;

export const burnerExperiment: ExperimentInput = {
  title: 'Find and hold the best air trim',
  objectiveId: null,
  graph: {
    steps: [
      { kind: 'start', id: 'start', title: '', ...at(0, 120), parameters: {} },
      {
        kind: 'survey',
        id: 'survey',
        title: 'Look at the landscape',
        ...at(220, 120),
        parameters: {
          actuators: [{ channel: 'airTrim', from: 14, to: 62, points: 13, isUpAndDown: true }],
          settleS: 0.8,
          averageS: 0.6,
        },
      },
      {
        kind: 'move',
        id: 'move',
        title: 'Go to plenty of air',
        ...at(460, 120),
        parameters: { targets: [{ channel: 'airTrim', value: seekStartPct }], rampS: 3, timeoutS: 30 },
      },
      {
        kind: 'settle',
        id: 'settle',
        title: 'Let it settle',
        ...at(700, 120),
        parameters: { channel: 'efficiency', band: 0.2, forS: 1, timeoutS: 30 },
      },
      {
        kind: 'seek',
        id: 'seek',
        title: 'Seek and hold the best',
        ...at(940, 120),
        parameters: {
          law: { id: 'gradient', parameters: { washoutRatio, lowPassRatio } },
          actuators: [{ channel: 'airTrim', amplitude, periodS, ...seeking }],
          end: { afterS: seekForS, whenConverged: null, when: null },
          invalidForS: 10,
        },
      },
      {
        kind: 'check',
        id: 'check',
        title: 'Two points better',
        ...at(1180, 120),
        parameters: { criterion: `seek.objective - seek.objectiveAtStart >= ${leastGain}` },
      },
      { kind: 'finish', id: 'finish', title: '', ...at(1420, 120), parameters: {} },
    ],
    edges: [
      edge('start', 'done', 'survey'),
      edge('survey', 'done', 'move'),
      edge('survey', 'failed', 'finish'),
      edge('move', 'done', 'settle'),
      edge('move', 'timeout', 'finish'),
      edge('settle', 'done', 'seek'),
      edge('settle', 'timeout', 'seek'),
      edge('seek', 'done', 'check'),
      edge('seek', 'failed', 'finish'),
      edge('check', 'yes', 'finish'),
      edge('check', 'no', 'finish'),
    ],
  },
};
