import { describe, expect, it } from 'vitest';
import type { RunColumn } from '../../runs/run-columns.js';
import { plantEnvelope, plantRig } from '../../scan/fake-plant.fixture.js';
import { EnvelopeReplay } from './envelope-replay.js';
import type { RecordedEnd } from './replay-hints.js';

const column = (name: string, kind: RunColumn['kind']): RunColumn => ({ name, title: name, unit: '', kind });
const columns = [
  column('temp', 'reading'),
  column('valve', 'reading'),
  column('valve.requested', 'requested'),
  column('valve.applied', 'applied'),
  column('seek.estimate.valve', 'signal'),
];
const lock = {
  id: 'hot',
  title: 'Too hot',
  condition: 'temp > 90',
  delayS: 0.3,
  action: 'trip',
  message: 'Hot.',
};
const finished: RecordedEnd = { status: 'finished', trip: null };
const tripped: RecordedEnd = { status: 'tripped', trip: { cause: 'interlock:hot', tS: 1 } };

interface Row {
  temp?: number;
  valve?: number;
  requested?: number;
  applied?: number;
  estimate?: number;
}

/** Rows 0.1 s apart, replayed under the plant's envelope with a change. */
function replay(rows: Row[], content: object = {}, end = finished, valve: object = {}) {
  const draft = plantEnvelope({ content: { interlocks: [lock], ...content }, valve }).content;
  const run = new EnvelopeReplay(draft, { rig: plantRig, columns });
  rows.forEach(({ temp = 50, valve: read = 20, requested = NaN, applied = NaN, estimate = NaN }, i) =>
    run.scan(i / 10, [temp, read, requested, applied, estimate]),
  );
  return run.report(end);
}

const temps = (...values: number[]): Row[] => values.map((temp) => ({ temp }));

describe('an interlock in a replay', () => {
  it('acts when its condition has held for its delay, and stays so until it clears', () => {
    // True from 0.2 s on, due 0.3 s later, false again at 0.8 s.
    const rows = temps(50, 60, 91, 95, 95, 95, 95, 91, 80, 70);
    const [found] = replay(rows).interlocks;
    expect(found).toMatchObject({ acts: 1, nearMisses: 0, isTrueAtStart: false, badScans: 0 });
    expect(found?.episodes).toEqual([
      { fromTS: 0.5, durationS: expect.closeTo(0.3, 9) as number, isOpen: false },
    ]);
    expect(found?.leastMargin).toEqual({ value: -5, atTS: 0.3 });
  });

  it('shows how near it was where it never acted', () => {
    const [found] = replay(temps(50, 88.5, 91, 91, 50, 50)).interlocks;
    expect(found).toMatchObject({ acts: 0, nearMisses: 1, episodes: [] });
    expect(found?.longestNearMissS).toBeCloseTo(0.2, 9);
    expect(found?.leastMargin).toEqual({ value: -1, atTS: 0.2 });
  });

  it('counts a reading that was not good as violated, and says that it was that', () => {
    const [found] = replay(temps(50, NaN, NaN, NaN, NaN, 50), { staleness: [] }).interlocks;
    expect(found).toMatchObject({ acts: 1, badScans: 4 });
  });

  it('is left out with the reason where that run had no such channel', () => {
    const [found] = replay(temps(99, 99, 99, 99, 99, 99), {
      interlocks: [{ ...lock, condition: 'pressure > 4' }],
    }).interlocks;
    expect(found?.acts).toBe(0);
    expect(found?.whyNotJudged).toContain('pressure');
  });

  it('stays open at the end of the record', () => {
    const [found] = replay(temps(95, 95, 95, 95, 95, 95)).interlocks;
    expect(found?.isTrueAtStart).toBe(true);
    expect(found?.episodes[0]?.isOpen).toBe(true);
    expect(found?.totalS).toBeCloseTo(0.2, 9);
  });
});

