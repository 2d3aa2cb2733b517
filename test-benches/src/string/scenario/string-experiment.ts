import { at, edge, type ExperimentInput, type ObjectiveInput } from '../../kit/scenario-input.js';

export const powerObjective: ObjectiveInput = {
  title: 'Power of the string',
  direction: 'maximise',
  expression: 'power',
  unit: 'W',
  validity: [
    { condition: 'running > 0.5', message: 'The converter has let go of the string.' },
    { condition: 'irradiance > 20', message: 'It is too dark for the figure to mean anything.' },
  ],
};

/**
 * How String 1 is sought: by the ripple that its converter has anyway, with nothing injected.
 *
 * - Ripple: 1.5 V with a period of 0.5 s, ten scans of it; voltage and power are measured in the same line, so that no
 *   lag lies between them. Least ripple that is worked with: 0.5 V.
 * - Near its best point the power bends by about 1 W/V² in full light and 0.2 in a cloud. Gain 0.3: the error decays
 *   with 0.3 and 0.06 1/s, under a tenth of the low-pass of 0.2 ω = 2.5 rad/s. More gain follows nothing that there
 *   is to follow, the best voltage moves by few volts, but takes the edges of clouds for slopes.
 */
const seeking = {
  channel: 'voltageSetpoint',
  dither: 'measured',
  measuredChannel: 'voltage',
  amplitude: 0.5,
  periodS: 0.5,
  gain: 0.3,
} as const;
const law = { id: 'gradient', parameters: { washoutRatio: 0.3, lowPassRatio: 0.2 } } as const;

/** About four fifths of the open-circuit voltage, where every string of these modules has its best point in even light. */
const knee = { from: 115, start: 150, to: 185 };
export const trackForS = 300;

/** Through broken cloud, in even light: begins on the knee and stays with it. */
export const trackExperiment: ExperimentInput = {
  title: 'Hold the best point by the ripple',
  objectiveId: null,
  graph: {
    steps: [
      { kind: 'start', id: 'start', title: '', ...at(0, 120), parameters: {} },
      {
        kind: 'move',
        id: 'move',
        title: 'Go to the knee',
        ...at(220, 120),
        parameters: {
          targets: [{ channel: 'voltageSetpoint', value: knee.start }],
          rampS: 2,
          timeoutS: 20,
        },
      },
      {
        kind: 'seek',
        id: 'seek',
        title: 'Follow the best point',
        ...at(460, 120),
        parameters: {
          law,
          actuators: [{ ...seeking, min: knee.from, max: knee.to }],
          end: { afterS: trackForS, whenConverged: null, when: null },
          invalidForS: 10,
        },
      },
      {
        kind: 'check',
        id: 'check',
        title: 'Still on the knee',
        ...at(700, 120),
        parameters: { criterion: '130 < seek.best.voltageSetpoint < 175' },
      },
      { kind: 'finish', id: 'finish', title: '', ...at(940, 120), parameters: {} },
    ],
    edges: [
      edge('start', 'done', 'move'),
      edge('move', 'done', 'seek'),
      edge('move', 'timeout', 'finish'),
      edge('seek', 'done', 'check'),
      edge('seek', 'failed', 'finish'),
      edge('check', 'yes', 'finish'),
      edge('check', 'no', 'finish'),
    ],
  },
};

/** In partial shade: looks at all peaks, each point averaged over a whole period of the ripple, and holds the highest. */
export const shadeExperiment: ExperimentInput = {
  title: 'Find the highest peak in partial shade',
  objectiveId: null,
  graph: {
    steps: [
      { kind: 'start', id: 'start', title: '', ...at(0, 120), parameters: {} },
      {
        kind: 'survey',
        id: 'survey',
        title: 'Look at all peaks',
        ...at(220, 120),
        parameters: {
          actuators: [{ channel: 'voltageSetpoint', from: 186, to: 26, points: 41, isUpAndDown: false }],
          settleS: 0.3,
          averageS: 0.5,
        },
      },
      {
        kind: 'move',
        id: 'move',
        title: 'Go to the highest',
        ...at(460, 120),
        parameters: {
          targets: [{ channel: 'voltageSetpoint', value: { expression: 'survey.best.voltageSetpoint' } }],
          rampS: 1,
          timeoutS: 20,
        },
      },
      {
        kind: 'seek',
        id: 'seek',
        title: 'Seek and hold its top',
        ...at(700, 120),
        parameters: {
          law,
          actuators: [{ ...seeking, min: 22, max: 188 }],
          end: { afterS: 60, whenConverged: null, when: null },
          invalidForS: 10,
        },
      },
      {
        kind: 'check',
        id: 'check',
        title: 'As good as surveyed',
        ...at(940, 120),
        parameters: { criterion: 'seek.objective >= 0.98 * survey.best.objective' },
      },
      { kind: 'finish', id: 'finish', title: '', ...at(1180, 120), parameters: {} },
    ],
    edges: [
      edge('start', 'done', 'survey'),
      edge('survey', 'done', 'move'),
      edge('survey', 'failed', 'finish'),
      edge('move', 'done', 'seek'),
      edge('move', 'timeout', 'finish'),
      edge('seek', 'done', 'check'),
      edge('seek', 'failed', 'finish'),
      edge('check', 'yes', 'finish'),
      edge('check', 'no', 'finish'),
    ],
  },
};
