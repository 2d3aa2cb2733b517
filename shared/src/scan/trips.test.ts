import { describe, expect, it } from 'vitest';
import { climber, untilEnded } from './climber.fixture.js';
import { eventTypes, FakePlant, plantEnvelope, scriptedSequencer, written } from './fake-plant.fixture.js';

/** Scans until the rig trips; returns how many scans that took and the last output. */
function untilTripped(plant: FakePlant, atMost: number) {
  for (let count = 1; count <= atMost; count++) {
    const output = plant.scan();
    if (plant.phase === 'tripped') return { count, output };
  }
  throw new Error('Did not trip.');
}

const causes: [string, (plant: FakePlant) => void, string, number][] = [
  ['an interlock that held for its delay', (plant) => (plant.at.temp = 95), 'interlock:too-hot', 4],
  ['a sensor that gives no number', (plant) => (plant.at.temp = NaN), 'interlock:too-hot', 4],
  ['overruns', (plant) => (plant.latenessS = 0.11), 'overrun', 3],
  ['an actuator that does not follow', (plant) => plant.stuck.add('valve'), 'read-back:valve', 13],
  ['an actuator that cannot be read', (plant) => plant.bad.add('fan'), 'read-back:fan', 12],
  ['a lost connection', (plant) => plant.lost.push('aux'), 'connection:aux', 1],
  ['a silent server', (plant) => (plant.serverSilentS = 2.1), 'server-silent', 1],
];

describe.each(causes)('%s', (_, provoke, cause, scans) => {
  it('trips a run, which records its stop action and ends tripped and inconclusive', () => {
    const plant = climber();
    provoke(plant);
    const { count, output } = untilTripped(plant, 20);
    expect(count).toBe(scans);
    expect(plant.engine.status()).toMatchObject({ trip: { cause, by: null, later: [] }, runId: 'run-1' });
    expect(eventTypes(output)).toContain('rig.tripped');
    expect(output.row).not.toBeNull();
    expect(output.runEnded).toBeNull();
    const last = untilEnded(plant);
    expect(last.runEnded).toMatchObject({ status: 'tripped', verdict: 'inconclusive' });
    expect(last.row).not.toBeNull();
    expect(eventTypes(last)).toContain('run.ended');
    expect(plant.engine.status().runId).toBeNull();
  });

  it('trips an armed rig, but not an idle one', () => {
    const armed = new FakePlant().arm();
    armed.engine.move('valve', 99, 't');
    armed.scan();
    provoke(armed);
    untilTripped(armed, 20);
    expect(armed.engine.status().trip?.cause).toBe(cause);
    const idle = new FakePlant();
    idle.scan();
    provoke(idle);
    idle.scans(20);
    expect(idle.engine.status().trip).toBeNull();
  });

  it('cannot be reset while it is there, and can be once it is gone', () => {
    const plant = climber();
    provoke(plant);
    untilTripped(plant, 20);
    plant.scans(20);
    expect(() => plant.engine.reset('officer', 'looked at it')).toThrow(/still there/);
    plant.at.temp = 50;
    plant.latenessS = 0;
    plant.serverSilentS = 0;
    plant.lost = [];
    plant.bad.clear();
    plant.stuck.clear();
    plant.scans(20);
    expect(() => plant.engine.reset('officer', ' ')).toThrow();
    plant.engine.reset('officer', 'mended');
    expect(plant.engine.status()).toMatchObject({ phase: 'idle', trip: null });
    expect(plant.scan().writes.filter(({ channel }) => channel !== 'beat')).toEqual([]);
  });
});

