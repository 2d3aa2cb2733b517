import { describe, expect, it } from 'vitest';
import type { EnvelopeContent } from '../envelopes/envelope.schema.js';
import { Quality } from '../rigs/quality.js';
import type { RunEventBody } from '../runs/run-event.schema.js';
import { createScanEngine } from '../scan/scan-engine.js';
import type { ScanOutput, ValueGrid } from '../scan/scan-engine.types.js';
import { testChain, testEnvelope, testObjective, testRig, testStep as s } from './experiment.fixture.js';
import type { ExperimentGraph } from './experiment.schema.js';

interface Outcome {
  events: RunEventBody[];
  writes: number[];
  ended: ScanOutput['runEnded'];
}

/** Runs a graph through the whole scan engine on the hill y = 90 − (trim − 2.3)², 50 ms a scan. */
function runInEngine(graph: ExperimentGraph, envelope: EnvelopeContent, grid: ValueGrid): Outcome {
  const engine = createScanEngine({
    rig: testRig(),
    envelope: { id: 'e', version: 1, content: envelope },
    trip: null,
    isLockedOut: false,
    grids: new Map([['trim', grid]]),
  });
  const at: Record<string, number> = { trim: 0, load: 0, beat: 0, flame: 1 };
  const outcome: Outcome = { events: [], writes: [], ended: null };
  for (let n = 1; n < 40_000 && !outcome.ended; n += 1) {
    at['yield'] = 90 - ((at['trim'] ?? NaN) - 2.3) ** 2;
    engine.readings.channelIds.forEach((id, i) => {
      if (id !== 'loss') engine.readings.set(i, at[id] ?? NaN, Quality.good);
    });
    const input = {
      tS: n * 0.05,
      dtS: 0.05,
      atMs: n * 50,
      latenessS: 0,
      lostConnections: [],
      serverSilentS: 0,
    };
    const output = engine.scan(input);
    for (const { channel, value } of output.writes) {
      at[channel] = value;
      if (channel === 'trim') outcome.writes.push(value);
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
    s('survey', { from: -6, to: 6, points: 7, averageS: 0.2 }),
    s('move', { targets: [{ channel: 'trim', value: { expression: 'survey.best.trim' } }] }),
    s('seek', { end: { afterS: 300, whenConverged: { band: 0.02, forS: 20 }, when: null } }),
    s('check', { criterion: 'abs(seek.best.trim - 2.3) < 0.05 and seek.isAtEdge == 0' }),
  );

  it.each([
    ['continuous', { step: 0, origin: 0 }],
    ['on a grid', { step: 0.01, origin: 0.003 }],
  ])('passes on a %s wire, and the guard has nothing to do', (_name, grid) => {
    const { events, ended, writes } = runInEngine(graph, envelope, grid);
    expect(ended).toMatchObject({ status: 'finished', verdict: 'pass' });
    expect(events.filter(({ type }) => type === 'guard.intervened')).toEqual([]);
    expect(events.filter(({ type }) => type === 'survey.point-measured').length).toBe(14);
    expect(Math.max(...writes)).toBeLessThanOrEqual(10);
    writes.slice(1).forEach((value, i) => {
      expect(Math.abs(value - (writes[i] ?? NaN))).toBeLessThanOrEqual(4 * 0.05 + 0.01 + 1e-9);
    });
  });
});
