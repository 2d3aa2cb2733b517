import { describe, expect, it } from 'vitest';
import { planDithers } from '../../dither/plan-dithers.js';
import {
  testChain,
  testEnvelope,
  testObjective,
  testRig,
  testSeek,
  testSurvey,
  type SeekChange,
} from '../experiment.fixture.js';
import type { ExperimentGraph } from '../experiment.schema.js';
import { preflight, type PreflightInput } from '../preflight.js';
import type { LawParameter, SeekActuator, SeekLaw } from '../seek/seek-parameters.schema.js';

const [trimLimit, loadLimit] = testEnvelope().limits;
const both = { ...loadLimit, ditherAmplitudeMax: 5 } as NonNullable<typeof loadLimit>;
const usual = {
  objective: testObjective(),
  rig: testRig(),
  envelope: testEnvelope({ limits: [trimLimit as NonNullable<typeof trimLimit>, both] }),
};

const judge = (graph: ExperimentGraph, change: Partial<PreflightInput> = {}) =>
  preflight({ graph, ...usual, ...change }).filter(({ code }) => code !== 'preflight.open-port');
/** Findings as `severity code field` below the parameters of the only step. */
const codes = (graph: ExperimentGraph, change: Partial<PreflightInput> = {}) =>
  judge(graph, change).map(
    ({ severity, code, field }) =>
      `${severity} ${code.replace('preflight.', '')} ${(field ?? '').replace('parameters.', '')}`,
  );
const seek = (change: SeekChange = {}) => testChain(testSeek(change));

const [usualActuator] = (testSeek().parameters as { actuators: SeekActuator[] }).actuators;
const actuator = (channel: string, change: Partial<SeekActuator> = {}): SeekActuator => ({
  ...(usualActuator as SeekActuator),
  channel,
  ...change,
});
const law = (id: SeekLaw['id'], parameters: Record<string, LawParameter> = {}): SeekLaw => ({
  id,
  parameters,
});
const two = (periods: [number, number], change: SeekChange = {}) =>
  seek({
    actuators: [
      actuator('trim', { periodS: periods[0] }),
      actuator('load', { periodS: periods[1], amplitude: 2 }),
    ],
    ...change,
  });

