import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  testChain,
  testEnvelope,
  testGraph,
  testObjective,
  testRig,
  testStep,
  testSeek,
  testSurvey,
  type SeekChange,
} from './experiment.fixture.js';
import { edgeSchema, type ExperimentGraph, type Step, type StepKind } from './experiment.schema.js';
import { expressionSymbols } from './expression-symbols.js';
import { preflight, type PreflightInput } from './preflight.js';
import { preflightFaultSchema } from './preflight.types.js';
import { stepKinds } from './step-kinds.js';

const usual = { objective: testObjective(), rig: testRig(), envelope: testEnvelope() };
const judge = (graph: ExperimentGraph, change: Partial<PreflightInput> = {}) =>
  preflight({ graph, ...usual, ...change });

/** Findings as `severity code step field`, without the optional ports that the chains leave open. */
const codes = (graph: ExperimentGraph, change: Partial<PreflightInput> = {}) =>
  judge(graph, change)
    .filter((fault) => fault.code !== 'preflight.open-port')
    .map(
      ({ severity, code, step, field }) => `${severity} ${code.replace('preflight.', '')} ${step} ${field}`,
    );

const s = testStep;

describe('preflight', () => {
  it('has nothing against a sound experiment but its open optional ports', () => {
    const graph = testChain(
      s('move'),
      s('settle'),
      s('hold'),
      testSurvey(),
      s('move', { targets: [{ channel: 'trim', value: { expression: 'survey.best.trim' } }] }, 'toBest'),
      testSeek(),
      s('check', { criterion: 'seek.objective > hold.objective and survey.hysteresis < 1' }),
    );
    expect(codes(graph)).toEqual([]);
    expect(new Set(judge(graph).map(({ severity, code }) => `${severity} ${code}`))).toEqual(
      new Set(['warning preflight.open-port']),
    );
  });
});

describe('preflight of the structure', () => {
  const cases: [string, ExperimentGraph, string[]][] = [
    ['an empty graph', testGraph([], []), ['error no-start null null']],
    [
      'two starts',
      testGraph(
        [s('start'), s('start', {}, 'again'), s('finish')],
        ['start.done>finish', 'again.done>finish'],
      ),
      ['error several-starts again null'],
    ],
    [
      'an id used twice',
      testGraph([s('start'), s('finish', {}, 'start')], ['start.done>start']),
      ['error duplicate-step start id', 'error no-finish null null', 'error cycle start null'],
    ],
    [
      'a name that expressions keep',
      testGraph([s('start'), s('hold', {}, 'not'), s('finish')], ['start.done>not', 'not.done>finish']),
      ['error reserved-name not id'],
    ],
    [
      'edges from and to nowhere',
      testGraph([s('start'), s('finish')], ['start.done>finish', 'ghost.done>finish', 'start.done>ghost']),
      [
        'error unknown-step null null',
        'error unknown-step start ports.done',
        'error two-edges start ports.done',
      ],
    ],
    [
      'a port that the kind does not have',
      testGraph([s('start'), s('finish')], ['start.done>finish', 'start.failed>finish', 'finish.done>start']),
      ['error unknown-port start ports.failed', 'error unknown-port finish ports.done'],
    ],
    [
      'a dangling port and a step that nothing leads to',
      testGraph([s('start'), s('hold'), s('finish')], ['start.done>finish']),
      ['error dangling-port hold ports.done', 'error unreachable-step hold null'],
    ],
    [
      'no way to a finish, and a cycle',
      testGraph(
        [s('start'), s('hold'), s('settle')],
        ['start.done>hold', 'hold.done>settle', 'settle.done>hold'],
      ),
      ['error no-finish null null', 'error cycle hold null'],
    ],
  ];
  it.each(cases)('finds %s', (_name, graph, expected) => expect(codes(graph)).toEqual(expected));
});

