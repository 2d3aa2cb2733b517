import { describe, expect, it } from 'vitest';
import { runEventBodySchema } from '../runs/run-event.schema.js';
import {
  testChain,
  testEnvelope,
  testGraph,
  testObjective,
  testRig,
  testStep as s,
  testSeek,
  testSurvey,
} from './experiment.fixture.js';
import { hill, runScript } from './scripted-plant.fixture.js';
import { createSequencer } from './sequencer.js';
import { resultNames } from './step-kinds.js';

const slow = testEnvelope({
  limits: testEnvelope().limits.map((limit) => ({ ...limit, slewPerS: 2 })),
});
const ended = (run: ReturnType<typeof runScript>) =>
  run.of('step.ended').map(({ step, port }) => `${step}.${port}`);

describe('move', () => {
  it('brings all actuators to their targets on straight lines at the same time', () => {
    const targets = [
      { channel: 'trim', value: 4 },
      { channel: 'load', value: { expression: '10 * 2' } },
    ];
    const run = runScript({ graph: testChain(s('move', { targets, rampS: 2 })), plant: hill });
    const half = run.scans.find(({ tS }) => tS > 0.98);
    expect(half?.applied['trim']).toBeCloseTo((half?.applied['load'] ?? 0) / 5, 9);
    expect(half?.applied['trim']).toBeCloseTo(2.1, 1);
    expect(run.scans.at(-1)?.applied).toEqual({ trim: 4, load: 20 });
    expect(run.results['move.durationS']).toBeCloseTo(2, 6);
    expect(run.end).toEqual({
      verdict: 'inconclusive',
      reason: 'The experiment came to its end without a check.',
    });
  });

  it('takes longer where the slew limit asks for it, and never asks to be faster', () => {
    const targets = [
      { channel: 'trim', value: 1 },
      { channel: 'load', value: 10 },
    ];
    const run = runScript({
      graph: testChain(s('move', { targets, rampS: 0.5 })),
      plant: hill,
      envelope: slow,
    });
    expect(run.results['move.durationS']).toBeCloseTo(5, 1);
    const loads = run.scans.flatMap(
      ({ requests }) => requests.find(({ channel }) => channel === 'load')?.base ?? [],
    );
    loads.slice(1).forEach((load, i) => expect(load - (loads[i] ?? 0)).toBeLessThanOrEqual(2 * 0.05));
  });

  it('leaves by "timeout" where the actuator does not come, and ends in order without an edge', () => {
    const graph = testChain(s('move', { rampS: 0, timeoutS: 3, targets: [{ channel: 'load', value: 80 }] }));
    const run = runScript({ graph, plant: hill, envelope: slow });
    expect(ended(run)).toEqual(['start.done', 'move.timeout']);
    expect(run.end).toEqual({
      verdict: 'inconclusive',
      reason: 'Step "move" left by "timeout", which leads nowhere: Not at the target after 3 s.',
    });
    const edges = ['start.done>move', 'move.done>finish', 'move.timeout>hold', 'hold.done>finish'];
    const caught = testGraph([...graph.steps, s('hold')], edges);
    expect(ended(runScript({ graph: caught, plant: hill, envelope: slow }))).toContain('hold.done');
  });

  it.each([
    ['that is no number', '1 / (flame - 1)', 'is no number'],
    ['outside the envelope', '10 + flame', 'is outside its envelope'],
  ])('ends the run for a target %s', (_name, expression, reason) => {
    const targets = [{ channel: 'trim', value: { expression } }];
    const run = runScript({ graph: testChain(s('move', { targets })), plant: hill });
    expect(run.end?.verdict).toBe('inconclusive');
    expect(run.end?.reason).toContain(reason);
    expect(run.scans.every(({ requests }) => requests.length === 0)).toBe(true);
  });

  it('knows how near the grid of an actuator lets it come', () => {
    const graph = testChain(s('move', { targets: [{ channel: 'trim', value: 1 }] }));
    const stuck = testEnvelope({
      limits: testEnvelope().limits.map((l) => ({ ...l, readBackTolerance: 1e-9 })),
    });
    const grids = new Map([['trim', { step: 0.3, origin: 0 }]]);
    expect(ended(runScript({ graph, plant: hill, envelope: stuck, grids }))).toContain('move.done');
  });
});