describe('preflight of a seek', () => {
  it('finds a dither faster than the slew limit: 0.5 % in 1 s needs π % a second', () => {
    const withSlew = (slewPerS: number) =>
      testEnvelope({ limits: testEnvelope().limits.map((limit) => ({ ...limit, slewPerS })) });
    expect(codes(seek(), { envelope: withSlew(3.15) })).toEqual([]);
    expect(codes(seek(), { envelope: withSlew(3.14) })).toEqual(['error dither-slew actuators[0].amplitude']);
    // A square of ±0.5 % changes sides within a quarter of its second at 4 % a second.
    const square = seek({ dither: 'square' });
    expect(codes(square, { envelope: withSlew(4.01) })).toEqual([]);
    expect(codes(square, { envelope: withSlew(3.99) })).toEqual([
      'warning dither-slew actuators[0].amplitude',
    ]);
  });

  it('finds what the grid of the actuator cannot carry', () => {
    const grids = new Map([['trim', { step: 0.6, origin: 0 }]]);
    expect(codes(seek(), { grids })).toEqual(['error dither-below-grid actuators[0].amplitude']);
    expect(codes(testChain(testSurvey({ points: 101 })), { grids })).toEqual([
      'warning points-below-grid actuators[0].points',
    ]);
  });

  const nine = ['a', 'b', 'c', 'd', 'e', 'f', 'g', 'h', 'i'];
  const cases: [string, ExperimentGraph, string[]][] = [
    [
      'a dither that the law cannot use',
      seek({ law: law('newton', { rate: 0.1, inverseRate: 0.1 }), dither: 'square', own: { curvature: 2 } }),
      ['error law-dither actuators[0].dither'],
    ],
    [
      'measured ripple without a channel to measure it on',
      seek({ dither: 'measured' }),
      ['error no-measured-channel actuators[0].measuredChannel'],
    ],
    [
      'measured ripple on a channel that is none',
      seek({ dither: 'measured', measuredChannel: 'ghost' }),
      ['error unknown-channel actuators[0].measuredChannel'],
    ],
    [
      'what the law needs of each actuator and has not',
      seek({ law: law('newton', { rate: 0.1, inverseRate: 0.1 }), periodS: null }),
      ['error law-parameter actuators[0].periodS', 'error law-parameter actuators[0].own.curvature'],
    ],
    [
      'what the law cannot take',
      seek({ law: law('slope'), own: { slope: 1, slopeShare: 2 } }),
      ['error law-parameter actuators[0].own.slopeShare'],
    ],
    ['a gain that the law needs', seek({ gain: null }), ['error law-parameter actuators[0].gain']],
    [
      'settling that outlasts the dwell',
      seek({ law: law('spsa', { dwellS: 1, settleS: 1 }) }),
      ['error law-parameter law.parameters.settleS', 'warning dwell-too-short law.parameters.dwellS'],
    ],
    [
      'a constrained law without a constraint',
      seek({ law: law('constrained', { side: 'above' }) }),
      ['error no-constraint constraint'],
    ],
    [
      'a constraint that its law would not keep',
      seek({ constraint: { expression: 'flame', bound: 1 } }),
      ['error unused-constraint constraint'],
    ],
    [
      'a constraint that cannot be understood',
      seek({ law: law('constrained', { side: 'above' }), constraint: { expression: 'flam', bound: 1 } }),
      ['error expression constraint.expression'],
    ],
    [
      'a constraint that is a condition',
      seek({ law: law('constrained', { side: 'above' }), constraint: { expression: 'flame > 1', bound: 1 } }),
      ['error no-quantity constraint.expression'],
    ],
    [
      'an actuator that is steered twice',
      two([1, 0.65], { actuators: [actuator('trim'), actuator('trim', { periodS: 0.65 })] }),
      ['error duplicate-target actuators[1].channel'],
    ],
    [
      'adaptation faster than a tenth of the dither',
      seek({ law: law('newton', { rate: 0.7, inverseRate: 0.6 }), own: { curvature: 2 } }),
      ['warning adaptation-fast law.parameters.rate'],
    ],
    [
      'an estimate as fast as the dither',
      seek({ speedMax: 0.5 }),
      ['warning adaptation-fast actuators[0].speedMax'],
    ],
    [
      'a wide search with a point for another number of actuators',
      seek({ wideSearch: wide({ by: 'list', points: [[1], [1, 2]] }) }),
      ['error search-point wideSearch.starts.points[1]'],
    ],
    [
      'a wide search that outlasts its step',
      seek({ wideSearch: wide({ by: 'grid', points: 60 }) }),
      ['error search-too-long end.afterS'],
    ],
    [
      'a wide search over a grid that multiplies',
      two([1, 0.65], { wideSearch: wide({ by: 'grid', points: 20 }) }),
      ['error search-too-long end.afterS'],
    ],
  ];
  it.each(cases)('finds %s', (_name, graph, expected) => expect(codes(graph)).toEqual(expected));

  it('finds more actuators than the law can steer', () => {
    const graph = seek({
      law: law('newton', { rate: 0.01, inverseRate: 0.01 }),
      actuators: nine.map((channel) => actuator(channel, { own: { curvature: 1 } })),
    });
    expect(codes(graph)).toContain('error law-actuators actuators');
    expect(codes(seek({ actuators: nine.map((channel) => actuator(channel)) }))).not.toContain(
      'error law-actuators actuators',
    );
  });

  it('has nothing against any law that has what it needs', () => {
    const laws: [SeekLaw, Partial<SeekActuator>][] = [
      [law('gradient'), {}],
      [law('gradient'), { dither: 'measured', measuredChannel: 'yield' }],
      [law('discrete'), {}],
      [law('newton', { rate: 0.1, inverseRate: 0.1 }), { own: { curvature: 2 }, gain: null }],
      [law('least-squares'), {}],
      [law('bounded-rate'), {}],
      [law('slope'), { own: { slope: 1 } }],
      [law('spsa', { dwellS: 0.5 }), { periodS: null }],
      [law('perturb-observe', { dwellS: 0.5 }), { periodS: null, gain: null }],
    ];
    for (const [one, change] of laws) expect(codes(seek({ law: one, ...change }))).toEqual([]);
    const constraint = { expression: 'flame - 1', bound: { expression: '0.5 + 1' } };
    expect(codes(seek({ law: law('constrained', { side: 'below' }), constraint }))).toEqual([]);
  });
});

