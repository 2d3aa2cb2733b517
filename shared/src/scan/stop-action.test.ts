import { describe, expect, it } from 'vitest';
import { FakePlant, plantEnvelope, scriptedSequencer, written } from './fake-plant.fixture.js';

function running(valve: object, fan: object = {}): FakePlant {
  const { sequencer } = scriptedSequencer(() => ({
    requests: [
      { channel: 'valve', base: 23, dither: 0 },
      { channel: 'fan', base: 3, dither: 0 },
    ],
  }));
  const plant = new FakePlant({ sequencer, envelope: plantEnvelope({ valve, fan }) }).run();
  plant.scans(6);
  expect(plant.at).toMatchObject({ valve: 23, fan: 3 });
  return plant;
}

const valuesOf = (plant: FakePlant, channel: string, count: number) =>
  plant.scans(count).map((output) => written(output, channel));

const stops: [string, (plant: FakePlant) => void][] = [
  ['an ordered stop', (plant) => plant.engine.stop('t', 'enough')],
  ['an emergency stop', (plant) => plant.engine.emergencyStop('t', 'smoke', 0)],
];

describe.each(stops)('%s', (kind, stop) => {
  it('of category 0 goes to rest at once and releases', () => {
    const plant = running({ stopCategory: 0 });
    stop(plant);
    expect(valuesOf(plant, 'valve', 3)).toEqual([20, undefined, undefined]);
  });

  it('of category 1 ramps to rest at the slew limit and releases', () => {
    const plant = running({ stopCategory: 1 });
    stop(plant);
    expect(valuesOf(plant, 'valve', 5)).toEqual([22, 21, 20, undefined, undefined]);
  });

  it('of category 2 ramps to rest and holds; an idle rig holds nothing', () => {
    const plant = running({ stopCategory: 2 });
    stop(plant);
    const held = kind === 'an ordered stop' ? undefined : 20;
    expect(valuesOf(plant, 'valve', 6)).toEqual([22, 21, 20, held, held, held]);
    expect(plant.engine.isAtRest()).toBe(true);
  });

  it('stops lower stop orders first while the others hold', () => {
    const plant = running({ stopOrder: 1 }, { stopOrder: 0 });
    stop(plant);
    const outputs = plant.scans(8);
    expect(outputs.map((output) => written(output, 'fan')).slice(0, 4)).toEqual([2, 1, 0, undefined]);
    expect(outputs.map((output) => written(output, 'valve')).slice(0, 7)).toEqual([
      23,
      23,
      23,
      22,
      21,
      20,
      undefined,
    ]);
  });

  it('writes the rest value on until the read-back confirms it', () => {
    const plant = running({ stopCategory: 1, readBackWithinS: 5 });
    plant.stuck.add('valve');
    stop(plant);
    expect(valuesOf(plant, 'valve', 6)).toEqual([22, 21, 20, 20, 20, 20]);
    expect(plant.engine.isAtRest()).toBe(false);
    plant.stuck.clear();
    expect(valuesOf(plant, 'valve', 2)).toEqual([20, undefined]);
    expect(plant.engine.isAtRest()).toBe(true);
  });
});

describe('a stop action whose wire is lost', () => {
  it('goes on with the actuators that can be reached, and completes the others on their return', () => {
    const plant = running({}, { stopOrder: 5 });
    plant.lost = ['main'];
    const without = plant.scans(6);
    expect(without.map((output) => written(output, 'valve'))).toEqual(Array(6).fill(undefined));
    expect(without.map((output) => written(output, 'fan')).slice(0, 4)).toEqual([2, 1, 0, undefined]);
    expect(plant.phase).toBe('tripped');
    /** The rig's own watchdog has moved it meanwhile: it is taken over from where it is found. */
    plant.at.valve = 21.5;
    plant.lost = [];
    expect(valuesOf(plant, 'valve', 4)).toEqual([20.5, 20, undefined, undefined]);
    expect(plant.phase).toBe('tripped');
  });

  it('brings in an actuator that is found outside its range on the way to rest', () => {
    const plant = running({});
    plant.lost = ['main'];
    plant.scan();
    plant.at.valve = 101.5;
    plant.lost = [];
    expect(valuesOf(plant, 'valve', 2)).toEqual([100.5, 99.5]);
  });

  it('goes on from the value written last where the read-back stays bad', () => {
    const plant = running({ readBackWithinS: 0.35 });
    plant.lost = ['main'];
    plant.scan();
    plant.lost = [];
    plant.bad.add('valve');
    expect(valuesOf(plant, 'valve', 8)).toEqual([undefined, undefined, undefined, undefined, 22, 21, 20, 20]);
    expect(plant.engine.isAtRest()).toBe(false);
  });

  it('jumps to rest on return by category 0 without knowing where it is', () => {
    const plant = running({ stopCategory: 0 });
    plant.lost = ['main'];
    plant.scan();
    plant.lost = [];
    plant.bad.add('valve');
    expect(valuesOf(plant, 'valve', 2)).toEqual([20, 20]);
  });
});

describe('an envelope put in force during a trip', () => {
  it('carries the stop action on with its limits', () => {
    const plant = new FakePlant().arm();
    plant.engine.move('valve', 23, 't');
    plant.scans(3);
    plant.engine.emergencyStop('t', 'smoke', 0);
    expect(valuesOf(plant, 'valve', 1)).toEqual([22]);
    plant.engine.setEnvelope(plantEnvelope({ valve: { rest: 21.5, slewPerS: 5 } }));
    expect(valuesOf(plant, 'valve', 3)).toEqual([21.5, undefined, undefined]);
  });

  it('is refused while the run is recorded to its end under the one before', () => {
    const plant = running({});
    plant.engine.emergencyStop('t', 'smoke', 0);
    plant.scan();
    expect(() => plant.engine.setEnvelope(plantEnvelope())).toThrow(/wait until it has ended/);
    expect(valuesOf(plant, 'valve', 2)).toEqual([21, 20]);
    plant.scan();
    plant.engine.setEnvelope(plantEnvelope());
  });
});
