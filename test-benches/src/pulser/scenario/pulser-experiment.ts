import { at, edge, type ExperimentInput, type ObjectiveInput } from '../../kit/scenario-input.js';

export const pulserObjective: ObjectiveInput = {
  title: 'Clean energy',
  direction: 'maximise',
  expression: 'cleanEnergy',
  unit: 'mJ',
  validity: [
    { condition: 'laserOn > 0.5', message: 'Without a pulse the figure means nothing.' },
    {
      condition: 'mainEnergy > 20',
      message: 'Near the threshold the place of the peak is that of the noise.',
    },
    { condition: 'besideEnergy < 0.35 * mainEnergy', message: 'The pulse has broken up.' },
  ],
};

/** What is tempting: the energy meter alone, which goes on rising over the cliff. Kept to show that it fails. */
export const energyObjective: ObjectiveInput = {
  title: 'Pulse energy',
  direction: 'maximise',
  expression: 'energy',
  unit: 'mJ',
  validity: [{ condition: 'laserOn > 0.5', message: 'Without a pulse the figure means nothing.' }],
};

/**
 * How Pulser 1 is sought, in real seconds; the bench runs at five times its speed.
 *
 * The plant: the supply follows within a scan or two, a pulse every tenth of a second of bench time; scan 0.1 s.
 * Clean energy rises by 0.1 mJ per % of drive just below its best and falls by 3 mJ per % beyond: a cliff, no
 * parabola. Over the delay it bends by 0.002 mJ/µs².
 * - Amplitudes 1.2 % and 12 µs: each shows 0.1 to 0.2 mJ on the slope, against 0.45 mJ of noise in one scan.
 * - Periods 3 s and 2.1 s, ω = 2.1 and 3.0 rad/s; 30 and 21 scans.
 * - Gains: the slope below the cliff carries the drive by 0.15 %/s, about as fast as the best drifts at most; the
 *   delay's error decays with 40 · 0.0022 = 0.09 1/s.
 * - The speed limits, a tenth of what the dithers do, keep the one steep period at the cliff from throwing the
 *   drive far back.
 */
export const pulserSeeking = {
  law: { id: 'gradient', parameters: { washoutRatio: 0.3, lowPassRatio: 0.2 } },
  actuators: [
    {
      channel: 'drive',
      min: 20,
      max: 88,
      amplitude: 1.2,
      periodS: 3,
      phaseDeg: 0,
      gain: 1.5,
      speedMax: 0.25,
    },
    {
      channel: 'delay',
      min: 150,
      max: 550,
      amplitude: 12,
      periodS: 2.1,
      phaseDeg: 5,
      gain: 40,
      speedMax: 3.5,
    },
  ],
} as const;

export const seekForS = 180;
/** Energy alone creeps along below the cliff for up to four minutes before it goes over. */
const seekEnergyForS = 300;

/** Far below the cliff, and with the switch opened late. */
const begin = { drive: 45, delay: 380 };

export const pulserExperiment: ExperimentInput = findBestPulse('Find and hold the best pulse', seekForS);
export const energyExperiment: ExperimentInput = findBestPulse(
  'Seek energy alone, as not to do',
  seekEnergyForS,
);

function findBestPulse(title: string, afterS: number): ExperimentInput {
  return {
    title,
    objectiveId: null,
    graph: {
      steps: [
        { kind: 'start', id: 'start', title: '', ...at(0, 120), parameters: {} },
        {
          kind: 'move',
          id: 'move',
          title: 'Go well below the cliff',
          ...at(220, 120),
          parameters: {
            targets: [
              { channel: 'drive', value: begin.drive },
              { channel: 'delay', value: begin.delay },
            ],
            rampS: 4,
            timeoutS: 30,
          },
        },
        { kind: 'hold', id: 'hold', title: 'Let it settle', ...at(460, 120), parameters: { durationS: 2 } },
        {
          kind: 'seek',
          id: 'seek',
          title: 'Seek and hold the best',
          ...at(700, 120),
          parameters: {
            law: { ...pulserSeeking.law },
            actuators: pulserSeeking.actuators.map((actuator) => ({ ...actuator })),
            end: { afterS, whenConverged: null, when: null },
            invalidForS: 10,
          },
        },
        {
          kind: 'check',
          id: 'check',
          title: 'A clean pulse of 95 mJ',
          ...at(940, 120),
          parameters: { criterion: 'seek.objective >= 95' },
        },
        { kind: 'finish', id: 'finish', title: '', ...at(1180, 120), parameters: {} },
      ],
      edges: [
        edge('start', 'done', 'move'),
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
}
