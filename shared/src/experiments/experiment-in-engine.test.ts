import { describe, expect, it } from 'vitest';
import type { EnvelopeContent } from '../envelopes/envelope.schema.js';
import { Quality } from '../rigs/quality.js';
import type { RunEventBody } from '../runs/run-event.schema.js';
import { createScanEngine } from '../scan/scan-engine.js';
import type { ScanOutput, ValueGrid } from '../scan/scan-engine.types.js';
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
import type { ExperimentGraph } from './experiment.schema.js';

interface Outcome {
  events: RunEventBody[];
  writes: number[];
  /** Time before each of `writes`, s. */
  dtS: number[];
  ended: ScanOutput['runEnded'];
}

const periodS = 0.05;

interface Setting {
  graph: ExperimentGraph;
  envelope: EnvelopeContent;
  grid: ValueGrid;
  /** Time since the scan before by the number of the scan, s. */
  dtS?: (n: number) => number;
  isLit?: (tS: number) => boolean;
}

/** As a loaded machine does it: from three tenths of a period to three periods. */
function jitter(seed: number): (n: number) => number {
  let state = seed;
  return () => {
    state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0;
    const share = state / 2 ** 32;
    return periodS * (share < 0.8 ? 0.3 + 1.2 * (share / 0.8) : 1.5 + 1.5 * ((share - 0.8) / 0.2));
  };
}

/** Runs a graph through the whole scan engine on the hill y = 90 − (trim − 2.3)², 50 ms a scan. */
function runInEngine({ graph, envelope, grid, dtS = () => periodS, isLit = () => true }: Setting): Outcome {
  const engine = createScanEngine({
    rig: testRig(),
    envelope: { id: 'e', version: 1, content: envelope },
    trip: null,
    isLockedOut: false,
    grids: new Map([['trim', grid]]),
  });
  const at: Record<string, number> = { trim: 0, load: 0, beat: 0, flame: 1 };
  const outcome: Outcome = { events: [], writes: [], dtS: [], ended: null };
  let tS = 0;
  for (let n = 1; n < 40_000 && !outcome.ended; n += 1) {
    const dt = dtS(n);
    tS += dt;
    at['flame'] = isLit(tS) ? 1 : 0;
    at['yield'] = 90 - ((at['trim'] ?? NaN) - 2.3) ** 2;
    engine.readings.channelIds.forEach((id, i) => {
      if (id !== 'loss') engine.readings.set(i, at[id] ?? NaN, Quality.good);
    });
    const input = {
      tS,
      dtS: dt,
      atMs: tS * 1000,
      latenessS: Math.max(0, dt - periodS),
      lostConnections: [],
      serverSilentS: 0,
    };
    const output = engine.scan(input);
    for (const { channel, value } of output.writes) {
      at[channel] = value;
      if (channel !== 'trim') continue;
      outcome.writes.push(value);
      outcome.dtS.push(dt);
    }
    outcome.events.push(...output.events.map(({ body }) => body));
    outcome.ended = output.runEnded;
    if (n === 2) engine.arm('technician');
    if (n === 4) {
      engine.startRun({
        runId: 'r',
        file: 'r.sqlite',
        by: 'engineer',
        experiment: { id: 'x', title: 'X', version: 1, graph },
        objective: testObjective(),
        manifest: {},
      });
    }
  }
  return outcome;
}

const limits = testEnvelope().limits.map((limit) => ({ ...limit, slewPerS: 4 }));
const envelope = testEnvelope({ limits });

