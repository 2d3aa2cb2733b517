import { envelopeContentSchema, type EnvelopeContent } from '../envelopes/envelope.schema.js';
import { objectiveContentSchema, type ObjectiveContent } from '../objectives/objective.schema.js';
import { rigSchema, type Rig } from '../rigs/rig.schema.js';
import {
  experimentGraphSchema,
  stepSchema,
  type ExperimentGraph,
  type Step,
  type StepKind,
  type StepOf,
} from './experiment.schema.js';

const display = { min: 0, max: 100, decimals: 1 };
const wire = { connection: 'plc', address: {} };

/** A rig with two actuators, a heartbeat and three sensors; 50 ms a scan unless told otherwise. */
export function testRig(change: Partial<Rig> = {}): Rig {
  return rigSchema.parse({
    id: 'bench-1',
    title: 'Bench',
    periodMs: 50,
    connections: [{ id: 'plc', title: 'PLC', adapter: 'in-memory', configuration: {} }],
    channels: [
      { kind: 'actuator', id: 'trim', title: 'Trim', unit: '%', display, ...wire },
      { kind: 'actuator', id: 'load', title: 'Load', unit: 'kW', display, ...wire },
      { kind: 'actuator', id: 'beat', title: 'Heartbeat', display, ...wire },
      { kind: 'sensor', id: 'yield', title: 'Yield', unit: '%', display, ...wire },
      { kind: 'sensor', id: 'flame', title: 'Flame', display, ...wire },
      { kind: 'derived', id: 'loss', title: 'Loss', unit: '%', display, expression: '100 - yield' },
    ],
    ...change,
  });
}

const limit = { slewPerS: 1000, rest: 0, stopCategory: 1, readBackTolerance: 0.1 };

export function testEnvelope(change: Partial<EnvelopeContent> = {}): EnvelopeContent {
  return envelopeContentSchema.parse({
    limits: [
      { channel: 'trim', min: -10, max: 10, ditherAmplitudeMax: 1, ...limit },
      { channel: 'load', min: 0, max: 100, ditherAmplitudeMax: 0, ...limit },
    ],
    interlocks: [],
    staleness: [],
    heartbeat: { channel: 'beat', periodS: 0.5 },
    overrunLimit: 10,
    serverSilenceS: 5,
    ...change,
  });
}

export function testObjective(change: Partial<ObjectiveContent> = {}): ObjectiveContent {
  return objectiveContentSchema.parse({
    title: 'Yield',
    direction: 'maximise',
    expression: 'yield',
    validity: [{ condition: 'flame > 0.5', message: 'The flame is out.' }],
    ...change,
  });
}

/** Parameters with which each kind passes preflight on the rig above. */
const parameters: { [K in StepKind]: StepOf<K>['parameters'] } = {
  start: {},
  move: { targets: [{ channel: 'trim', value: 1 }], rampS: 1, timeoutS: 10 },
  settle: { channel: 'yield', band: 0.5, forS: 1, timeoutS: 10 },
  hold: { durationS: 1 },
  survey: {
    actuators: [{ channel: 'trim', from: -5, to: 5, points: 11, isUpAndDown: true }],
    settleS: 0.2,
    averageS: 0.5,
    choose: 'highest',
  },
  seek: {
    law: { id: 'gradient', parameters: { washoutRatio: 0.3, lowPassRatio: 0.3, taper: null } },
    actuators: [
      {
        channel: 'trim',
        min: null,
        max: null,
        amplitude: 0.5,
        periodS: 1,
        phaseDeg: 0,
        dither: null,
        measuredChannel: null,
        gain: 0.05,
        speedMax: null,
        own: {},
      },
    ],
    constraint: null,
    wideSearch: null,
    end: { afterS: 60, whenConverged: null, when: null },
    invalidForS: 2,
  },
  check: { criterion: 'yield > 50' },
  finish: {},
};

/** A step named as its kind unless told otherwise, with some parameters changed. */
export function testStep<K extends StepKind>(
  kind: K,
  change: Partial<StepOf<K>['parameters']> = {},
  id: string = kind,
): Step {
  return stepSchema.parse({
    kind,
    id,
    position: { x: 0, y: 0 },
    parameters: { ...parameters[kind], ...change },
  });
}

type Seek = StepOf<'seek'>['parameters'];
type SeekActuator = Seek['actuators'][number];
type Survey = StepOf<'survey'>['parameters'];

/** A Seek of the gradient law on `trim`; what is named as in an actuator goes into it, the ratios into the law. */
export type SeekChange = Partial<Seek> &
  Partial<SeekActuator> & { washoutRatio?: number; lowPassRatio?: number };

export function testSeek(change: SeekChange = {}, id = 'seek'): Step {
  const { washoutRatio = 0.3, lowPassRatio = 0.3, ...rest } = change;
  const [actuator] = parameters.seek.actuators;
  const { own, ofStep } = parted(actuator as SeekActuator, rest);
  return testStep(
    'seek',
    {
      law: { id: 'gradient', parameters: { washoutRatio, lowPassRatio, taper: null } },
      actuators: [own],
      ...ofStep,
    },
    id,
  );
}

/** A Survey over `trim`; what is named as in an actuator goes into it. */
export function testSurvey(
  change: Partial<Survey> & Partial<Survey['actuators'][number]> = {},
  id = 'survey',
): Step {
  const [actuator] = parameters.survey.actuators;
  const { own, ofStep } = parted(actuator as Survey['actuators'][number], change);
  return testStep('survey', { actuators: [own], ...ofStep }, id);
}

function parted<T extends object>(actuator: T, change: object): { own: T; ofStep: object } {
  const isOwn = ([name]: [string, unknown]) => name in actuator;
  const entries = Object.entries(change) as [string, unknown][];
  return {
    own: { ...actuator, ...Object.fromEntries(entries.filter(isOwn)) },
    ofStep: Object.fromEntries(entries.filter((entry) => !isOwn(entry))),
  };
}

/** A graph with edges written as `from.port>to`. */
export function testGraph(steps: Step[], edges: string[]): ExperimentGraph {
  return experimentGraphSchema.parse({
    steps,
    edges: edges.map((text, index) => {
      const [from, port, to] = text.split(/[.>]/);
      return { id: `edge${index}`, from, port, to };
    }),
  });
}

/** Start, the given steps by their ports `done`, and Finish. */
export function testChain(...middle: Step[]): ExperimentGraph {
  const steps = [testStep('start'), ...middle, testStep('finish')];
  const edges = steps.slice(1).map((step, index) => {
    const from = steps[index] as Step;
    return `${from.id}.${from.kind === 'check' ? 'yes' : 'done'}>${step.id}`;
  });
  const noes = middle.filter((step) => step.kind === 'check').map((step) => `${step.id}.no>finish`);
  return testGraph(steps, [...edges, ...noes]);
}