describe('settle', () => {
  const graph = testChain(s('settle', { channel: 'yield', band: 0.1, forS: 2, timeoutS: 20 }));

  it('is done once the channel has stayed in the band for the time', () => {
    // e^(−t) falls below the band of 0.1 at t = ln 10 = 2.303 s; the band must hold for 2 s from there.
    const run = runScript({ graph, plant: (_, tS) => ({ yield: 50 + Math.exp(-tS), flame: 1 }) });
    const expected = Math.log((1 - Math.exp(-2)) / 0.1) + 2;
    expect(run.results['settle.durationS']).toBeGreaterThan(expected - 0.1);
    expect(run.results['settle.durationS']).toBeLessThan(expected + 0.1);
    expect(run.results['settle.mean']).toBeCloseTo(50.04, 1);
    expect(ended(run)).toContain('settle.done');
  });

  it('leaves by "timeout" where it never stays', () => {
    const run = runScript({ graph, plant: (_, tS) => ({ yield: Math.sin(tS), flame: 1 }) });
    expect(ended(run)).toContain('settle.timeout');
    expect(run.end?.reason).toContain('did not stay within 0.1 for 2 s');
  });

  it('begins anew after a bad reading', () => {
    const run = runScript({
      graph,
      plant: (_, tS) => ({ yield: Math.abs(tS - 1) < 0.01 ? NaN : 50, flame: 1 }),
    });
    expect(run.results['settle.durationS']).toBeCloseTo(3, 1);
  });
});

describe('hold', () => {
  const graph = testChain(s('hold', { durationS: 10 }));

  it('asks for nothing and leaves the mean objective', () => {
    const run = runScript({ graph, plant: (_, tS) => ({ yield: tS, flame: 1 }) });
    expect(run.scans.length).toBe(201);
    expect(run.scans.every(({ requests }) => requests.length === 0)).toBe(true);
    expect(run.results['hold.objective']).toBeCloseTo(4.975, 9);
  });

  it('leaves no mean where less than nine tenths were valid', () => {
    const outFor = (share: number) => (_: unknown, tS: number) => ({
      yield: 1,
      flame: tS < 10 * share ? 0 : 1,
    });
    expect(runScript({ graph, plant: outFor(0.09) }).results).toEqual({ 'hold.objective': 1 });
    expect(runScript({ graph, plant: outFor(0.11) }).results).toEqual({});
  });
});

describe('check', () => {
  const check = (criterion: string, id: string) => s('check', { criterion }, id);

  it('passes where every criterion is met, all in one scan', () => {
    const run = runScript({
      graph: testChain(
        s('hold'),
        check('hold.objective > 80', 'a'),
        check('objective > 80 and flame == 1', 'b'),
      ),
      plant: hill,
    });
    expect(run.end).toEqual({
      verdict: 'pass',
      reason: 'The experiment came to its end: 2 of 2 checks met.',
    });
    expect(run.scans.length).toBe(21);
  });

  it('fails where one is not, and leaves by "no"', () => {
    const run = runScript({
      graph: testChain(check('yield > 99', 'a'), check('yield > 1', 'b')),
      plant: hill,
    });
    expect(run.end?.verdict).toBe('fail');
    expect(ended(run)).toEqual(['start.done', 'a.no']);
  });

  it.each(['yield > 1', 'objective > 1', 'hold.objective > 1', 'flame == 0 or yield > 1'])(
    '%s is neither met nor not met where an input is bad',
    (criterion) => {
      const graph = testChain(s('hold'), check('flame == 0', 'a'), check(criterion, 'b'));
      const run = runScript({ graph, plant: () => ({ yield: NaN, flame: 0 }) });
      expect(run.of('check.decided').map(({ isMet }) => isMet)).toEqual([true, null]);
      expect(ended(run).at(-1)).toBe('b.no');
      expect(run.end).toEqual({
        verdict: 'inconclusive',
        reason: 'The experiment came to its end: 1 of 2 checks met, 1 could not be decided.',
      });
    },
  );
});

