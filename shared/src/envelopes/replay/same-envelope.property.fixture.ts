import fc from 'fast-check';
import { expect, it } from 'vitest';
import { FakePlant, plantEnvelope, scriptedSequencer } from '../../scan/fake-plant.fixture.js';
import { recordRun, replayRecord, type TestRecord } from './replayed-plant.fixture.js';

const interlock = fc.record({
  delayS: fc.constantFrom(0, 0.1, 0.25, 0.5),
  action: fc.constantFrom('warn', 'pause', 'stop', 'trip'),
  threshold: fc.integer({ min: 60, max: 95 }),
  clearBelow: fc.option(fc.integer({ min: 30, max: 60 })),
  clearDelayS: fc.constantFrom(0, 0.2),
  isLatching: fc.boolean(),
});
/** What happens in one scan: a reading, and what people do. */
const moment = fc.record({
  temp: fc.oneof(fc.integer({ min: 20, max: 100 }), fc.constant(NaN)),
  lastsScans: fc.integer({ min: 1, max: 6 }),
  act: fc.constantFrom('none', 'none', 'acknowledge', 'bypass', 'end-bypass'),
  valve: fc.integer({ min: -20, max: 120 }),
});
const life = fc.record({
  interlocks: fc.array(interlock, { minLength: 1, maxLength: 4 }),
  moments: fc.array(moment, { minLength: 5, maxLength: 25 }),
});

/** Law: a run replayed under its own envelope acts when it acted, and never else. */
export function testSameEnvelope(numRuns: number): void {
  it(`finds every action of a record under its own envelope, and no other (${numRuns} lives)`, () => {
    let acted = 0;
    let clipped = 0;
    const check = ({ interlocks, moments }: typeof life extends fc.Arbitrary<infer T> ? T : never) => {
      const record = live(interlocks, moments);
      const { content } = envelopeOf(interlocks);
      const report = replayRecord(content, record.kept);
      const replayed = report.interlocks.flatMap(({ id, episodes }) =>
        episodes.map(({ fromTS }) => `${id} ${fromTS.toFixed(6)}`),
      );
      const kept = record.kept.events.flatMap(({ tS, body }) =>
        body.type === 'interlock.acted' ? [`${body.interlock} ${tS.toFixed(6)}`] : [],
      );
      acted += kept.length;
      expect(replayed.sort()).toEqual(kept.sort());
      const valve = report.actuators.find(({ channel }) => channel === 'valve');
      const rangeClips = lastCount(record.kept, 'range');
      clipped += rangeClips;
      expect(valve?.range.clips).toBe(rangeClips);
      expect(valve?.slew.clips).toBe(lastCount(record.kept, 'slew'));
      expect(report.hints.filter(({ kind }) => kind !== 'nuisance')).toEqual([]);
    };
    fc.assert(fc.property(life, check), { numRuns });
    // A law that is never put to the test proves nothing.
    expect(acted).toBeGreaterThan(numRuns / 2);
    expect(clipped).toBeGreaterThan(numRuns / 2);
  }, 300_000);
}

type Lock = typeof interlock extends fc.Arbitrary<infer T> ? T : never;
type Moment = typeof moment extends fc.Arbitrary<infer T> ? T : never;

function envelopeOf(interlocks: readonly Lock[]) {
  const all = interlocks.map((lock, i) => ({
    ...{ id: `lock-${i}`, title: 'T', message: 'M', protects: 'equipment', bypassAtMostS: 2 },
    ...{ delayS: lock.delayS, action: lock.action, condition: `temp > ${lock.threshold}` },
    clearCondition: lock.clearBelow === null ? null : `temp < ${lock.clearBelow}`,
    clearDelayS: lock.clearDelayS,
    isLatching: lock.isLatching,
  }));
  return plantEnvelope({ content: { interlocks: all, staleness: [] } });
}

function live(interlocks: readonly Lock[], moments: readonly Moment[]): { kept: TestRecord } {
  let valve = 20;
  const { sequencer } = scriptedSequencer(() => ({
    requests: [{ channel: 'valve', base: valve, dither: 0 }],
  }));
  const plant = new FakePlant({ envelope: envelopeOf(interlocks), sequencer });
  const script = moments.flatMap((now) => Array.from({ length: now.lastsScans }, (_, i) => ({ now, i })));
  const before = (scan: number) => {
    const { now, i } = script[scan] ?? {};
    if (!now) return;
    if (Number.isNaN(now.temp)) plant.bad.add('temp');
    else {
      plant.bad.clear();
      plant.at.temp = now.temp;
    }
    valve = now.valve;
    if (i === 0) interlocks.forEach((_, lock) => act(plant, now.act, `lock-${lock}`));
  };
  return { kept: recordRun(plant, script.length, before) };
}

function act(plant: FakePlant, what: Moment['act'], id: string): void {
  try {
    if (what === 'acknowledge') plant.engine.acknowledgeInterlock(id, 'technician');
    if (what === 'bypass')
      plant.engine.bypassInterlock({ interlock: id, forS: 0.45, by: 'officer', reason: 'Test.' });
    if (what === 'end-bypass') plant.engine.endBypass(id, 'officer');
  } catch {
    // Not allowed now: then nothing has changed.
  }
}

/** The count of the guard's interventions that the record tells last; it tells the final one at the end of a run only. */
function lastCount({ events }: TestRecord, rule: string): number {
  const counts = events.flatMap(({ body }) =>
    body.type === 'guard.intervened' && body.rule === rule && body.channel === 'valve' ? [body.count] : [],
  );
  return counts.at(-1) ?? 0;
}
