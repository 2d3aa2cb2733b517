import { describe, expect, it } from 'vitest';
import type { ScanOutput } from './scan-engine.types.js';
import {
  eventTypes,
  FakePlant,
  plantEnvelope,
  plantOrder,
  scriptedSequencer,
  written,
} from './fake-plant.fixture.js';

const request = (base: number, dither = 0) => ({ requests: [{ channel: 'valve', base, dither }] });
const ended = (outputs: ScanOutput[]) => outputs.find(({ runEnded }) => runEnded)?.runEnded;

describe('a run', () => {
  it('goes through stopping to rest after its experiment finished, and keeps its verdict', () => {
    const { sequencer, results } = scriptedSequencer((_, step) =>
      step < 5 ? request(22) : { end: { verdict: 'pass', reason: 'Finished.' } },
    );
    results.set('seek.best.valve', 21.5);
    const plant = new FakePlant({ sequencer }).run();
    const outputs = plant.scans(12);
    const values = outputs.map((output) => written(output, 'valve'));
    expect(values.slice(0, 8)).toEqual([21, 22, 22, 22, 22, 21, 20, undefined]);
    expect(ended(outputs)).toEqual({
      status: 'finished',
      verdict: 'pass',
      reason: 'Finished.',
      results: { 'seek.best.valve': 21.5 },
    });
    expect(outputs.filter(({ row }) => row).length).toBe(8);
    expect(outputs[7]?.runEnded).not.toBeNull();
    expect(plant.engine.status()).toMatchObject({ phase: 'idle', runId: null, bestPoint: { valve: 21.5 } });
  });

  it('leaves its best point behind until the next run, which begins without one', () => {
    const { sequencer, results } = scriptedSequencer((_, step) =>
      step < 2 ? {} : { end: { verdict: 'pass', reason: 'Finished.' } },
    );
    results.set('seek.best.valve', 21.5);
    const plant = new FakePlant({ sequencer }).run();
    plant.scans(5);
    expect(plant.engine.status()).toMatchObject({ runId: null, bestPoint: { valve: 21.5 } });
    results.clear();
    plant.engine.arm('t');
    plant.engine.startRun(plantOrder);
    plant.scan();
    expect(plant.engine.status()).toMatchObject({ runId: 'run-1', bestPoint: {} });
  });

  it('says what happened in the past tense and in order', () => {
    const { sequencer } = scriptedSequencer((_, step) => (step < 2 ? request(20) : {}));
    const plant = new FakePlant({ sequencer }).run();
    plant.scan();
    plant.engine.pause('t', 'a look');
    plant.engine.resume('t');
    plant.engine.stop('t', 'enough');
    const types = plant.scans(4).flatMap(eventTypes);
    expect(types).toEqual(['run.paused', 'run.resumed', 'run.stopping', 'run.ended']);
  });

  it('stopped in order is inconclusive, and its status says stopping meanwhile', () => {
    const { sequencer } = scriptedSequencer(() => request(30));
    const plant = new FakePlant({ sequencer }).run();
    plant.scans(5);
    plant.engine.stop('t', 'enough');
    expect(plant.engine.status()).toMatchObject({ phase: 'stopping', runId: 'run-1' });
    const outputs = plant.scans(8);
    expect(ended(outputs)).toMatchObject({ status: 'stopped', verdict: 'inconclusive', reason: 'enough' });
    expect(outputs.map((output) => written(output, 'valve')).slice(0, 5)).toEqual([24, 23, 22, 21, 20]);
  });

  it('holds the base without dither in a pause, lets its own time stand still, and records on', () => {
    const { sequencer, seen } = scriptedSequencer((_, step) => request(21, step % 2 ? 0.5 : -0.5));
    const plant = new FakePlant({ sequencer }).run();
    plant.scans(3);
    plant.engine.pause('t', 'a look');
    const paused = plant.scans(4);
    expect(paused.map((output) => written(output, 'valve'))).toEqual([21, 21, 21, 21]);
    expect(paused.every(({ row }) => row !== null)).toBe(true);
    expect(paused.map(({ runTS }) => runTS?.toFixed(1))).toEqual(['0.3', '0.4', '0.5', '0.6']);
    plant.engine.resume('t');
    plant.scan();
    expect(seen.map((tS) => tS.toFixed(1))).toEqual(['0.0', '0.1', '0.2', '0.3']);
  });

  it('takes a great dither out at the slew limit in a pause, which is no matter for the guard', () => {
    const { sequencer } = scriptedSequencer((_, step) => request(21, Math.min(step, 4)));
    const plant = new FakePlant({ sequencer }).run();
    plant.scans(6);
    expect(plant.at.valve).toBe(25);
    plant.engine.pause('t', 'a look');
    const paused = plant.scans(6);
    expect(paused.map((output) => written(output, 'valve'))).toEqual([24, 23, 22, 21, 21, 21]);
    expect(paused.flatMap(eventTypes)).toEqual(['run.paused']);
  });

  it('does not go on towards a far target while paused', () => {
    const { sequencer } = scriptedSequencer(() => request(80));
    const plant = new FakePlant({ sequencer }).run();
    plant.scans(4);
    plant.engine.pause('t', 'a look');
    expect(plant.scans(3).map((output) => written(output, 'valve'))).toEqual([24, 24, 24]);
  });

  it('records readings, requested and applied values, objective and signals in the order of its columns', () => {
    const { sequencer } = scriptedSequencer(() => request(50, 9));
    const plant = new FakePlant({ sequencer }).arm();
    const objective = {
      title: 'T',
      direction: 'maximise' as const,
      expression: 'temp / 2',
      unit: '°C',
      validity: [],
    };
    const columns = plant.engine.startRun({ ...plantOrder, objective });
    sequencer.signals[0] = 49.5;
    const { row } = plant.scan();
    const byName = Object.fromEntries(columns.map(({ name }, i) => [name, row?.[i]]));
    expect(byName).toMatchObject({
      temp: 50,
      twice: 100,
      'valve.requested': 59,
      'valve.applied': 21,
      'fan.requested': 0,
      'fan.applied': 0,
      'free.applied': NaN,
      objective: 25,
      'seek.estimate': 49.5,
    });
  });

  it('is not started where preflight finds errors', () => {
    const plant = new FakePlant({
      faults: [{ severity: 'error', code: 'preflight.x', step: 'seek', field: null, message: 'No.' }],
    }).arm();
    expect(() => plant.engine.startRun(plantOrder)).toThrow(/Preflight/);
    expect(plant.phase).toBe('armed');
    expect(plant.engine.status().runId).toBeNull();
  });

  it('joins the interventions of the guard into one event a second, and ends with the whole count', () => {
    const { sequencer } = scriptedSequencer((_, step) =>
      step < 25 ? request(150) : { end: { verdict: 'pass', reason: 'Done.' } },
    );
    const plant = new FakePlant({ sequencer });
    plant.at.valve = 100;
    const outputs = plant.run().scans(120);
    const counts = outputs.flatMap(({ events }) =>
      events.flatMap(({ body }) =>
        body.type === 'guard.intervened' && body.rule === 'range' ? [body.count] : [],
      ),
    );
    expect(counts).toEqual([1, 11, 21, 25]);
  });

  it('joins late scans into one event a second, with how many, the worst, and the most in a row', () => {
    const plant = new FakePlant().run();
    const late: Record<number, number> = {
      2: 0.11,
      5: 0.15,
      6: 0.3,
      8: 0.12,
      30: 0.2,
      33: 0.1,
      41: 0.5,
      42: 0.4,
    };
    const said: unknown[] = [];
    for (let i = 0; i < 44; i++) {
      if (i === 42) plant.engine.stop('t', 'enough');
      const { events } = plant.scan({ latenessS: late[i] ?? 0 });
      for (const { body } of events) if (body.type === 'scan.overran') said.push({ i, ...body });
    }
    const type = 'scan.overran';
    expect(said).toEqual([
      { i: 2, type, latenessMs: 110, consecutive: 1, count: 1 },
      { i: 12, type, latenessMs: 300, consecutive: 2, count: 3 },
      { i: 30, type, latenessMs: 200, consecutive: 1, count: 1 },
      { i: 41, type, latenessMs: 500, consecutive: 1, count: 1 },
      { i: 43, type, latenessMs: 400, consecutive: 2, count: 1 },
    ]);
  });

  it('is paused by an interlock, and resumed only once that is clear', () => {
    const interlock = {
      id: 'warm',
      title: 'W',
      condition: 'temp > 60',
      delayS: 0,
      action: 'pause',
      message: 'Warm.',
    };
    const plant = new FakePlant({ envelope: plantEnvelope({ content: { interlocks: [interlock] } }) }).run();
    plant.scan();
    plant.at.temp = 61;
    expect(eventTypes(plant.scan())).toEqual(['interlock.acted', 'run.paused']);
    expect(() => plant.engine.resume('t')).toThrow(/Warm/);
    plant.at.temp = 59;
    expect(eventTypes(plant.scan())).toEqual(['interlock.cleared']);
    plant.engine.resume('t');
    expect(plant.engine.status().isPaused).toBe(false);
  });

  it('is held from its first scan by an interlock that acted before it began', () => {
    const interlock = {
      id: 'warm',
      title: 'W',
      condition: 'temp > 60',
      delayS: 0,
      action: 'pause',
      message: 'Warm.',
    };
    const { sequencer, seen } = scriptedSequencer(() => request(30));
    const envelope = plantEnvelope({ content: { interlocks: [interlock] } });
    const plant = new FakePlant({ sequencer, envelope }).arm();
    plant.at.temp = 61;
    plant.scan();
    plant.engine.startRun(plantOrder);
    plant.scans(3);
    expect(plant.engine.status()).toMatchObject({ phase: 'running', isPaused: true });
    expect(seen).toEqual([]);
  });

  it('is stopped in order by an interlock, and only warned by another', () => {
    const stop = {
      id: 'warm',
      title: 'W',
      condition: 'temp > 60',
      delayS: 0,
      action: 'stop',
      message: 'Warm.',
    };
    const warn = { ...stop, id: 'mild', condition: 'temp > 55', action: 'warn', message: 'Mild.' };
    const plant = new FakePlant({ envelope: plantEnvelope({ content: { interlocks: [stop, warn] } }) }).run();
    plant.at.temp = 56;
    expect(eventTypes(plant.scan())).toEqual(['run.started', 'interlock.acted']);
    expect(plant.phase).toBe('running');
    plant.at.temp = 61;
    const outputs = plant.scans(3);
    expect(ended(outputs)).toMatchObject({ status: 'stopped', verdict: 'inconclusive', reason: 'Warm.' });
  });

  it('is judged before it is asked: a scan that trips never steps the experiment', () => {
    const { sequencer, seen } = scriptedSequencer(() => request(30));
    const hot = { id: 'hot', title: 'H', condition: 'temp > 60', delayS: 0, action: 'trip', message: 'Hot.' };
    const plant = new FakePlant({
      sequencer,
      envelope: plantEnvelope({ content: { interlocks: [hot] } }),
    }).run();
    plant.scans(2);
    plant.at.temp = 70;
    const output = plant.scan();
    expect(seen).toHaveLength(2);
    expect(written(output, 'valve')).toBe(21);
  });
});
