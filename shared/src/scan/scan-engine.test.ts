import { describe, expect, it } from 'vitest';
import { FakePlant, scriptedSequencer, written } from './fake-plant.fixture.js';

describe('a scan engine', () => {
  it('writes the heartbeat but nothing else while idle', () => {
    const plant = new FakePlant();
    const written = plant.scans(20).flatMap((output) => output.writes);
    expect(new Set(written.map(({ channel }) => channel))).toEqual(new Set(['beat']));
    expect(written.map(({ value }) => value)).toEqual([1, 2, 3, 4]);
    expect(plant.phase).toBe('idle');
  });

  it('moves nothing when it takes over', () => {
    const plant = new FakePlant();
    plant.at.valve = 33.3;
    plant.arm();
    const output = plant.scan();
    expect(written(output, 'valve')).toBe(33.3);
    expect(written(output, 'fan')).toBe(0);
  });

  it('makes a manual move at the slew limit and comes to rest when disarmed', () => {
    const plant = new FakePlant().arm();
    plant.engine.move('valve', 25, 'technician');
    const values = plant.scans(7).map((output) => written(output, 'valve'));
    expect(values).toEqual([21, 22, 23, 24, 25, 25, 25]);
    plant.engine.disarm('technician');
    const down = plant.scans(7).map((output) => written(output, 'valve'));
    expect(down).toEqual([24, 23, 22, 21, 20, undefined, undefined]);
    expect(plant.phase).toBe('idle');
    expect(plant.engine.isAtRest()).toBe(true);
  });

  it('runs an experiment, rests and ends the run with its verdict', () => {
    const { sequencer } = scriptedSequencer((_, step) =>
      step < 5
        ? { requests: [{ channel: 'valve', base: 20.5, dither: step % 2 ? 0.1 : -0.1 }] }
        : { end: { verdict: 'pass', reason: 'Finished.' } },
    );
    const plant = new FakePlant({ sequencer }).run();
    const outputs = plant.scans(10);
    const ended = outputs.find(({ runEnded }) => runEnded);
    expect(ended?.runEnded).toMatchObject({ status: 'finished', verdict: 'pass' });
    expect(ended?.row).not.toBeNull();
    expect(plant.phase).toBe('idle');
  });
});