describe('an experiment in the scan engine', () => {
  const graph = testChain(
    testSurvey({ from: -6, to: 6, points: 7, averageS: 0.2 }),
    s('move', { targets: [{ channel: 'trim', value: { expression: 'survey.best.trim' } }] }),
    testSeek({ end: { afterS: 300, whenConverged: { band: 0.02, forS: 20 }, when: null } }),
    s('check', { criterion: 'abs(seek.best.trim - 2.3) < 0.05 and seek.isAtEdge == 0' }),
  );

  const grids: [string, ValueGrid][] = [
    ['continuous', { step: 0, origin: 0 }],
    ['fine', { step: 0.01, origin: 0.003 }],
    ['finer than a scan moves, but badly so', { step: 0.11, origin: 0 }],
  ];
  /** Coarser than a scan moves: too coarse to seek on. */
  const coarse: [string, ValueGrid] = ['coarse', { step: 0.5, origin: 0.2 }];

  /** By how much a write moved further than slew limit and grid step allow, the worst of all. */
  function excess({ writes, dtS }: Outcome, step: number): number {
    return writes.reduce((worst, value, i) => {
      if (i === 0) return worst;
      const allowed = Math.max(4 * Math.min(dtS[i] ?? NaN, 2 * periodS), step);
      return Math.max(worst, Math.abs(value - (writes[i - 1] ?? NaN)) - allowed);
    }, -Infinity);
  }

  it.each(grids.slice(0, 2))(
    'passes on a wire that is %s, and the guard has nothing to do',
    (_name, grid) => {
      const outcome = runInEngine({ graph, envelope, grid });
      const { events, ended, writes } = outcome;
      expect(ended).toMatchObject({ status: 'finished', verdict: 'pass' });
      expect(events.filter(({ type }) => type === 'guard.intervened')).toEqual([]);
      expect(events.filter(({ type }) => type === 'survey.point-measured').length).toBe(14);
      expect(Math.max(...writes)).toBeLessThanOrEqual(10);
      expect(excess(outcome, 0.01)).toBeLessThan(1e-9);
    },
  );

  const end = { afterS: 30, whenConverged: null, when: null };
  const ordinary = [
    testSurvey({ from: -6, to: 6, points: 13, settleS: 0.1, averageS: 0.1 }),
    s('move', { targets: [{ channel: 'trim', value: -3.3 }], rampS: 0, timeoutS: 30 }),
    s('settle', { channel: 'yield', band: 0.5, forS: 0.2 }),
  ];
  const seeking = testChain(...ordinary, testSeek({ periodS: 2, end }));

  it.each([...grids, coarse].flatMap(([name, grid]) => [1, 2, 3].map((seed) => [name, seed, grid] as const)))(
    'leaves the guard nothing to do where scans come as they like, on a wire that is %s (seed %i)',
    (name, seed, grid) => {
      const graph = name === 'coarse' ? testChain(...ordinary) : seeking;
      const outcome = runInEngine({ graph, envelope, grid, dtS: jitter(seed) });
      expect(outcome.ended?.status).toBe('finished');
      expect(outcome.events.filter(({ type }) => type === 'guard.intervened')).toEqual([]);
      expect(outcome.events.filter(({ type }) => type === 'survey.point-measured').length).toBe(26);
      expect(outcome.events.some(({ type }) => type === 'scan.overran')).toBe(true);
      expect(excess(outcome, grid.step)).toBeLessThan(1e-9);
    },
  );

  it.each([1, 2, 3])(
    'walks back at the slew limit when the objective is invalid, and on (seed %i)',
    (seed) => {
      const graph = testChain(
        testSeek({ periodS: 2, gain: 0.5, end, invalidForS: 5 }),
        s('hold', { durationS: 1 }),
      );
      // Out for 0.8 s of every 7.3 s: in another phase of the dither each time.
      const isLit = (tS: number) => tS % 7.3 < 6.5;
      const outcome = runInEngine({
        graph,
        envelope,
        grid: { step: 0.01, origin: 0 },
        dtS: jitter(seed),
        isLit,
      });
      expect(outcome.ended?.status).toBe('finished');
      expect(outcome.events.filter(({ type }) => type === 'seek.retreated').length).toBeGreaterThan(2);
      expect(outcome.events.filter(({ type }) => type === 'guard.intervened')).toEqual([]);
      expect(excess(outcome, 0.01)).toBeLessThan(1e-9);
    },
  );

  it('takes the dither out at the slew limit where a seek fails, and the next step holds', () => {
    const steps = [s('start'), testSeek({ end, invalidForS: 0.5 }), s('hold', { durationS: 1 }), s('finish')];
    const graph = testGraph(steps, [
      'start.done>seek',
      'seek.done>finish',
      'seek.failed>hold',
      'hold.done>finish',
    ]);
    const isLit = (tS: number) => tS < 4.3;
    const outcome = runInEngine({ graph, envelope, grid: { step: 0.01, origin: 0 }, isLit });
    expect(outcome.ended?.status).toBe('finished');
    expect(outcome.events.filter(({ type }) => type === 'guard.intervened')).toEqual([]);
  });
});