describe('the first halt', () => {
  it('is the interlock that came due first, where two act in one scan', () => {
    const quick = { ...lock, id: 'quick', condition: 'temp > 94', delayS: 0.05 };
    const report = replay(temps(50, 91, 91, 91, 95, 95), { interlocks: [quick, { ...lock, delayS: 0.4 }] });
    // `hot` is due at 0.1 + 0.4 s, `quick` at 0.4 + 0.05 s: both act at 0.5 s.
    expect(report.firstHalt).toEqual({ cause: 'interlock:quick', action: 'trip', tS: 0.5 });
  });

  it('is a sensor that went stale, where that came first', () => {
    const report = replay(temps(50, NaN, NaN, NaN, NaN, NaN, NaN, NaN), { interlocks: [] });
    // Last good at 0 s; 0.5 s are allowed.
    expect(report.firstHalt).toEqual({ cause: 'stale:temp', action: 'trip', tS: 0.6 });
    expect(report.staleness).toEqual([
      { channel: 'temp', trips: 1, firstTS: 0.6, oldestS: 0.7, oldestAtTS: 0.7 },
    ]);
  });

  it('is a hard-wired emergency stop that reads pressed', () => {
    const emergencyStopInputs = [{ channel: 'temp', title: 'Stop at the door', pressedWhen: 'zero' }];
    const report = replay(temps(1, 1, 0, 0, 1, 0), { interlocks: [], emergencyStopInputs });
    expect(report.firstHalt).toEqual({ cause: 'emergency-stop-input:temp', action: 'trip', tS: 0.2 });
    expect(report.emergencyStops[0]?.presses).toBe(2);
  });

  it('is too many overruns in a row', () => {
    const draft = plantEnvelope({ content: { overrunLimit: 3 } }).content;
    const run = new EnvelopeReplay(draft, { rig: plantRig, columns });
    run.event({ type: 'scan.overran', latenessMs: 130, consecutive: 2 }, 0.5);
    expect(run.report(finished).firstHalt).toBeNull();
    run.event({ type: 'scan.overran', latenessMs: 130, consecutive: 4 }, 0.9);
    expect(run.report(finished)).toMatchObject({
      firstHalt: { cause: 'overrun', tS: 0.9 },
      overruns: { mostInARow: 4, limit: 3, isTrip: true },
    });
  });

  it('is an actuator that does not follow for longer than the draft allows', () => {
    // Tolerance 0.5, within 0.2 s: the read-back stays at 20 while 25 was written from the first scan on.
    const rows = Array.from({ length: 6 }, () => ({ applied: 25, valve: 20 }));
    const report = replay(rows, {}, finished, { readBackWithinS: 0.2 });
    // Compared from 0.1 s on; longer than 0.2 s at 0.4 s.
    expect(report.firstHalt).toEqual({ cause: 'read-back:valve', action: 'trip', tS: 0.4 });
    const valve = report.actuators.find(({ channel }) => channel === 'valve');
    expect(valve).toMatchObject({ readBackTrips: 1, readBackLeastMargin: { value: -4.5, atTS: 0.1 } });
  });
});

describe('the guard in a replay', () => {
  const valveOf = (rows: Row[], valve: object) =>
    replay(rows, {}, finished, valve).actuators.find(({ channel }) => channel === 'valve');

  it('counts what the range would have clipped, and the least margin to it', () => {
    const rows = [20, 24, 31, 32].map((v) => ({ requested: v, applied: v, valve: v }));
    const found = valveOf(rows, { max: 30, slewPerS: 1000 });
    expect(found).toMatchObject({ requests: 4, appliedOutside: 2, range: { clips: 2 }, slew: { clips: 0 } });
    expect(found?.range.leastMargin).toEqual({ value: -2, atTS: 0.3 });
  });

  it('counts what a lower slew limit would have clipped', () => {
    // 20 → 21 → 22 → 22.2: 10 per s twice, then 2 per s, against 5 per s.
    const rows = [20, 21, 22, 22.2].map((v) => ({ requested: v, applied: v, valve: v }));
    const found = valveOf(rows, { slewPerS: 5 });
    expect(found?.slew.clips).toBe(2);
    expect(found?.slew.leastMargin?.value).toBeCloseTo(-5, 9);
  });

  it('counts dither around the estimate of a Seek beyond the draft’s amplitude', () => {
    const rows = [1, -1, 0.5, -0.5].map((d) => ({
      requested: 40 + d,
      applied: 40 + d,
      valve: 40 + d,
      estimate: 40,
    }));
    const found = valveOf(rows, { ditherAmplitudeMax: 0.8, slewPerS: 1000 });
    expect(found?.dither.clips).toBe(2);
    expect(found?.dither.leastMargin?.value).toBeCloseTo(-0.2, 9);
  });

  it('names an actuator that the draft leaves without a limit', () => {
    const report = replay([{ requested: 20, applied: 20 }]);
    expect(report.actuators.find(({ channel }) => channel === 'free')?.isLimited).toBe(false);
  });
});

describe('hints', () => {
  const hot = temps(50, 95, 95, 95, 95, 95);
  const cool = temps(50, 50, 50, 50, 50, 50);

  it('call a trip in a run that ended well a nuisance', () => {
    expect(replay(hot).hints.map(({ kind }) => kind)).toEqual(['nuisance']);
  });

  it('call a trip that would not have come missing', () => {
    expect(replay(cool, {}, tripped).hints.map(({ kind }) => kind)).toEqual(['missing']);
  });

  it('say by how much a trip would have come later', () => {
    const early: RecordedEnd = { status: 'tripped', trip: { cause: 'interlock:hot', tS: 0.15 } };
    const [hint] = replay(hot, {}, early).hints;
    // Due at 0.4 s, the record tripped at 0.15 s.
    expect(hint).toMatchObject({ kind: 'late' });
    expect(hint?.text).toContain('0.25 s later');
  });

  it('say nothing of a stop that no envelope decides about', () => {
    const pressed: RecordedEnd = { status: 'tripped', trip: { cause: 'emergency-stop', tS: 1 } };
    expect(replay(cool, {}, pressed).hints).toEqual([]);
  });
});
