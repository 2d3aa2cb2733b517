import { at, edge, type ExperimentInput, type ObjectiveInput } from '../../kit/scenario-input.js';

const whilePumping = [{ condition: 'pumpRunning > 0.5', message: 'Without feed the figure means nothing.' }];

export const yieldObjective: ObjectiveInput = {
  title: 'Yield',
  direction: 'maximise',
  expression: 'biomass',
  unit: 'g/L',
  validity: whilePumping,
};

export const wasteObjective: ObjectiveInput = {
  title: 'Waste',
  direction: 'minimise',
  expression: 'substrate',
  unit: 'g/L',
  validity: whilePumping,
};

/**
 * How Mixer 1 is sought, in real seconds; the bench runs at five times its speed.
 *
 * - Survey: a hill is 16 % wide at least half of its height, so that a point every 4 % cannot miss one. The
 *   cultures take 25 to 40 s of bench time to settle, hence 7 s at each point.
 * - Period 12 s, 60 s of bench time: cultures, dead time and analyser leave 70 % of the dither and lag about
 *   55°; the washout leads by 16.7°.
 * - Amplitude 1.5 %: on the best hill f'' = −0.037 g/L per (%)², so it costs f''a²/4 = 0.02 g/L, half a percent.
 * - Gain 2 for the yield: the error decays with 2 · 0.037 · 0.7 = 0.05 1/s, a tenth of ω = 0.52 rad/s and a fifth
 *   of the low-pass. A gram of yield is two of substrate, so for the waste it is 1.
 * - Check: the drift changes the height of a hill by 0.1 g/L either way while the run lasts, and the next lower
 *   hill is 0.4 g/L below at the least.
 * - The drift moves the best place by 0.7 % · 2π / 260 s = 0.02 %/s at most, which the estimate trails by 0.4 %.
 */
const seeking = {
  amplitude: 1.5,
  periodS: 12,
  phaseDeg: 38,
  min: 6,
  max: 94,
};
const filters = { washoutRatio: 0.3, lowPassRatio: 0.5 };

export const seekForS = 300;

type StepInput = ExperimentInput['graph']['steps'][number];

/** What differs between seeking the yield and seeking the waste. */
interface Sign {
  readonly title: string;
  readonly channel: 'biomass' | 'substrate';
  readonly gain: number;
  /** g/L, peak to peak: settled. */
  readonly band: number;
  readonly criterion: string;
}

const survey: StepInput = {
  kind: 'survey',
  id: 'survey',
  title: 'Look at all hills',
  ...at(220, 120),
  parameters: {
    actuators: [{ channel: 'distributor', from: 6, to: 94, points: 23, isUpAndDown: false }],
    settleS: 7,
    averageS: 1,
  },
};

const move: StepInput = {
  kind: 'move',
  id: 'move',
  title: 'Go to the best of them',
  ...at(460, 120),
  parameters: {
    targets: [{ channel: 'distributor', value: { expression: 'survey.best.distributor' } }],
    rampS: 3,
    timeoutS: 30,
  },
};

const settle = ({ channel, band }: Sign): StepInput => ({
  kind: 'settle',
  id: 'settle',
  title: 'Let it settle',
  ...at(700, 120),
  parameters: { channel, band, forS: 4, timeoutS: 40 },
});

const seek = ({ gain }: Sign): StepInput => ({
  kind: 'seek',
  id: 'seek',
  title: 'Seek and hold the best',
  ...at(940, 120),
  parameters: {
    law: { id: 'gradient', parameters: filters },
    actuators: [{ channel: 'distributor', ...seeking, gain }],
    end: { afterS: seekForS, whenConverged: null, when: null },
    invalidForS: 30,
  },
});

const check = ({ criterion }: Sign): StepInput => ({
  kind: 'check',
  id: 'check',
  title: 'As good as surveyed',
  ...at(1180, 120),
  parameters: { criterion },
});

const edges = [
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
];

/** The way of both experiments: look at all hills, climb the best, hold it. */
function findHill(sign: Sign): ExperimentInput {
  const start: StepInput = { kind: 'start', id: 'start', title: '', ...at(0, 120), parameters: {} };
  const finish: StepInput = { kind: 'finish', id: 'finish', title: '', ...at(1420, 120), parameters: {} };
  const steps = [start, survey, move, settle(sign), seek(sign), check(sign), finish];
  return { title: sign.title, objectiveId: null, graph: { steps, edges } };
}

export const yieldExperiment = findHill({
  title: 'Find and hold the best yield',
  channel: 'biomass',
  gain: 2,
  band: 0.15,
  criterion: 'seek.objective >= survey.best.objective - 0.2',
});

export const wasteExperiment = findHill({
  title: 'Find and hold the least waste',
  channel: 'substrate',
  gain: 1,
  band: 0.3,
  criterion: 'seek.objective <= survey.best.objective + 0.4',
});