const target = (channel: string, value: number | { expression: string } = 1) => ({ channel, value });
const move = (...targets: ReturnType<typeof target>[]) => testChain(s('move', { targets }));
const seek = (change: SeekChange) => testChain(testSeek(change));

describe('preflight of channels', () => {
  const cases: [string, ExperimentGraph, string[]][] = [
    [
      'an unknown actuator',
      move(target('trims')),
      ['error unknown-channel move parameters.targets[0].channel'],
    ],
    ['a sensor as actuator', move(target('yield')), ['error no-actuator move parameters.targets[0].channel']],
    ['the heartbeat', move(target('beat')), ['error heartbeat-commanded move parameters.targets[0].channel']],
    [
      'two targets',
      move(target('trim'), target('trim')),
      ['error duplicate-target move parameters.targets[1].channel'],
    ],
    [
      'an unknown channel to settle',
      testChain(s('settle', { channel: 'yeld' })),
      ['error unknown-channel settle parameters.channel'],
    ],
    [
      'an actuator to settle',
      testChain(s('settle', { channel: 'trim' })),
      ['error no-sensor settle parameters.channel'],
    ],
  ];
  it.each(cases)('finds %s', (_name, graph, expected) => expect(codes(graph)).toEqual(expected));

  it('finds an actuator without a limit, no envelope, no objective and a faulty one', () => {
    const limits = testEnvelope().limits.filter((limit) => limit.channel !== 'load');
    expect(codes(move(target('load')), { envelope: testEnvelope({ limits }) })).toEqual([
      'error no-limit move parameters.targets[0].channel',
    ]);
    expect(codes(move(target('load')), { envelope: null })).toEqual(['error no-envelope null null']);
    const graph = testChain(testSurvey(), testSeek(), s('check', { criterion: 'objective > 1' }));
    expect(codes(graph, { objective: null })).toEqual([
      'error no-objective survey null',
      'error no-objective seek null',
      'error no-objective check parameters.criterion',
    ]);
    const objective = testObjective({
      expression: 'yeld',
      validity: [{ condition: 'flam > 0', message: 'x' }],
    });
    expect(codes(move(target('load')), { objective })).toEqual([
      'error objective null objective.expression',
      'error objective null objective.validity[0].condition',
    ]);
  });

  it('says what to do', () => {
    expect(judge(move(target('trims'))).find((fault) => fault.severity === 'error')?.message).toBe(
      'The rig has no channel "trims": did you mean trim?',
    );
    expect(judge(move(target('trim', 11))).find((fault) => fault.severity === 'error')?.message).toBe(
      '11 % is outside the envelope of "trim": stay within -10 % to 10 %.',
    );
  });
});

