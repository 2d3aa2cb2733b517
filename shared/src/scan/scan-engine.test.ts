import { describe, expect, it } from 'vitest';
import { DomainError } from '../errors/domain-error.js';
import { eventTypes, FakePlant, plantEnvelope, plantOrder, written } from './fake-plant.fixture.js';
import type { ScanOutput } from './scan-engine.types.js';

function codeOf(command: () => unknown): string {
  try {
    command();
  } catch (error) {
    if (error instanceof DomainError) return error.code;
    throw error;
  }
  return 'accepted';
}

function detailsOf(command: () => unknown): string[] {
  try {
    command();
  } catch (error) {
    if (error instanceof DomainError) return error.details.map(({ field }) => field);
    throw error;
  }
  return [];
}

describe('a scan engine before it is armed', () => {
  it('is offline until every connection is up', () => {
    const plant = new FakePlant();
    plant.lost = ['aux'];
    plant.scan();
    expect(plant.phase).toBe('offline');
    plant.lost = [];
    expect(eventTypes(plant.scan())).toContain('connection.restored');
    expect(plant.phase).toBe('idle');
  });

  it('fills derived channels from good readings only', () => {
    const plant = new FakePlant();
    const { readings } = plant.engine;
    plant.scan();
    expect(readings.goodValue(readings.indexOf('twice'))).toBe(100);
    plant.at.temp = NaN;
    plant.scan();
    expect(readings.isGood(readings.indexOf('twice'))).toBe(false);
  });

  it('names every obstacle to arming, in words, and refuses with them', () => {
    const plant = new FakePlant({ envelope: plantEnvelope({ fan: { whenFoundOutside: 'refuse' } }) });
    plant.at.fan = 120;
    plant.at.temp = 95;
    plant.bad.add('valve');
    plant.serverSilentS = 3;
    plant.engine.setLockout(true);
    plant.scan();
    expect(codeOf(() => plant.engine.arm('technician'))).toBe('rig.cannot-arm');
    expect(detailsOf(() => plant.engine.arm('technician')).sort()).toEqual(
      ['channels.fan', 'channels.valve', 'interlocks.too-hot', 'lockout', 'server'].sort(),
    );
    expect(plant.engine.status().armingObstacles).toHaveLength(5);
    expect(plant.phase).toBe('idle');
  });

  it('does not arm on a stale sensor, without an envelope, or before the interlocks were judged', () => {
    const stale = new FakePlant();
    stale.bad.add('temp');
    stale.scan();
    /** The bad sensor makes its interlock not clear as well. */
    expect(detailsOf(() => stale.engine.arm('t'))).toEqual(['channels.temp', 'interlocks.too-hot']);

    const bare = new FakePlant({ envelope: null });
    bare.scan();
    expect(detailsOf(() => bare.engine.arm('t'))).toEqual(['envelope']);
    bare.engine.setEnvelope(plantEnvelope());
    expect(detailsOf(() => bare.engine.arm('t'))).toContain('interlocks');
    bare.scan();
    expect(codeOf(() => bare.engine.arm('t'))).toBe('accepted');
  });

  it('refuses an envelope that does not fit the rig, and keeps the one before', () => {
    const plant = new FakePlant();
    const foreign = plantEnvelope({ fan: { channel: 'temp' } });
    expect(codeOf(() => plant.engine.setEnvelope(foreign))).toBe('channel.not-found');
    const interlock = {
      id: 'x',
      title: 'X',
      condition: 'nothing > 1',
      delayS: 0,
      action: 'trip',
      message: 'X',
    };
    const unclear = plantEnvelope({ content: { interlocks: [interlock] } });
    expect(codeOf(() => plant.engine.setEnvelope(unclear))).toBe('expression.invalid');
    plant.scan();
    expect(codeOf(() => plant.engine.arm('t'))).toBe('accepted');
    expect(codeOf(() => plant.engine.setEnvelope(plantEnvelope()))).toBe('rig.busy');
  });

  it('answers each command that is not allowed now with its own code', () => {
    const plant = new FakePlant();
    const { engine } = plant;
    expect(codeOf(() => engine.arm('t'))).toBe('rig.offline');
    plant.scan();
    expect(codeOf(() => engine.move('valve', 30, 't'))).toBe('rig.not-armed');
    expect(codeOf(() => engine.startRun(plantOrder))).toBe('rig.not-armed');
    expect(codeOf(() => engine.stop('t', 'why'))).toBe('run.not-running');
    expect(codeOf(() => engine.reset('t', 'why'))).toBe('rig.not-tripped');
    engine.arm('t');
    expect(codeOf(() => engine.move('temp', 30, 't'))).toBe('channel.not-found');
    expect(codeOf(() => engine.move('free', 30, 't'))).toBe('channel.no-limit');
    expect(codeOf(() => engine.move('valve', 101, 't'))).toBe('request.invalid');
    expect(codeOf(() => engine.move('valve', NaN, 't'))).toBe('request.invalid');
    expect(codeOf(() => engine.pause('t', 'why'))).toBe('run.not-running');
    engine.startRun(plantOrder);
    expect(codeOf(() => engine.startRun(plantOrder))).toBe('rig.busy');
    expect(codeOf(() => engine.move('valve', 30, 't'))).toBe('rig.busy');
    expect(codeOf(() => engine.disarm('t'))).toBe('rig.busy');
    expect(codeOf(() => engine.resume('t'))).toBe('run.not-running');
  });
});

