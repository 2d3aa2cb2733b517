import { at, edge, type ExperimentInput, type ObjectiveInput } from '../../kit/scenario-input.js';

export const couplingObjective: ObjectiveInput = {
  title: 'Coupled power',
  direction: 'maximise',
  // On the logarithm the main lobe is a parabola all the way down, so that one gain suits all of it.
  expression: 'powerDbm',
  unit: 'dBm',
  validity: [{ condition: 'shutterOpen > 0.5', message: 'There is no light with the shutter closed.' }],
};

/**
 * How Coupling 1 is sought.
 *
 * - Wide search: the main lobe is 7.8 µm in radius, 19 V; a grid of 9 × 9 over 96 V has a point every 12 V, so that one is
 *   within 8.5 V of the peak, above −7 dBm, where the brightest place of a ring has −11.
 * - Periods 1 and 0.7 s, twenty and fourteen scans: stage and meter lag by 20° and 30°.
 * - Amplitude 1 V moves the fibre by 0.3 µm after a turn and 0.4 µm over a long way: at the peak that costs
 *   0.02 dB an axis, and the power bends there by −0.05 dB/V².
 * - Gain 4: the error decays with 0.2 1/s, under the 0.3 · 6.3 / 4 rad/s at which the low-pass would begin to swing. The
 *   drift of 0.04 µm/s at most is 0.1 V/s, which it trails by half a volt.
 */
const drives = [
  { channel: 'driveX', amplitude: 1, periodS: 1, phaseDeg: 5, gain: 4, min: 4, max: 96 },
  { channel: 'driveY', amplitude: 1, periodS: 0.7, phaseDeg: 15, gain: 4, min: 4, max: 96 },
];
const law = { id: 'gradient', parameters: { washoutRatio: 0.3, lowPassRatio: 0.3 } } as const;
const wideSearch = {
  starts: { by: 'grid', points: 9 },
  visit: { settleS: 0.3, seekS: 0, averageS: 0.2 },
} as const;

const invalidForS = 5;
const lookForS = 75;
export const holdForS = 120;

/** Looks everywhere and climbs from the brightest place. */
const look = (id: string, title: string, x: number): ExperimentInput['graph']['steps'][number] => ({
  kind: 'seek',
  id,
  title,
  ...at(x, 120),
  parameters: {
    law,
    actuators: drives,
    wideSearch,
    end: { afterS: lookForS, whenConverged: null, when: null },
    invalidForS,
  },
});

export const couplingExperiment: ExperimentInput = {
  title: 'Find the peak, hold it, and find it again',
  objectiveId: null,
  graph: {
    steps: [
      { kind: 'start', id: 'start', title: '', ...at(0, 120), parameters: {} },
      look('find', 'Find the peak', 220),
      {
        kind: 'seek',
        id: 'hold',
        title: 'Hold it while it is bright',
        ...at(460, 120),
        parameters: {
          law,
          actuators: drives,
          // Darker than the main lobe is where a climb can stand, brighter than any ring.
          end: { afterS: holdForS, whenConverged: null, when: 'powerDbm < -8' },
          invalidForS,
        },
      },
      look('findAgain', 'Look for it again', 700),
      {
        kind: 'seek',
        id: 'holdAgain',
        title: 'Hold it again',
        ...at(940, 120),
        parameters: {
          law,
          actuators: drives,
          end: { afterS: holdForS, whenConverged: null, when: null },
          invalidForS,
        },
      },
      {
        kind: 'check',
        id: 'check',
        title: 'Brighter than any ring',
        ...at(1180, 120),
        parameters: { criterion: 'holdAgain.objective > -3' },
      },
      { kind: 'finish', id: 'finish', title: '', ...at(1420, 120), parameters: {} },
    ],
    edges: [
      edge('start', 'done', 'find'),
      edge('find', 'done', 'hold'),
      edge('find', 'failed', 'finish'),
      edge('hold', 'done', 'findAgain'),
      edge('hold', 'failed', 'finish'),
      edge('findAgain', 'done', 'holdAgain'),
      edge('findAgain', 'failed', 'finish'),
      edge('holdAgain', 'done', 'check'),
      edge('holdAgain', 'failed', 'finish'),
      edge('check', 'yes', 'finish'),
      edge('check', 'no', 'finish'),
    ],
  },
};