describe('preflight of several dithers', () => {
  it('names the two that meet', () => {
    const same = judge(two([1, 1]));
    expect(same[0]).toMatchObject({
      severity: 'error',
      code: 'preflight.dithers-meet',
      field: 'parameters.actuators[1].periodS',
      message: expect.stringMatching(/frequencies of (trim and load|load and trim) meet/),
    });
    const harmonic = judge(two([1, 0.5])).filter(({ code }) => code === 'preflight.dithers-meet');
    expect(harmonic.map(({ message }) => message).join()).toContain('2·trim');
  });

  it('finds what is nearer than the low-pass can part', () => {
    // 1 Hz and 1.2 Hz: 0.2 Hz apart, the low-pass of 0.3 of 1 Hz lets it through.
    expect(codes(two([1, 1 / 1.2]))).toContain('warning dithers-near actuators[1].periodS');
    expect(codes(two([1, 1 / 1.2], { lowPassRatio: 0.15 }))).not.toContain(
      'warning dithers-near actuators[1].periodS',
    );
  });

  it('asks more of Newton, which looks at sums and differences as well', () => {
    // f2 = 3·f1 lies on the third harmonic for both; f2 − f1 = 2·f1 is looked at by Newton alone.
    const periods: [number, number] = [1.2, 0.4];
    const newton = two(periods, {
      law: law('newton', { rate: 0.05, inverseRate: 0.05, lowPassRatio: 0.3 }),
      actuators: [
        actuator('trim', { periodS: periods[0], own: { curvature: 1 } }),
        actuator('load', { periodS: periods[1], own: { curvature: 1 } }),
      ],
    });
    const meetings = (graph: ExperimentGraph) =>
      judge(graph).filter(({ code }) => code === 'preflight.dithers-meet').length;
    expect(meetings(newton)).toBeGreaterThan(meetings(two(periods)));
  });

  it('has nothing against what the planner has planned', () => {
    for (const id of ['gradient', 'newton'] as const) {
      const { periodsS } = planDithers({
        actuators: 2,
        law: id,
        scanS: 0.05,
        lowestHz: 0.2,
        highestHz: 2,
        apartHz: 0.06,
      });
      const graph = two([periodsS[0] ?? NaN, periodsS[1] ?? NaN], {
        law: law(
          id,
          id === 'newton' ? { rate: 0.01, inverseRate: 0.01, lowPassRatio: 0.3 } : { lowPassRatio: 0.3 },
        ),
        actuators: [
          actuator('trim', { periodS: periodsS[0] ?? NaN, own: { curvature: 1 } }),
          actuator('load', { periodS: periodsS[1] ?? NaN, own: { curvature: 1 } }),
        ],
        invalidForS: 6,
      });
      expect(codes(graph)).toEqual([]);
    }
  });
});

function wide(starts: NonNullable<SeekChange['wideSearch']>['starts']): SeekChange['wideSearch'] {
  return { starts, visit: { settleS: 0.5, seekS: 0, averageS: 0.5, everyS: null, advantage: 0 } };
}