describe('sequencer', () => {
  it('records the steps in their order and says which is active', () => {
    const run = runScript({ graph: testChain(s('hold')), plant: hill });
    expect(run.events.map(({ body }) => body)).toEqual([
      { type: 'step.started', step: 'start', kind: 'start' },
      { type: 'step.ended', step: 'start', port: 'done', results: {} },
      { type: 'step.started', step: 'hold', kind: 'hold' },
      { type: 'step.ended', step: 'hold', port: 'done', results: { 'hold.objective': 86 } },
      { type: 'step.started', step: 'finish', kind: 'finish' },
    ]);
    expect(run.scans[3]?.activeSteps).toEqual(['hold']);
    expect(run.scans.at(-1)?.activeSteps).toEqual([]);
  });

  it('refuses an expression that does not compile, naming its place', () => {
    const graph = testChain(s('check', { criterion: 'nothing > 1' }));
    expect(() => runScript({ graph, plant: hill })).toThrow(
      expect.objectContaining({
        code: 'expression.invalid',
        details: [expect.objectContaining({ field: 'steps.check.parameters.criterion' })],
      }),
    );
  });

  it.each([
    ['nothing', testGraph([], []), 'The experiment has no Start.'],
    [
      'a start that leads nowhere',
      testGraph([s('start')], []),
      'Step "start" left by "done", which leads nowhere.',
    ],
    [
      'checks in a ring',
      testGraph([s('start'), s('check')], ['start.done>check', 'check.yes>check', 'check.no>check']),
      'The steps lead back to themselves without taking time.',
    ],
    [
      'a survey that fails into itself',
      testGraph([s('start'), testSurvey({ from: 1, to: 1 })], ['start.done>survey', 'survey.failed>survey']),
      'The steps lead back to themselves without taking time.',
    ],
  ])('ends a run of %s', (_name, graph, reason) => {
    expect(runScript({ graph, plant: hill }).end).toEqual({ verdict: 'inconclusive', reason });
  });

  it('surveys, moves, seeks and checks its way to the optimum of a quadratic', () => {
    const best = { expression: 'survey.best.trim' };
    const graph = testChain(
      testSurvey({ from: -6, to: 6, points: 7, averageS: 0.2 }),
      s('move', { targets: [{ channel: 'trim', value: best }] }),
      testSeek({ end: { afterS: 300, whenConverged: { band: 0.01, forS: 20 }, when: null } }),
      s('check', {
        criterion: 'abs(seek.best.trim - 2.3) < 0.02 and seek.objective > survey.best.objective - 0.2',
      }),
    );
    const plant = ({ trim = NaN }) => ({ yield: 90 - (trim - 2.3) ** 2, flame: 1 });
    const run = runScript({ graph, plant, forS: 2000 });
    expect(run.end).toEqual({
      verdict: 'pass',
      reason: 'The experiment came to its end: 1 of 1 checks met.',
    });
    expect(run.results['survey.best.trim']).toBe(2);
    expect(run.results['seek.isConverged']).toBe(1);
    expect(run.scans.at(-1)?.applied['trim']).toBeCloseTo(2.3, 1);
    // Dithering at the optimum costs f''·a²/4 = 2·0.25/4 (mean of a² sin²).
    expect(run.results['seek.objective']).toBeCloseTo(90 - 0.125, 2);
    for (const { body } of run.events) expect(() => runEventBodySchema.parse(body)).not.toThrow();
    const promised = graph.steps.flatMap(resultNames);
    expect(Object.keys(run.results).sort()).toEqual(promised.sort());
  });

  it('gives the columns of every seek', () => {
    const graph = testChain(testSeek({}, 'first'), s('hold'), testSeek({}, 'second'));
    const context = {
      rig: testRig(),
      envelope: testEnvelope(),
      objective: testObjective(),
      graph,
      periodS: 1,
    };
    const sequencer = createSequencer(context);
    expect(sequencer.signalNames).toEqual(
      ['first', 'second'].flatMap((id) =>
        ['estimate', 'washout', 'demodulated', 'gradient'].map((n) => `${id}.${n}.trim`),
      ),
    );
  });
});