describe('preflight of expressions', () => {
  const value = (expression: string) => target('trim', { expression });
  const field = 'move parameters.targets[0].value';
  const cases: [string, ExperimentGraph, string[]][] = [
    ['one that does not compile', move(value('1 +')), [`error expression ${field}`]],
    ['an unknown name', move(value('survey.best.trim')), [`error expression ${field}`]],
    ['one that gives no number', move(value('1 / 0')), [`error not-finite ${field}`]],
    ['one that is out of the envelope', move(value('2 * 6')), [`error outside-envelope ${field}`]],
    [
      'a result of a later step',
      testChain(s('move', { targets: [value('survey.best.trim')] }), testSurvey()),
      [`error not-available ${field}`],
    ],
    [
      'a criterion that is none',
      testChain(s('check', { criterion: 'yield' })),
      ['error no-condition check parameters.criterion'],
    ],
    [
      'an end condition that is none',
      seek({ end: { afterS: 60, whenConverged: null, when: 'yield + 1' } }),
      ['error no-condition seek parameters.end.when'],
    ],
  ];
  it.each(cases)('finds %s', (_name, graph, expected) => expect(codes(graph)).toEqual(expected));

  const fork = (edges: string[]) =>
    testGraph(
      [
        s('start'),
        s('check'),
        testSurvey(),
        s('move', { targets: [value('survey.best.trim')] }),
        s('finish'),
      ],
      ['start.done>check', 'check.yes>survey', 'survey.done>move', 'move.done>finish', ...edges],
    );

  it('wants a result on every way', () => {
    expect(codes(fork(['check.no>survey']))).toEqual([]);
    expect(codes(fork(['check.no>move']))).toEqual([`error not-available ${field}`]);
  });

  it('knows that a step left by "failed" leaves no results', () => {
    expect(codes(fork(['check.no>survey', 'survey.failed>move']))).toContain(`error not-available ${field}`);
  });

  it('lists what a step may name', () => {
    const graph = fork(['check.no>survey']);
    const channels = ['trim', 'load', 'beat', 'yield', 'flame', 'loss', 'objective'];
    expect([...expressionSymbols(testRig(), graph, 'survey')]).toEqual(channels);
    expect([...expressionSymbols(testRig(), graph, 'move')]).toEqual([
      ...channels,
      'survey.best.trim',
      'survey.best.objective',
      'survey.peaks',
      'survey.prominence',
      'survey.curvature.trim',
      'survey.curvatureError.trim',
      'survey.noise',
      'survey.hysteresis',
      'survey.backlash.trim',
      'survey.backlashError.trim',
    ]);
    expect([...expressionSymbols(testRig(), graph, 'nowhere')]).toEqual(channels);
  });
});

describe('preflight of settings', () => {
  const end = { afterS: 60, whenConverged: null, when: null };
  const cases: [string, ExperimentGraph, string[]][] = [
    [
      'a ramp longer than its timeout',
      testChain(s('move', { rampS: 10 })),
      ['error ramp-timeout move parameters.timeoutS'],
    ],
    [
      'a band longer than its timeout',
      testChain(s('settle', { forS: 10 })),
      ['error settle-timeout settle parameters.timeoutS'],
    ],
    [
      'a band under two scans',
      testChain(s('settle', { forS: 0.09 })),
      ['warning settle-too-short settle parameters.forS'],
    ],
    [
      'a survey outside the envelope',
      testChain(testSurvey({ from: -11, to: 11 })),
      [
        'error outside-envelope survey parameters.actuators[0].from',
        'error outside-envelope survey parameters.actuators[0].to',
      ],
    ],
    [
      'a survey of one point',
      testChain(testSurvey({ from: 3, to: 3 })),
      ['error survey-span survey parameters.actuators[0].to'],
    ],
    [
      'averaging under two scans',
      testChain(testSurvey({ averageS: 0.06 })),
      ['warning average-too-short survey parameters.averageS'],
    ],
    ['a box upside down', seek({ min: 2, max: 2 }), ['error seek-box seek parameters.actuators[0].min']],
    [
      'a box outside the envelope',
      seek({ min: -20, max: 20 }),
      [
        'error outside-envelope seek parameters.actuators[0].min',
        'error outside-envelope seek parameters.actuators[0].max',
      ],
    ],
    ['a box that the dither fills', seek({ min: 9.5 }), ['error seek-box seek parameters.actuators[0].min']],
    [
      'a dither above the envelope',
      seek({ amplitude: 1.5 }),
      ['error dither-above-envelope seek parameters.actuators[0].amplitude'],
    ],
    ['a gain of zero', seek({ gain: 0 }), ['error not-positive seek parameters.actuators[0].gain']],
    [
      'a period of zero',
      seek({ periodS: { expression: '1 - 1' } }),
      ['error not-positive seek parameters.actuators[0].periodS'],
    ],
    [
      'a dither at a third of the scan rate',
      seek({ periodS: 0.15 }),
      ['error dither-too-fast seek parameters.actuators[0].periodS'],
    ],
    [
      'a dither above an eighth of the scan rate',
      seek({ periodS: 0.35 }),
      ['warning dither-fast seek parameters.actuators[0].periodS'],
    ],
    [
      'a washout at the dither',
      seek({ washoutRatio: 1 }),
      ['warning washout-ratio seek parameters.law.parameters.washoutRatio'],
    ],
    [
      'a washout that hardly forgets',
      seek({ washoutRatio: 0.01 }),
      ['warning washout-slow seek parameters.law.parameters.washoutRatio'],
    ],
    [
      'a low-pass at the dither',
      seek({ lowPassRatio: 1 }),
      ['warning low-pass-ratio seek parameters.law.parameters.lowPassRatio'],
    ],
    [
      'too little time',
      seek({ end: { ...end, afterS: 9 } }),
      ['warning seek-too-short seek parameters.end.afterS'],
    ],
    [
      'convergence within a period',
      seek({ end: { ...end, whenConverged: { band: 1, forS: 1.5 } } }),
      ['warning convergence-too-short seek parameters.end.whenConverged.forS'],
    ],
    [
      'convergence that comes too late',
      seek({ end: { ...end, whenConverged: { band: 1, forS: 60 } } }),
      ['warning convergence-never seek parameters.end.whenConverged.forS'],
    ],
    [
      'giving up within a period',
      seek({ invalidForS: 0.5 }),
      ['warning retreat-too-short seek parameters.invalidForS'],
    ],
  ];
  it.each(cases)('finds %s', (_name, graph, expected) => expect(codes(graph)).toEqual(expected));
});

