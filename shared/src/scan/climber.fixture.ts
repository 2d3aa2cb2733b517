import { expect } from 'vitest';
import { FakePlant, scriptedSequencer } from './fake-plant.fixture.js';

const climbing = () =>
  scriptedSequencer(() => ({ requests: [{ channel: 'valve', base: 30, dither: 0 }] })).sequencer;

/** A run that has reached 25 and still climbs. */
export function climber(options = {}): FakePlant {
  const plant = new FakePlant({ sequencer: climbing(), ...options }).run();
  plant.scans(5);
  expect(plant.at.valve).toBe(25);
  return plant;
}

/** Scans until the run has ended; returns the last output. */
export function untilEnded(plant: FakePlant, atMost = 60) {
  for (let count = 1; count <= atMost; count++) {
    const output = plant.scan();
    if (output.runEnded) return output;
    expect(output.row).not.toBeNull();
  }
  throw new Error('The run did not end.');
}