describe('a trip', () => {
  it('by a stale sensor comes when its age is above the limit', () => {
    const plant = climber({ envelope: plantEnvelope({ content: { interlocks: [] } }) });
    plant.bad.add('temp');
    const { count } = untilTripped(plant, 20);
    expect(count).toBe(6);
    expect(plant.engine.status().trip?.cause).toBe('stale:temp');
  });

  it('does not come one scan before its limit', () => {
    const late = climber();
    late.latenessS = 0.11;
    late.scans(2);
    late.latenessS = 0;
    late.scan();
    late.latenessS = 0.11;
    late.scans(2);
    expect(late.phase).toBe('running');
    const silent = climber();
    silent.serverSilentS = 2;
    silent.scans(5);
    expect(silent.phase).toBe('running');
  });

  it.each([
    ['base', NaN, 0],
    ['dither', 20, Infinity],
  ])('comes from a %s that is no number, which is never written', (_, base, dither) => {
    const { sequencer } = scriptedSequencer((__, step) =>
      step < 2 ? {} : { requests: [{ channel: 'valve', base, dither }] },
    );
    const plant = new FakePlant({ sequencer }).run();
    plant.scans(2);
    const output = plant.scan();
    expect(written(output, 'valve')).toBeUndefined();
    expect(plant.engine.status().trip?.cause).toBe('non-finite:valve');
    const rules = output.events.flatMap(({ body }) => (body.type === 'guard.intervened' ? [body] : []));
    expect(rules).toMatchObject([{ rule: 'non-finite', requested: null, applied: 20, count: 1 }]);
  });

  it('comes from an experiment that asks for an actuator without a limit, or fails by itself', () => {
    const { sequencer } = scriptedSequencer(() => ({ requests: [{ channel: 'free', base: 1, dither: 0 }] }));
    const asking = new FakePlant({ sequencer }).run();
    expect(asking.scan().writes.map(({ channel }) => channel)).not.toContain('free');
    expect(asking.engine.status().trip?.cause).toBe('no-limit:free');
    const failing = scriptedSequencer(() => {
      throw new Error('a bug');
    });
    const plant = new FakePlant({ sequencer: failing.sequencer }).run();
    plant.scan();
    expect(plant.engine.status().trip?.cause).toBe('fault:sequencer');
  });

  it('keeps its first cause and lists what followed', () => {
    const plant = climber();
    plant.lost = ['main'];
    plant.scan();
    plant.engine.emergencyStop('t', 'pressed', 5000);
    plant.scans(10);
    const { trip } = plant.engine.status();
    expect(trip?.cause).toBe('connection:main');
    expect(trip?.later.map(({ cause }) => cause)).toEqual([
      'emergency-stop',
      'interlock:too-hot',
      'stale:temp',
    ]);
    expect(trip?.later[0]?.at).toBe('1970-01-01T00:00:05.000Z');
  });

  it('is not reset while a later cause is there', () => {
    const plant = climber();
    plant.engine.emergencyStop('t', 'pressed', 0);
    plant.at.temp = 95;
    plant.scans(10);
    expect(() => plant.engine.reset('officer', 'all well')).toThrow(/still there/);
    plant.at.temp = 50;
    plant.scan();
    plant.engine.reset('officer', 'all well');
    expect(plant.phase).toBe('idle');
  });

  it('is not reset before the stop action is complete', () => {
    const plant = climber();
    plant.engine.emergencyStop('t', 'pressed', 0);
    plant.scans(3);
    expect(() => plant.engine.reset('officer', 'all well')).toThrow(/still there/);
    plant.scans(4);
    plant.engine.reset('officer', 'all well');
    expect(plant.at.valve).toBe(20);
  });

  it('latched before the engine began starts it in tripped, and completes the stop action', () => {
    const trip = {
      cause: 'host-lost',
      message: 'Gone.',
      at: '2026-01-01T00:00:00.000Z',
      by: null,
      later: [],
    };
    const plant = new FakePlant({ trip });
    plant.at.valve = 22;
    expect(plant.phase).toBe('tripped');
    expect(plant.engine.isAtRest()).toBe(false);
    expect(plant.scans(4).map((output) => written(output, 'valve'))).toEqual([21, 20, undefined, undefined]);
    expect(plant.engine.isAtRest()).toBe(true);
    plant.engine.reset('officer', 'host is back');
    expect(plant.phase).toBe('idle');
  });
});

describe('the emergency stop', () => {
  const phases: [string, () => FakePlant][] = [
    ['offline', () => new FakePlant()],
    ['idle', idle],
    ['armed', () => new FakePlant().arm()],
    ['running', climber],
    ['stopping', stopping],
    ['tripped', tripped],
  ];
  function idle(): FakePlant {
    const plant = new FakePlant();
    plant.scan();
    return plant;
  }
  function stopping(): FakePlant {
    const plant = climber();
    plant.engine.stop('t', 'enough');
    return plant;
  }
  function tripped(): FakePlant {
    const plant = climber();
    plant.serverSilentS = 3;
    plant.scan();
    plant.serverSilentS = 0;
    return plant;
  }

  it.each(phases)('is accepted while %s, latched at once, and leads to rest', (phase, make) => {
    const plant = make();
    expect(plant.phase).toBe(phase);
    plant.engine.emergencyStop('reader', 'smoke', 1_700_000_000_000);
    expect(plant.phase).toBe('tripped');
    const { trip } = plant.engine.status();
    const all = [trip?.cause, ...(trip?.later ?? []).map(({ cause }) => cause)];
    expect(all).toContain('emergency-stop');
    plant.scans(20);
    expect(plant.at).toMatchObject({ valve: 20, fan: 0 });
    expect(plant.engine.isAtRest()).toBe(true);
    expect(() => plant.engine.arm('t')).toThrow(/tripped/);
  });

  it('notes who pressed, when and why', () => {
    const plant = climber();
    plant.engine.emergencyStop('reader', 'smoke', 1_700_000_000_000);
    expect(plant.engine.status().trip).toEqual({
      cause: 'emergency-stop',
      message: 'smoke',
      at: '2023-11-14T22:13:20.000Z',
      by: 'reader',
      later: [],
    });
    expect(untilEnded(plant).runEnded).toMatchObject({ status: 'tripped', reason: 'smoke' });
  });

  it('can be reset while the rig is offline, and leads to offline', () => {
    const plant = new FakePlant({ envelope: plantEnvelope({ content: { interlocks: [], staleness: [] } }) });
    plant.lost = ['main'];
    plant.scan();
    plant.engine.emergencyStop('t', 'test', 0);
    plant.scans(3);
    plant.engine.reset('officer', 'was a test');
    expect(plant.phase).toBe('offline');
  });
});