describe('a scan engine that is armed', () => {
  it('moves nothing when it takes over', () => {
    const plant = new FakePlant();
    plant.at.valve = 33.3;
    plant.arm();
    const outputs = plant.scans(3);
    for (const output of outputs) {
      expect(written(output, 'valve')).toBe(33.3);
      expect(written(output, 'fan')).toBe(0);
    }
  });

  it('brings an actuator that is found outside in at its slew limit, where the envelope says so', () => {
    const plant = new FakePlant({ envelope: plantEnvelope({ valve: { whenFoundOutside: 'slew-in' } }) });
    plant.at.valve = 102.5;
    plant.arm();
    expect(plant.scans(4).map((output) => written(output, 'valve'))).toEqual([101.5, 100.5, 100, 100]);
  });

  it('says by channel what is written, and nothing where nothing is', () => {
    const plant = new FakePlant();
    const of = (output: ScanOutput) =>
      ['valve', 'fan', 'temp', 'beat'].map((id) => output.applied[plant.engine.readings.indexOf(id)]);
    expect(of(plant.scan())).toEqual([NaN, NaN, NaN, NaN]);
    plant.engine.arm('t');
    plant.engine.move('valve', 25, 't');
    expect(of(plant.scan())).toEqual([21, 0, NaN, NaN]);
    plant.engine.disarm('t');
    plant.scans(3);
    expect(of(plant.scan())).toEqual([NaN, NaN, NaN, NaN]);
  });

  it('makes a manual move at the slew limit, and comes to rest when disarmed', () => {
    const plant = new FakePlant().arm();
    plant.engine.move('valve', 25, 'technician');
    const up = plant.scans(7).map((output) => written(output, 'valve'));
    expect(up).toEqual([21, 22, 23, 24, 25, 25, 25]);
    plant.engine.disarm('technician');
    expect(plant.phase).toBe('stopping');
    const down = plant.scans(7).map((output) => written(output, 'valve'));
    expect(down).toEqual([24, 23, 22, 21, 20, undefined, undefined]);
    expect(plant.phase).toBe('idle');
    expect(plant.engine.isAtRest()).toBe(true);
  });

  it('moves on a wire with a coarse grid no faster than the slew limit', () => {
    const grids = new Map([['valve', { step: 2.5, origin: 0 }]]);
    const plant = new FakePlant({ grids, envelope: plantEnvelope({ valve: { readBackTolerance: 3 } }) });
    plant.arm();
    plant.engine.move('valve', 30, 'technician');
    const values = plant.scans(12).map((output) => written(output, 'valve'));
    expect(values).toEqual([20, 20, 22.5, 22.5, 25, 25, 25, 27.5, 27.5, 30, 30, 30]);
  });

  it('learns the grid of its wire when the wire is opened', () => {
    const grids = new Map<string, { step: number; origin: number }>();
    const plant = new FakePlant({ grids });
    plant.lost = ['main', 'aux'];
    plant.scan();
    grids.set('valve', { step: 0.7, origin: 0 });
    plant.at.valve = 21;
    plant.lost = [];
    plant.arm();
    plant.engine.move('valve', 25, 'technician');
    expect(plant.scans(2).map((output) => written(output, 'valve'))).toEqual([21.7, 22.4]);
  });

  it('takes over from what is read in its first scan, not from what was read when arming was asked', () => {
    const plant = new FakePlant().arm();
    plant.at.valve = 40;
    expect(written(plant.scan(), 'valve')).toBe(40);
  });

  it('is stopped in order by a lockout', () => {
    const plant = new FakePlant().arm();
    plant.engine.setLockout(true);
    plant.scans(3);
    expect(plant.phase).toBe('idle');
    expect(codeOf(() => plant.engine.arm('t'))).toBe('rig.cannot-arm');
    plant.engine.setLockout(false);
    expect(codeOf(() => plant.engine.arm('t'))).toBe('accepted');
  });
});

describe('the heartbeat', () => {
  it('is written each period in every phase, alone while idle, and last', () => {
    const plant = new FakePlant();
    const idle = plant.scans(20).flatMap((output) => output.writes);
    expect(idle.map(({ channel }) => channel)).toEqual(['beat', 'beat', 'beat', 'beat']);
    expect(idle.map(({ value }) => value)).toEqual([1, 2, 3, 4]);
    plant.engine.arm('t');
    const armed = plant.scans(5);
    expect(armed[0]?.writes.map(({ channel }) => channel)).toEqual(['valve', 'fan', 'beat']);
    plant.engine.emergencyStop('t', 'test', 0);
    const tripped = plant
      .scans(10)
      .flatMap(({ writes }) => writes.filter(({ channel }) => channel === 'beat'));
    expect(tripped.map(({ value }) => value)).toEqual([6, 7]);
  });

  it('is silent without an envelope and while its own connection is down, and not for another one', () => {
    const plant = new FakePlant({ envelope: null });
    expect(plant.scans(10).flatMap(({ writes }) => writes)).toEqual([]);
    plant.engine.setEnvelope(plantEnvelope());
    plant.lost = ['main'];
    expect(plant.scans(10).flatMap(({ writes }) => writes)).toEqual([]);
    plant.lost = ['aux'];
    expect(plant.scans(10).flatMap(({ writes }) => writes)).toHaveLength(2);
  });

  it('wraps from 65 535 to 1', () => {
    const plant = new FakePlant({
      envelope: plantEnvelope({ content: { heartbeat: { channel: 'beat', periodS: 0.1 } } }),
    });
    let last = 0;
    for (let i = 0; i < 65_536; i++) last = written(plant.scan(), 'beat') ?? NaN;
    expect(last).toBe(1);
  });
});
