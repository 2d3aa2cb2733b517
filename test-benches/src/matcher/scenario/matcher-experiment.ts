import { at, edge, type ExperimentInput, type ObjectiveInput } from '../../kit/scenario-input.js';

export const matcherObjective: ObjectiveInput = {
  title: 'Reflected share',
  direction: 'minimise',
  expression: 'reflectedShare',
  unit: '%',
  validity: [
    { condition: 'rfOn > 0.5', message: 'Without power the figure means nothing.' },
    {
      condition: 'forward > 100',
      message: 'So little power is ramping up, or folded back to nearly nothing.',
    },
  ],
};

/**
 * How Matcher 1 is sought, in real seconds; the bench runs at five times its speed.
 *
 * The plant: power sensors of 0.1 s of bench time, 0.02 s; scan 0.05 s. About the match, in % of reflected share
 * per (% of travel)², the shunt capacitor bends by 0.36, the series one by 7.1, and they are coupled by 1.5: along
 * the valley the share bends a hundred times less than across.
 * - The share does not change while the generator folds back, so that it leads to the match from afar, which the
 *   delivered power would not.
 * - Survey of the series capacitor with the shunt one at rest: the floor of the valley, where the share is a bowl.
 * - Newton, since it goes along the valley as fast as across; a gradient with a gain for each capacitor goes along
 *   it 24 times slower, and trails behind the load.
 * - Amplitudes 0.6 % and 0.15 %: each costs f''a²/4, 0.03 and 0.04 % of the power; seven and thirty steps of the
 *   motors.
 * - Periods 1 s and 0.62 s, ω = 6.3 and 10.1 rad/s, sixteen and more times the rate. Phase: what sensors and one
 *   scan lag, less what the washout leads.
 * - Rate 0.35 1/s. The match drifts by 0.06 % of shunt travel per s at most: the estimate trails by 0.2 % along the
 *   valley. The Hessian and its inverse follow as
 *   quickly, since the coupling is learnt on the way: where they were slow, some runs stuck beside the valley.
 */
export const matcherSeeking = {
  law: {
    id: 'newton',
    parameters: {
      rate: 0.35,
      inverseRate: 0.4,
      washoutRatio: 0.3,
      lowPassRatio: 0.2,
      hessianRatio: 0.3,
      lag: { timeConstantS: 0.02, deadTimeS: 0 },
    },
  },
  actuators: [
    {
      channel: 'shunt',
      min: 12,
      max: 88,
      amplitude: 0.6,
      periodS: 1,
      phaseDeg: 0,
      speedMax: 0.37,
      own: { curvature: 0.36 },
    },
    {
      channel: 'series',
      min: 22,
      max: 58,
      amplitude: 0.15,
      periodS: 0.62,
      phaseDeg: 10,
      speedMax: 0.15,
      own: { curvature: 7.1 },
    },
  ],
} as const;

export const seekForS = 180;

export const matcherExperiment: ExperimentInput = {
  title: 'Find and hold the match',
  objectiveId: null,
  graph: {
    steps: [
      { kind: 'start', id: 'start', title: '', ...at(0, 120), parameters: {} },
      {
        kind: 'survey',
        id: 'survey',
        title: 'Find the floor of the valley',
        ...at(220, 120),
        parameters: {
          actuators: [{ channel: 'series', from: 26, to: 56, points: 31, isUpAndDown: false }],
          settleS: 0.6,
          averageS: 0.3,
        },
      },
      {
        kind: 'move',
        id: 'move',
        title: 'Go there',
        ...at(460, 120),
        parameters: {
          targets: [{ channel: 'series', value: { expression: 'survey.best.series' } }],
          rampS: 3,
          timeoutS: 30,
        },
      },
      {
        kind: 'hold',
        id: 'hold',
        title: 'Let the power come up',
        ...at(700, 120),
        parameters: { durationS: 2 },
      },
      {
        kind: 'seek',
        id: 'seek',
        title: 'Seek and hold the match',
        ...at(940, 120),
        parameters: {
          law: { ...matcherSeeking.law },
          actuators: matcherSeeking.actuators.map((actuator) => ({ ...actuator })),
          end: { afterS: seekForS, whenConverged: null, when: null },
          invalidForS: 10,
        },
      },
      {
        kind: 'check',
        id: 'check',
        title: 'Less than one percent comes back',
        ...at(1180, 120),
        parameters: { criterion: 'seek.objective <= 1' },
      },
      { kind: 'finish', id: 'finish', title: '', ...at(1420, 120), parameters: {} },
    ],
    edges: [
      edge('start', 'done', 'survey'),
      edge('survey', 'done', 'move'),
      edge('survey', 'failed', 'finish'),
      edge('move', 'done', 'hold'),
      edge('move', 'timeout', 'finish'),
      edge('hold', 'done', 'seek'),
      edge('seek', 'done', 'check'),
      edge('seek', 'failed', 'finish'),
      edge('check', 'yes', 'finish'),
      edge('check', 'no', 'finish'),
    ],
  },
};