describe('preflight of any graph', () => {
  const name = fc.constantFrom('a', 'b', 'c', 'd', 'trim', 'ghost');
  const kinds = Object.keys(stepKinds) as StepKind[];
  const text = fc.constantFrom('a.best.trim', '1', 'b.objective > 1', 'objective', '1/0', 'x y', 'trim');
  const number = fc.oneof(
    fc.double({ noNaN: true }),
    text.map((expression) => ({ expression })),
  );
  const channel = fc.constantFrom('trim', 'load', 'beat', 'yield', 'ghost');
  const step: fc.Arbitrary<Step> = fc
    .record({ kind: fc.constantFrom(...kinds), id: name, text, a: number, b: number, c: number, channel })
    .map(({ kind, id, text, a, b, c, channel }) => {
      const made = testStep(kind, {}, id);
      if (made.kind === 'move') made.parameters.targets = [target(channel, a), target('trim', b)];
      if (made.kind === 'settle') made.parameters.channel = channel;
      if (made.kind === 'check') made.parameters.criterion = text;
      if (made.kind === 'survey')
        Object.assign(made.parameters.actuators[0] ?? {}, { channel, from: a, to: b });
      if (made.kind === 'seek') {
        Object.assign(made.parameters.actuators[0] ?? {}, { channel, amplitude: a, periodS: b, gain: c });
      }
      return made;
    });
  const edge = fc
    .record({
      id: fc.constant('e'),
      from: name,
      port: fc.constantFrom('done', 'timeout', 'failed', 'yes', 'no', 'ghost'),
      to: name,
    })
    .map((any) => edgeSchema.parse(any));
  const graph = fc.record({
    steps: fc.array(step, { maxLength: 8 }),
    edges: fc.array(edge, { maxLength: 12 }),
  });

  it('never throws and speaks as the schema says', () => {
    fc.assert(
      fc.property(graph, fc.boolean(), fc.boolean(), (any, hasObjective, hasEnvelope) => {
        const found = judge(any, {
          objective: hasObjective ? usual.objective : null,
          envelope: hasEnvelope ? usual.envelope : null,
        });
        for (const fault of found) preflightFaultSchema.parse(fault);
        if (!any.steps.some(({ kind }) => kind === 'start')) {
          expect(found.map(({ code }) => code)).toContain('preflight.no-start');
        }
      }),
      { numRuns: 300 },
    );
  }, 60_000);
});
